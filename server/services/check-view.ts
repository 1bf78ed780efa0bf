import type { CheckSummary, CheckView, RuleResultView } from '#shared/contract/http/checks';
import { definitionOf } from '#shared/rules/definitions';
import type { RuleResult } from '#shared/rules/finding';
import type { Check } from '../entities/check';
import { numberOf } from './capture-number';

export function toCheckSummary(check: Check): CheckSummary {
  return {
    id: check.id,
    decodeId: check.decodeId,
    rulebook: { key: check.rulebook, name: check.rulebookName, version: check.rulebookVersion },
    verdict: check.verdict,
    counts: check.figures.counts,
    worst: check.figures.worst,
    createdAt: new Date(check.createdAt).toISOString(),
  };
}

/** `check` with its decode and its detail. */
export function toCheckView(check: Check): CheckView {
  return {
    ...toCheckSummary(check),
    capture: numberOf(check.decode.captureId),
    rules: toRuleResultViews(check.detail.rules),
    findings: [...check.detail.findings],
  };
}

/** A rule this version no longer knows is left out. */
export function toRuleResultViews(rules: readonly RuleResult[]): RuleResultView[] {
  return rules.flatMap((rule) => {
    const definition = definitionOf(rule.id);
    if (definition === undefined) return [];
    const { name, quantity, sense, basis, source, needs, isMeasured } = definition;
    return [{ ...rule, name, quantity, sense, basis, source, needs, isMeasured }];
  });
}
