import type { CheckResult, RuleResult } from '../rules/finding';
import { definitionOf } from '../rules/definitions';

function escapeXml(text: string): string {
  return text
    .replace(/[^\t\n\r\x20-\ud7ff\ue000-\ufffd]/g, '?')
    .replace(/&/g, '&amp;')
    .replace(/</g, '&lt;')
    .replace(/>/g, '&gt;')
    .replace(/"/g, '&quot;');
}

/**
 * A check as a JUnit test suite. Violations of blocking rules are failures; with `strict` also inconclusive and not-shown ones,
 * which otherwise are skipped with their reason, never passed. Format: common practice.
 */
export function writeJunit(file: string, check: CheckResult, strict: boolean): string {
  const cases = check.rules.filter(
    (rule) => definitionOf(rule.id)?.isMeasured === true && rule.verdict !== 'not-applicable',
  );
  const outcomes = cases.map((rule) => ({ rule, outcome: outcomeOf(rule, strict) }));
  const count = (outcome: string): number => outcomes.filter((item) => item.outcome === outcome).length;
  const suite = `${file}, checked against ${check.rulebook.name} ${check.rulebook.version}`;
  return [
    `<testsuite name="${escapeXml(suite)}" tests="${cases.length}" failures="${count('failure')}" skipped="${count('skipped')}">`,
    ...outcomes.map(({ rule, outcome }) => testCase(rule, outcome)),
    '</testsuite>',
  ].join('\n');
}

/** The document around suites. */
export function wrapJunit(suites: readonly string[]): string {
  return `<?xml version="1.0" encoding="UTF-8"?>\n<testsuites>\n${suites.join('\n')}\n</testsuites>\n`;
}

type Outcome = 'passed' | 'failure' | 'skipped';

function outcomeOf(rule: RuleResult, strict: boolean): Outcome {
  if (rule.verdict === 'violation') return rule.severity === 'blocking' || strict ? 'failure' : 'skipped';
  if (rule.verdict === 'pass') return 'passed';
  return strict && rule.severity === 'blocking' ? 'failure' : 'skipped';
}

function testCase(rule: RuleResult, outcome: Outcome): string {
  const name = escapeXml(`${rule.id} ${definitionOf(rule.id)?.name ?? ''}`.trim());
  const open = `  <testcase classname="linewitness" name="${name}"`;
  const message = escapeXml(`${rule.verdict}: ${rule.reason}`);
  if (outcome === 'passed') return `${open}/>`;
  return `${open}><${outcome} message="${message}"/></testcase>`;
}
