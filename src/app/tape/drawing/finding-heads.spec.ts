import * as fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { FindingView } from '#shared/contract/http/checks';
import { layOutHeads } from './finding-heads';
import type { FindingHead } from './finding-heads';
import { layOutLanes } from './lanes';
import { buildTapeModel } from './tape-model';
import type { TapeModel } from './tape-model';
import { composeModel, composeTape, LATE_REPLY, LIMITS, viewOf } from './testing/composed-tape';
import type { TapeView } from './view';

const { tape } = composeTape(LATE_REPLY);
const model = composeModel(LATE_REPLY);

function headsOf(of: TapeModel, view: TapeView): FindingHead[] {
  const lane = layOutLanes(of, view).find((item) => item.id === 'findings');
  if (lane === undefined) throw new Error('there is a Findings lane');
  return layOutHeads(of, view, lane);
}

const at = (ticks: number, verdict: FindingView['verdict'] = 'pass', rule = 'PKT-4'): FindingView => ({
  rule,
  verdict,
  severity: 'warning',
  startTicks: ticks,
  endTicks: ticks,
  startS: 0,
  endS: 0,
  measured: null,
  uncertainty: null,
  uncertaintyKind: null,
  limit: null,
  unit: null,
  message: '',
});

const violation = model.findings.findIndex((finding) => finding.verdict === 'violation');

describe('heads of findings', () => {
  it('stand at the place of their finding with code and value', () => {
    const reply = (model.tape.resets[1].replyTicks ?? 0) * tape.tickS;
    const heads = headsOf(model, viewOf(model, reply - 0.05, reply + 0.03));
    const head = heads.find((item) => item.lead === violation);
    expect(head?.code).toBe('HSK-1');
    expect(head?.x).toBeCloseTo(96 + (948 * 0.05) / 0.08, 0);
  });

  it('join within 12 px in the survey, the worst leading', () => {
    const several = buildTapeModel(
      tape,
      [at(100_000), at(101_000, 'violation', 'PKT-5'), at(102_000, 'inconclusive')],
      LIMITS,
    );
    const [head, ...others] = headsOf(several, viewOf(several, 0, 12));
    expect(others).toEqual([]);
    expect(head).toMatchObject({ lead: 1, members: [0, 1, 2], code: 'PKT-5', value: 'and 2 more' });
  });

  it('show the selected finding even where a worse one stands beside it', () => {
    const several = buildTapeModel(tape, [at(100_000), at(101_000, 'violation')], LIMITS);
    const [head] = headsOf(several, viewOf(several, 0, 12, { selection: { kind: 'finding', index: 0 } }));
    expect(head).toMatchObject({ lead: 0, isSelected: true, tier: 0 });
    expect(head.box.height).toBe(22);
  });

  it('leave a value out rather than let it reach the next head', () => {
    const dense = buildTapeModel(tape, [at(500_000), at(504_000), at(530_000)], LIMITS);
    const heads = headsOf(dense, viewOf(dense, 0.48, 0.56));
    expect(heads.map((head) => [head.code, head.value])).toEqual([
      ['', ''],
      ['PKT-4', 'says nothing'],
      ['PKT-4', 'says nothing'],
    ]);
  });

  it('never overlap and never leave the canvas, wherever findings stand', () => {
    const places = fc.array(
      fc.tuple(fc.integer({ min: 0, max: 1_000_000 }), fc.constantFrom('pass', 'violation', 'inconclusive')),
      {
        minLength: 1,
        maxLength: 60,
      },
    );
    fc.assert(
      fc.property(places, fc.nat(59), fc.constantFrom(0.1, 0.9, 12), (list, chosen, length) => {
        const findings = list.map(([ticks, verdict]) => at(ticks, verdict as FindingView['verdict']));
        const many = buildTapeModel(tape, findings, LIMITS);
        const selection = { kind: 'finding', index: chosen % findings.length } as const;
        const heads = headsOf(many, viewOf(many, 0, length, { selection }));
        heads.forEach(({ box }, i) => {
          if (heads[i].code !== '' && !heads[i].isSelected)
            expect(box.x + box.width).toBeLessThanOrEqual(1044);
          for (const other of heads.slice(i + 1)) {
            const areApart =
              box.x + box.width <= other.box.x ||
              other.box.x + other.box.width <= box.x ||
              box.y + box.height <= other.box.y ||
              other.box.y + other.box.height <= box.y;
            expect(areApart).toBe(true);
          }
        });
      }),
      { numRuns: 60 },
    );
  });

  it('leave passes to the table on a phone', () => {
    const phone = viewOf(model, 0, 1.2, { isPhone: true, widthPx: 390, gutterPx: 58, heightPx: 300 });
    const verdicts = headsOf(model, phone).map((head) => model.findings[head.lead].verdict);
    expect(verdicts).not.toContain('pass');
    expect(verdicts).toContain('violation');
  });
});
