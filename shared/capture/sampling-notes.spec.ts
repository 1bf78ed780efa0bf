import { describe, expect, it } from 'vitest';
import { secondsPerTick } from '../time/time-base';
import type { Capture } from './capture';
import { bytesOf, defectsOf, edgesOf, readBytes, readText } from './spec-texts';

const ROWS = 400;

/** A table of samples of one channel; `time` in microseconds, null for a row that was lost. */
function table(time: (row: number) => number | null, places = 6): string {
  const rows = Array.from({ length: ROWS }, (_, row) => {
    const us = time(row);
    return us === null ? '' : `${(us / 1e6).toFixed(places)},${(row >> 5) & 1}\n`;
  });
  return `time,a\n${rows.join('')}`;
}

function notesOf(capture: Capture): string[] {
  return capture.notes.map(({ code, line }) => `${code} ${line ?? '-'}`);
}

function messageOf(capture: Capture, code: string): string {
  return [...capture.notes, ...capture.defects].find((note) => note.code === code)?.message ?? '';
}

describe('samples at an even interval', () => {
  it('are good for all where they are fine enough', () => {
    const capture = readText(table((row) => row * 4));
    expect(capture).toMatchObject({ layout: 'sampled', defects: [], notes: [] });
  });

  // Source: rules.md 11 (4 µs for distortion to 0.5 %, 100 µs for handshakes); an eighth of a bit for short elements: FRM-4.
  it.each([
    [20, 'times are known to 20 µs: too coarse for distortion to 0.5 % (4 µs would do)'],
    [
      102,
      'times are known to 102 µs: too coarse for handshakes (100 µs would do), distortion to 0.5 % (4 µs would do)',
    ],
    [
      250,
      'times are known to 250 µs: too coarse for short elements at 1200 bit/s (104 µs would do), handshakes (100 µs would do), distortion to 0.5 % (4 µs would do)',
    ],
  ])('of %d µs are too coarse for some', (interval, message) => {
    const capture = readText(table((row) => row * interval));
    expect(capture.defects).toEqual([]);
    expect(notesOf(capture)).toEqual(['coarse-sampling -']);
    expect(messageOf(capture, 'coarse-sampling')).toBe(message);
  });

  it('of voltages must be finer', () => {
    const rows = Array.from(
      { length: 200 },
      (_, row) => `${(row / 1e5).toFixed(5)},${(row >> 4) & 1 ? '9.5' : '-9.5'}\n`,
    );
    expect(messageOf(readText(`time,a (V)\n${rows.join('')}`), 'coarse-sampling')).toBe(
      'times are known to 10 µs: too coarse for distortion to 0.5 % (4 µs would do), levels (5 µs would do), slew (50 ns would do)',
    );
  });

  it('may be moved by the rounding of their times', () => {
    const capture = readText(table((row) => (row * 1e6) / 11025, 6));
    expect(notesOf(capture)).toEqual(['coarse-sampling -']);
  });
});

describe('the smallest step of a dump', () => {
  it.each([
    ['1 ns', []],
    ['1 ms', ['coarse-sampling -']],
  ])('of %s is looked at likewise', (timescale, notes) => {
    const text = `$timescale ${timescale} $end $var wire 1 ! a $end $enddefinitions $end #0 0! #5 1!`;
    expect(notesOf(readText(text))).toEqual(notes);
  });
});

describe('samples that jitter', () => {
  const jittering = table((row) => row * 100 + ((row * 8) % 21) - 10);

  it('are samples, whose times are known to the longest interval', () => {
    const capture = readText(jittering);
    expect(capture.layout).toBe('sampled');
    expect(secondsPerTick(capture.timeBase) * (capture.sampleIntervalTicks ?? 0)).toBeCloseTo(108e-6, 9);
    expect(capture.defects).toEqual([]);
    expect(notesOf(capture)).toEqual(['coarse-sampling -', 'sampling-jitter -']);
    expect(messageOf(capture, 'sampling-jitter')).toBe(
      'the rows stand 87 µs to 108 µs apart: a time is known to the longest of these; samples at an even interval would do better',
    );
  });

  it('keep the times they were taken at', () => {
    expect(edgesOf(readText(jittering), 'a').split(' ').slice(0, 2)).toEqual(['0', '1@3204']);
  });

  it('are none where each row is a change', () => {
    const rows = Array.from(
      { length: 300 },
      (_, row) => `${(row * 100 + ((row * 8) % 21)) / 1e6},${row & 1}\n`,
    );
    expect(readText(`time,a\n${rows.join('')}`)).toMatchObject({ layout: 'transitions', defects: [] });
  });
});

describe('samples that are missing', () => {
  it('are told where an element can hide in the hole', () => {
    const text = table((row) => (row >= 200 && row < 212 ? null : row * 50));
    const capture = readText(text);
    expect(defectsOf(capture)).toEqual(['samples-missing 202:1']);
    expect(messageOf(capture, 'samples-missing')).toBe(
      '12 samples are missing before the row at 0.0106 s, 650 µs at most',
    );
    expect(readBytes(bytesOf(text), {}, 1)).toEqual(capture);
  });

  it('are a note where none can', () => {
    const capture = readText(table((row) => (row % 100 === 50 ? null : row * 50)));
    expect(capture.defects).toEqual([]);
    expect(notesOf(capture)).toEqual(['coarse-sampling -', 'samples-missing 52']);
    expect(messageOf(capture, 'samples-missing')).toBe(
      '4 samples are missing in 4 places, first before the row at 0.00255 s, 100 µs at most',
    );
  });

  it('are found among the first rows', () => {
    expect(defectsOf(readText(table((row) => (row >= 10 && row < 30 ? null : row * 50))))).toEqual([
      'samples-missing 12:1',
    ]);
  });

  it('are found in counts of samples', () => {
    const rows = Array.from({ length: 300 }, (_, row) =>
      row >= 150 && row < 165 ? '' : `${row},${(row >> 5) & 1}\n`,
    );
    expect(defectsOf(readText(`Sample,a\n${rows.join('')}`, { sampleRateHz: 20_000 }))).toEqual([
      'samples-missing 152:1',
    ]);
  });

  it('are not told again where a damaged row was left out', () => {
    const text = table((row) => row * 1000).replace('0.250000,1', 'n/a,1');
    expect(defectsOf(readText(text))).toEqual(['bad-time 252:1']);
  });

  it('are none where rows without a change were left out on purpose', () => {
    let level = -1;
    const rows = Array.from({ length: 4000 }, (_, row) => {
      const next = (row >> 4) & (row >> 9) & 1;
      const isKept = next !== level || row % 97 === 0;
      level = next;
      return isKept ? `${(row * 50) / 1e6},${next}\n` : '';
    });
    expect(readText(`time,a\n${rows.join('')}`).defects).toEqual([]);
  });
});
