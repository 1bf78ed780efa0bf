import { countUpTo } from '#shared/time/sorted-search';
import type { TapeModel } from '../drawing/tape-model';
import type { CellMark } from './table-row';

/** Findings by the packet, character or reset they stand in: indexes into the model's findings. */
export interface FindingsByPlace {
  readonly ofPacket: ReadonlyMap<number, readonly number[]>;
  readonly ofCharacter: ReadonlyMap<number, readonly number[]>;
  readonly ofReset: ReadonlyMap<number, readonly number[]>;
}

/** Rules about the reset as a whole: their findings belong to the reset's row, wherever they are drawn. */
const OF_RESET = /^(HSK|IDN)-/;

export function sortFindings(model: TapeModel): FindingsByPlace {
  const ofPacket = new Map<number, number[]>();
  const ofCharacter = new Map<number, number[]>();
  const ofReset = new Map<number, number[]>();
  const { characters, resets } = model.tape;
  const onTicks = Float64Array.from(resets, (reset) => reset.onTicks);
  const add = (to: Map<number, number[]>, at: number, finding: number): void => {
    const list = to.get(at);
    if (list === undefined) to.set(at, [finding]);
    else list.push(finding);
  };
  model.findings.forEach(({ rule, startTicks, endTicks }, index) => {
    const { ticks } = model.places[index];
    if (OF_RESET.test(rule)) {
      // Findings of a pulse begin before RTS goes ON.
      const reset = countUpTo(onTicks, Math.max(endTicks, startTicks)) - 1;
      if (reset >= 0) add(ofReset, reset, index);
    }
    const packet = countUpTo(model.packetStarts, ticks) - 1;
    if (packet >= 0 && ticks <= model.packetEnds[packet]) add(ofPacket, packet, index);
    const character = countUpTo(characters.startTicks, ticks) - 1;
    if (character >= 0 && ticks <= characters.endTicks[character]) add(ofCharacter, character, index);
  });
  return { ofPacket, ofCharacter, ofReset };
}

const MOST = 2;
const RANK = { violation: 0, inconclusive: 1, 'not-shown': 2, pass: 3 } as const;

/** The codes of findings with their verdicts, the worst first, each code once; passes only where there is nothing worse. */
export function marksOf(model: TapeModel, findings: readonly number[] | undefined): readonly CellMark[] {
  if (findings === undefined) return [];
  const sorted = [...findings].sort(
    (a, b) => RANK[model.findings[a].verdict] - RANK[model.findings[b].verdict],
  );
  const marks: CellMark[] = [];
  for (const index of sorted) {
    const { verdict, rule } = model.findings[index];
    if (verdict === 'pass' && marks.some(({ kind }) => kind !== 'pass')) break;
    if (marks.length < MOST && !marks.some((mark) => mark.text === rule))
      marks.push({ kind: verdict, text: rule });
  }
  return marks;
}
