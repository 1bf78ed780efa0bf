import { describe, expect, it } from 'vitest';
import { layOutLanes } from './lanes';
import { layOutNotes } from './lane-notes';
import type { LaneNote } from './lane-notes';
import type { TapeModel } from './tape-model';
import { composeModel, LATE_REPLY, SILENT, viewOf } from './testing/composed-tape';

const model = composeModel(LATE_REPLY);

function noteOf(of: TapeModel, lane: string, fromS: number, toS: number): LaneNote | undefined {
  const view = viewOf(of, fromS, toS);
  return layOutNotes(of, view, layOutLanes(of, view)).find((note) => note.lane === lane);
}

describe('a lane with nothing in the window', () => {
  it('names the reply before it, with verdict, figure and place', () => {
    const note = noteOf(model, 'reply', 0.8, 0.9);
    expect(note).toMatchObject({ side: 'before', verdict: 'violation', figure: '15.62 ms' });
    expect(note?.words).toMatch(/^at 0\.\d{3} s$/);
    expect(note?.ticks).toBe(model.replies[1].onTicks);
  });

  it('names the one behind it where none comes before', () => {
    expect(noteOf(model, 'reply', 0, 0.1)).toMatchObject({ side: 'behind', figure: '13.10 ms' });
    expect(noteOf(model, 'findings', 0, 0.1)).toMatchObject({ side: 'behind' });
  });

  it('says nothing where there is something to see', () => {
    const on = model.replies[0].onTicks * model.tape.tickS;
    expect(noteOf(model, 'reply', on - 0.01, on + 0.05)).toBeUndefined();
    expect(noteOf(model, 'packets', 0.8, 0.9)).toBeUndefined();
  });
});

describe('what a capture does not hold', () => {
  it('is said for a silent device', () => {
    const silent = composeModel(SILENT);
    expect(noteOf(silent, 'packets', 0, 0.7)?.words).toBe('No packets. The device did not answer the reset.');
    expect(noteOf(silent, 'data', 0, 0.7)?.words).toMatch(/^No characters/);
  });

  it('is said for a device that answered and did not move', () => {
    const still = composeModel({
      ...LATE_REPLY,
      steps: [...LATE_REPLY.steps.slice(0, 2), { do: 'wait', ms: 900 }],
    });
    expect(noteOf(still, 'packets', 0.7, 0.8)?.words).toBe(
      'No packets. The device answered the reset but did not move.',
    );
  });

  it('is said for a file without RTS', () => {
    const bare = composeModel({ ...LATE_REPLY, lines: ['data'] });
    expect(noteOf(bare, 'rts', 0.5, 0.6)?.words).toMatch(/^RTS is not in this capture/);
    expect(noteOf(bare, 'reply', 0.5, 0.6)).toMatchObject({
      words: 'No RTS, so no reply times',
      ticks: null,
    });
  });
});
