import type { Decoded } from '../decode/decoded';
import { judgeContactsAndReports, judgeContactToReport } from './contact';
import { judgeBounce, judgeHeldAtEnd, judgeThirdButton } from './btn';
import { definitionOf, RULE_DEFINITIONS } from './definitions';
import type { CheckResult, Finding, RuleResult } from './finding';
import * as frm from './frm';
import * as hsk from './hsk';
import { judgeCompatibleIds, judgeDeviations, judgeStringTiming } from './idn';
import * as lvl from './lvl';
import { judgeSlew, judgeStraightThrough, judgeTransitionTime } from './lvl-edges';
import * as mov from './mov';
import * as pkt from './pkt';
import { judgeProtocolChange } from './protocol-change';
import { judgeFromSheet, judgeHighestRail, judgeLowestRail } from './pwr';
import { judgeLineUse, judgeLongestStep } from './rpt';
import type { RuleOutcome } from './rule-context';
import { MOST_FINDINGS, notApplicable, RuleContext } from './rule-context';
import type { RuleDefinition } from './rule-definition';
import type { Rulebook, RuleSetting } from './rulebook';
import { overallVerdict } from './verdict';

/** Each rule with what judges it: the one place to add one. */
const JUDGES: Record<string, (context: RuleContext) => RuleOutcome> = {
  'HSK-1': hsk.judgeReplyLatency,
  'HSK-2': hsk.judgeFirstCharacter,
  'HSK-3': hsk.judgeCharactersWhileOff,
  'HSK-4': hsk.judgeMissingReplies,
  'HSK-5': hsk.judgeStrays,
  'HSK-6': hsk.judgeIdentificationGaps,
  'HSK-7': hsk.judgePulseWidth,
  'HSK-8': hsk.judgePowerUpLatency,
  'HSK-9': hsk.judgeDtrHeld,
  'HSK-10': hsk.judgeLatencyIndex,
  'HSK-11': hsk.judgeHostTiming,
  'HSK-12': hsk.judgeShortestPulse,
  'HSK-13': hsk.judgeTxdAtMark,
  'HSK-14': hsk.judgeDsr,
  'IDN-1': judgeDeviations,
  'IDN-2': judgeDeviations,
  'IDN-3': judgeDeviations,
  'IDN-4': judgeDeviations,
  'IDN-5': judgeDeviations,
  'IDN-6': judgeStringTiming,
  'IDN-7': judgeCompatibleIds,
  'IDN-8': judgeDeviations,
  'FRM-1': frm.judgeRate,
  'FRM-2': frm.judgeGrossDistortion,
  'FRM-3': frm.judgeStopElements,
  'FRM-4': frm.judgeShortElements,
  'FRM-5': frm.judgeParity,
  'FRM-6': frm.judgeBreaks,
  'FRM-7': frm.judgeInnerGaps,
  'FRM-8': frm.judgeSynchronousDistortion,
  'FRM-9': frm.judgeBias,
  'FRM-10': frm.judgeMargin,
  'PKT-1': pkt.judgeOrphans,
  'PKT-2': pkt.judgeReservedBits,
  'PKT-3': pkt.judgeFourthValues,
  'PKT-4': pkt.judgeIdlePackets,
  'PKT-5': pkt.judgeCutPackets,
  'PKT-6': judgeProtocolChange,
  'PKT-7': pkt.judgeWheelValues,
  'BTN-1': judgeBounce,
  'BTN-2': judgeHeldAtEnd,
  'BTN-3': judgeThirdButton,
  'BTN-4': judgeContactToReport,
  'BTN-5': judgeContactsAndReports,
  'MOV-1': mov.judgeSaturation,
  'MOV-2': mov.judgeWrap,
  'MOV-3': mov.judgeResolution,
  'MOV-4': mov.judgeClosure,
  'MOV-5': mov.judgeRest,
  'MOV-6': mov.judgeCrossAxis,
  'RPT-1': judgeLineUse,
  'RPT-3': judgeLongestStep,
  'LVL-1': lvl.judgeMark,
  'LVL-2': lvl.judgeSpace,
  'LVL-3': lvl.judgeOpenCircuit,
  'LVL-4': judgeSlew,
  'LVL-5': judgeTransitionTime,
  'LVL-6': judgeStraightThrough,
  'LVL-7': lvl.judgeSag,
  'PWR-1': judgeFromSheet,
  'PWR-2': judgeLowestRail,
  'PWR-3': judgeFromSheet,
  'PWR-4': judgeHighestRail,
};

/** Rules about edges: a byte log has none, and its stamps come after the characters. */
const NEEDS_EDGES = /^(HSK|IDN|FRM|LVL|PWR|RPT)-/;

/**
 * Judges a decode against a rulebook. Every rule of the product is in the result, also those that are not shown, not applicable
 * or switched off, each with its reason.
 */
export function check(decoded: Decoded, rulebook: Rulebook): CheckResult {
  const settings = new Map(rulebook.rules.map((setting) => [setting.id, setting]));
  const findings: Finding[] = [];
  const rules: RuleResult[] = [];
  for (const definition of RULE_DEFINITIONS) {
    const setting = settings.get(definition.id) ?? switchedOff(definition);
    const outcome = judge(decoded, setting, definition, settings);
    findings.push(...(outcome.findings ?? []));
    rules.push(toResult(setting, definition, outcome));
  }
  findings.sort((a, b) => a.startTicks - b.startTicks);
  const measures = (id: string): boolean => definitionOf(id)?.isMeasured === true;
  return {
    rulebook: { name: rulebook.name, version: rulebook.version },
    rules,
    findings,
    verdict: overallVerdict(rules, measures, decoded.capture.defects.length > 0),
  };
}

function switchedOff(definition: RuleDefinition): RuleSetting {
  return { id: definition.id, isEnabled: false, severity: 'note', decision: 'guarded', limit: null };
}

function judge(
  decoded: Decoded,
  setting: RuleSetting,
  definition: RuleDefinition,
  settings: ReadonlyMap<string, RuleSetting>,
): RuleOutcome {
  if (!setting.isEnabled) return notApplicable('the rulebook does not ask for it');
  if (decoded.capture.format === 'bytes' && NEEDS_EDGES.test(definition.id)) {
    return { verdict: 'not-shown', n: 0, reason: 'a byte log has no edges: record the lines themselves' };
  }
  return JUDGES[definition.id](new RuleContext(decoded, setting, definition, settings));
}

function toResult(setting: RuleSetting, definition: RuleDefinition, outcome: RuleOutcome): RuleResult {
  const hasNumber = outcome.measured !== undefined;
  const isCapped = (outcome.findings?.length ?? 0) >= MOST_FINDINGS;
  return {
    id: definition.id,
    verdict: outcome.verdict,
    severity: outcome.severity ?? setting.severity,
    n: outcome.n,
    measured: outcome.measured ?? null,
    uncertainty: outcome.uncertainty ?? null,
    uncertaintyKind: outcome.uncertaintyKind ?? null,
    limit: outcome.limit ?? setting.limit,
    unit: hasNumber || setting.limit !== null ? definition.unit : null,
    reason: isCapped ? `${outcome.reason}; the first ${MOST_FINDINGS} places are listed` : outcome.reason,
  };
}
