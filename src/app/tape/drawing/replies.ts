import type { Tape } from '#shared/contract/tape-payload';
import type { FindingView } from '#shared/contract/http/checks';
import { isWorse } from './finding-words';

/** What a reset got for an answer, and how the check judged its latency. */
export interface Reply {
  readonly reset: number;
  readonly onTicks: number;
  readonly replyTicks: number | null;
  /** In ticks; null without a reply. */
  readonly latencyTicks: number | null;
  /** null where the check did not judge this reset. */
  readonly verdict: FindingView['verdict'] | null;
  /** Index into the findings, −1 where there is none. */
  readonly finding: number;
}

/** Rules that judge the answer to a reset, the one that leads first. */
const RULES = ['HSK-1', 'HSK-8', 'HSK-4'] as const;

/** The replies in order of time, each with the worst finding on it that began at RTS ON. */
export function findReplies(tape: Tape, findings: readonly FindingView[]): Reply[] {
  const judged = new Map<number, number>();
  for (const rule of RULES) {
    findings.forEach((finding, i) => {
      if (finding.rule !== rule) return;
      const other = judged.get(finding.startTicks);
      if (other === undefined || isWorse(finding.verdict, findings[other].verdict))
        judged.set(finding.startTicks, i);
    });
  }
  return tape.resets.map((reset, r) => {
    const finding = judged.get(reset.onTicks) ?? -1;
    return {
      reset: r,
      onTicks: reset.onTicks,
      replyTicks: reset.replyTicks,
      latencyTicks: reset.replyTicks === null ? null : reset.replyTicks - reset.onTicks,
      verdict: finding < 0 ? null : findings[finding].verdict,
      finding,
    };
  });
}
