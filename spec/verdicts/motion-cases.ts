import type { Step } from '#shared/composer/script';
import type { DeclaredSpan, LineMap } from '#shared/line/line-map';
import type { VerdictCase } from './judge-script';
import { circle, healthy, move, reset, short, story, wait } from './judge-script';

const begin = [reset(11), wait(60)];
const moving = [...begin, circle];
const many = (count: number, step: Step): Step[] => Array.from({ length: count }, () => step);

/** The whole capture declared to be one thing. */
const declared = (kind: DeclaredSpan['kind'], more: Partial<DeclaredSpan> = {}): LineMap => ({
  countsPerInch: 400,
  declared: [{ kind, startS: 0, endS: 100, ...more }],
});
/** 400 counts to the right: an inch at 400 counts an inch. */
const inch = story([...begin, { do: 'draw', figure: 'line', size: 400, packets: 20 }]);
const stroke = (lengthMm: number, lengthUncertaintyMm = 0.2): LineMap =>
  declared('stroke', { axis: 'x', lengthMm, lengthUncertaintyMm });

export const MOTION_CASES: readonly VerdictCase[] = [
  { rule: 'MOV-1', verdict: 'pass', script: story([...moving, circle]) },
  { rule: 'MOV-1', verdict: 'violation', script: story([...moving, ...many(50, move(127, 3))]) },
  { rule: 'MOV-1', verdict: 'not-shown', script: healthy },
  { rule: 'MOV-2', verdict: 'pass', script: healthy },
  { rule: 'MOV-2', verdict: 'violation', script: story([...moving, move(120, 0), move(-120, 0)]) },
  { rule: 'MOV-2', verdict: 'not-shown', script: short },
  { rule: 'MOV-3', verdict: 'pass', script: inch, map: stroke(25.4) },
  { rule: 'MOV-3', verdict: 'violation', script: inch, map: stroke(20) },
  // 10 % more than an inch, known to a millimetre.
  { rule: 'MOV-3', verdict: 'inconclusive', script: inch, map: stroke(28, 1) },
  { rule: 'MOV-3', verdict: 'not-shown', script: inch },
  { rule: 'MOV-4', verdict: 'pass', script: healthy, map: declared('closed-path') },
  { rule: 'MOV-4', verdict: 'violation', script: inch, map: declared('closed-path') },
  {
    rule: 'MOV-4',
    verdict: 'inconclusive',
    // Two counts are left of a path of 98: 2.04 ± 1.02 %.
    script: story([...begin, move(25, 0), move(0, 25), move(-25, 0), move(0, -23)]),
    map: declared('closed-path'),
  },
  { rule: 'MOV-4', verdict: 'not-shown', script: healthy },
  { rule: 'MOV-5', verdict: 'pass', script: story([...begin, wait(2000)]), map: declared('rest') },
  { rule: 'MOV-5', verdict: 'violation', script: short, map: declared('rest') },
  { rule: 'MOV-5', verdict: 'not-shown', script: healthy },
  { rule: 'MOV-6', verdict: 'pass', script: inch, map: stroke(25.4) },
  {
    rule: 'MOV-6',
    verdict: 'violation',
    script: story([...begin, { do: 'draw', figure: 'line', size: 400, packets: 20, angle: 20 }]),
    map: stroke(25.4),
  },
  {
    rule: 'MOV-6',
    verdict: 'inconclusive',
    script: story([...begin, move(20, 1)]),
    map: stroke(1.27),
  },
  { rule: 'MOV-6', verdict: 'not-shown', script: inch },
  { rule: 'RPT-1', verdict: 'pass', script: healthy },
  { rule: 'RPT-1', verdict: 'violation', script: story([...begin, { ...circle, pauseMs: 10 } as Step]) },
  {
    rule: 'RPT-1',
    verdict: 'inconclusive',
    // 22.5 ms of characters in 22.5 ÷ 0.85 ms.
    script: story([...begin, { ...circle, pauseMs: 22.5 / 0.85 - 22.5 } as Step]),
  },
  { rule: 'RPT-1', verdict: 'not-shown', script: short },
  { rule: 'RPT-3', verdict: 'pass', script: healthy },
  { rule: 'RPT-3', verdict: 'violation', script: story([...moving, wait(30), circle]) },
  { rule: 'RPT-3', verdict: 'inconclusive', script: story([...moving, wait(22.5), circle]) },
  { rule: 'RPT-3', verdict: 'not-shown', script: short },
];
