import { describe, expect, it } from 'vitest';
import { secondsPerTick, toSeconds } from '../time/time-base';
import type { Capture } from './capture';
import { analogOf, defectsOf, digitalOf, edgesOf, readBytes, readText, refusalOf } from './spec-texts';

/** Rows of a table: times with levels of the channels, joined by `separator`. */
const ROWS: readonly (readonly [string, number, number])[] = [
  ['0.000', 1, 0],
  ['0.010', 1, 1],
  ['0.0125', 0, 1],
  ['0.02', 1, 1],
];

function table(
  header: string,
  write: (time: string, a: number, b: number) => string,
  endOfLine = '\n',
): string {
  return (
    [...(header === '' ? [] : [header]), ...ROWS.map((row) => write(...row))].join(endOfLine) + endOfLine
  );
}

/** Edges in µs from the first row, whatever the tick. */
function edgesUs(capture: Capture, name: string): string {
  const { initialLevel, ticks, levels } = digitalOf(capture, name);
  const us = (tick: number): number => Math.round(tick * secondsPerTick(capture.timeBase) * 1e9) / 1e3;
  return [`${initialLevel}`, ...Array.from(ticks, (tick, i) => `${levels[i]}@${us(tick)}`)].join(' ');
}

function expectRows(capture: Capture, a = 'a', b = 'b'): void {
  expect(capture.defects).toEqual([]);
  expect(edgesUs(capture, a)).toBe('1 0@12500 1@20000');
  expect(edgesUs(capture, b)).toBe('0 1@10000');
}

const scaled = (time: string, places: number): string => `${Math.round(Number(time) * 10 ** places)}`;

describe('separators and ends of line', () => {
  // Source: RFC 4180 section 2 names the comma and CRLF; the others are practice.
  it.each([',', ';', '\t', '|'])('finds the separator %j', (separator) => {
    expectRows(readText(table(['Time (s)', 'a', 'b'].join(separator), (...cells) => cells.join(separator))));
  });

  it.each(['\n', '\r\n', '\r'])('takes %j for an end of line', (endOfLine) => {
    expectRows(readText(table('time,a,b', (...cells) => cells.join(','), endOfLine)));
  });

  it('needs no end of line at the end, and minds no blank lines', () => {
    expectRows(readText(table('time,a,b', (...cells) => cells.join(',')).trimEnd()));
    expectRows(readText(`\n\n${table('time,a,b', (...cells) => cells.join(','), '\n\n')}\n\n`));
  });

  it('believes a line sep=', () => {
    expectRows(readText(`sep=;\n${table('t [s];a;b', (...cells) => cells.join(';').replace('.', ','))}`));
    expectRows(readText(`sep=|\r\n${table('t [s]|a|b', (...cells) => cells.join('|'), '\r\n')}`));
  });

  it('takes a separator at the end of rows, of the header, or of both', () => {
    expectRows(readText(table('time,a,b,', (...cells) => `${cells.join(',')},`)));
    expectRows(readText(table('time,a,b', (...cells) => `${cells.join(',')},`)));
    expectRows(readText(table('time,a,b,', (...cells) => cells.join(','))));
    expectRows(readText(table('time;a;b', (...cells) => `${cells.join(';')};;`)));
  });

  it('trims blanks', () => {
    expectRows(
      readText(table('  time ,  a ,  b  ', (...cells) => cells.map((cell) => `  ${cell} `).join(','))),
    );
    expectRows(
      readText(table('  time ; "a" ;  b  ', (...cells) => cells.map((cell) => ` "${cell}" `).join(';'))),
    );
  });

  it('minds no byte-order mark', () => {
    expectRows(readText(`\ufeff${table('time,a,b', (...cells) => cells.join(','))}`));
  });
});

describe('quotes', () => {
  // Source: RFC 4180 section 2, rules 5 to 7.
  it('takes quoted fields with separators, line breaks and doubled quotes inside', () => {
    const header = '"time (s)","the ""a"", first","b\nsecond line"';
    const capture = readText(table(header, (...cells) => cells.map((cell) => `"${cell}"`).join(','), '\r\n'));
    expect(capture.channels.map(({ name }) => name)).toEqual(['the "a", first', 'b\nsecond line']);
    expectRows(capture, 'the "a", first', 'b\nsecond line');
  });

  it('counts the lines inside quotes', () => {
    const capture = readText('time,a,note\n0,1,1\n0.1,0,"0\n\n"\n0.2,1,1\nbad,0,0\n0.3,1,1\n');
    expect(defectsOf(capture)).toContain('bad-time 7:1');
  });

  it('takes a decimal comma in quoted fields between commas', () => {
    expectRows(readText(table('time,a,b', (time, a, b) => `"${time.replace('.', ',')}",${a},${b}`)));
  });
});

describe('the time column', () => {
  it.each([
    ['t (ns)', 9],
    ['Time [s]', 0],
    ['Zeit_ms', 3],
    ['Time (us)', 6],
    ['Time(µs)', 6],
    ['Time/us', 6],
    ['time_ns', 9],
    ['Timestamp [ms]', 3],
    ['t/ms', 3],
    ['ms', 3],
    ['Zeit in ms', 3],
    ['Elapsed (milliseconds)', 3],
    ['X-Axis [us]', 6],
    ['Time, ms', 3],
  ])('takes its unit from the header %s', (header, places) => {
    const quoted = header.includes(',') ? `"${header}"` : header;
    expectRows(
      readText(
        table(
          `${quoted},a,b`,
          (time, a, b) => `${(Number(time) * 10 ** places).toFixed(places === 9 ? 0 : 9 - places)},${a},${b}`,
        ),
      ),
    );
  });

  it('takes its unit from a row of units', () => {
    const rows = table('', (time, a, b) => `${scaled(time, 6)},${a},${b}`);
    expectRows(readText(`Time,a,b\n(us),,\n${rows}`));
    expectRows(readText(`Time,a,b\nus,bool,bool\n${rows}`));
  });

  it('may have its thousands apart', () => {
    const capture = readText('t (ms);a\n998,5;1\n1.000,25;0\n1.001,5;1\n');
    expect(edgesUs(capture, 'a')).toBe('1 0@1750 1@3000');
    expect(edgesUs(readText('t (ms);a\n998.5;1\n1,000.25;0\n1,001.5;1\n'), 'a')).toBe('1 0@1750 1@3000');
  });

  it('takes its unit from the preamble', () => {
    expectRows(
      readText(
        `Instrument: bench 7\nTime unit: us\n${table('Time,a,b', (time, a, b) => `${scaled(time, 6)},${a},${b}`)}`,
      ),
    );
  });

  it('may have no header at all', () => {
    const capture = readText(table('', (...cells) => cells.join(',')));
    expect(capture.channels.map(({ name }) => name)).toEqual(['column 2', 'column 3']);
    expectRows(capture, 'column 2', 'column 3');
  });

  it('may stand beside a column of sample numbers', () => {
    expectRows(
      readText(
        `Sample,Zeit_ms,a,b\n${ROWS.map(([t, a, b], i) => `${i},${(Number(t) * 1e3).toFixed(4)},${a},${b}`).join('\n')}\n`,
      ),
    );
    expectRows(
      readText(`Time (s),Sample #,a,b\n${ROWS.map(([t, a, b], i) => `${t},${i},${a},${b}`).join('\n')}\n`),
    );
    expectRows(
      readText(`${ROWS.map(([t, a, b], i) => `${i};${t};${a};${b}`).join('\n')}\n`),
      'column 3',
      'column 4',
    );
  });

  it.each([
    ['1.25e-2', '0,0125'],
    ['+0.0125', '.0125'],
    ['12.5E-03', '1,25E-02'],
    ['0.01250000', '0,0125'],
  ])('reads numbers as %s and %s', (english, german) => {
    expectRows(
      readText(table('time,a,b', (time, a, b) => `${time === '0.0125' ? english : time},${a},${b}`)),
    );
    expectRows(
      readText(
        table('time;a;b', (time, a, b) => `${time === '0.0125' ? german : time.replace('.', ',')};${a};${b}`),
      ),
    );
  });

  it('may start below zero or anywhere else', () => {
    const capture = readText('time,a\n-0.005,1\n-0.0025,0\n0,1\n0.0025,0\n');
    expect(edgesUs(capture, 'a')).toBe('1 0@2500 1@5000 0@7500');
    expect(toSeconds(capture.timeBase, 0)).toBe(-0.005);
    const late = readText('time,a\n1700000000.123456,1\n1700000000.123556,0\n1700000000.1236561,1\n');
    expect(edgesOf(late, 'a')).toBe('1 0@1000 1@2001');
    expect(secondsPerTick(late.timeBase)).toBe(1e-7);
    const microseconds = readText('time,a\n1700000000.000001,1\n1700000000.000004,0\n1700000000.000008,1\n');
    expect(edgesOf(microseconds, 'a')).toBe('1 0@3 1@7');
    const nanoseconds = readText('time_ns,a\n1700000000123456789,1\n1700000000123456790,0\n');
    expect(edgesOf(nanoseconds, 'a')).toBe('1 0@1');
    expect(nanoseconds.timeBase.originUnits).toBe(1700000000123456789n);
  });

  it('keeps decimal times exact, also when later ones have more places', () => {
    const capture = readText('time,a\n0,1\n0.1,0\n0.18,1\n0.194,0\n0.1941,1\n0.19412345,0\n100,1\n');
    expect(edgesOf(capture, 'a')).toBe(
      '1 0@10000000 1@18000000 0@19400000 1@19410000 0@19412345 1@10000000000',
    );
    expect(secondsPerTick(capture.timeBase)).toBe(1e-8);
  });

  it('takes the noise of printed binary fractions away', () => {
    const capture = readText(
      'time,a\n0.0,1\n0.060000000000000005,0\n0.18000000000000002,1\n0.19399999999999998,0\n0.30000000000000004,1\n',
    );
    expect(edgesOf(capture, 'a')).toBe('1 0@60 1@180 0@194 1@300');
  });

  it('reads full doubles to the picosecond or better', () => {
    const rows = Array.from({ length: 200 }, (_, i) => `${i / 11025},${(i >> 2) & 1}`);
    const capture = readText(`time,a\n${rows.join('\n')}\n`);
    const { ticks } = digitalOf(capture, 'a');
    ticks.forEach((tick, i) =>
      expect(toSeconds(capture.timeBase, tick)).toBeCloseTo(((i + 1) * 4) / 11025, 12),
    );
    expect(capture.layout).toBe('sampled');
    expect(secondsPerTick(capture.timeBase) * (capture.sampleIntervalTicks ?? 0)).toBeCloseTo(1 / 11025, 12);
  });

  it('reads times that repeat: the last row of an instant counts', () => {
    const capture = readText('time,a\n0,1\n0.5,0\n0.5,1\n0.7,0\n0.7,0\n0.9,0\n');
    expect(edgesOf(capture, 'a')).toBe('1 0@7');
  });
});

describe('a stated sample rate', () => {
  const samples = 'a,b\n1,0\n1,0\n1,1\n0,1\n0,1\n1,1\n';

  it.each([
    ['# Sample rate: 50 kHz', 20e-6],
    ['Sample rate: 50000', 20e-6],
    ['; samplerate = 50 kS/s', 20e-6],
    ['"Sampling frequency [kHz]",50', 20e-6],
    ['# interval 20 us', 20e-6],
    ['Sample Interval,2.0E-05', 20e-6],
    ['# dt=20us', 20e-6],
    ['#Abtastrate: 11,025 kHz', 1 / 11025],
    ['Abtastintervall;0,02;ms', 20e-6],
    ['Sample rate: 1 MHz', 1e-6],
    ['# 50 kHz', 20e-6],
    ['Sample rate,"50,000 Hz"', 20e-6],
    ['# samples per second: 50000', 20e-6],
    ['Horizontal resolution (us): 20', 20e-6],
  ])('is taken from %s', (line, interval) => {
    const text = line.includes(';') && !line.startsWith(';') ? samples.replaceAll(',', ';') : samples;
    const capture = readText(`Bench recorder\n${line}\n${text}`);
    expect(secondsPerTick(capture.timeBase)).toBe(interval);
    expect(edgesOf(capture, 'a')).toBe('1 0@3 1@5');
    expect(capture).toMatchObject({ layout: 'sampled', sampleIntervalTicks: 1, endTicks: 5 });
  });

  it('is taken from the caller, who wins', () => {
    expect(secondsPerTick(readText(samples, { sampleRateHz: 50_000 }).timeBase)).toBe(20e-6);
    expect(secondsPerTick(readText(`# rate: 1 kHz\n${samples}`, { sampleRateHz: 44_100 }).timeBase)).toBe(
      1 / 44_100,
    );
  });

  it('turns counts of samples into times, rows left out or not', () => {
    const capture = readText('# Sample rate: 1 MHz\nSample,a\n100,1\n1100,0\n1933,1\n2766,1\n');
    expect(edgesUs(capture, 'a')).toBe('1 0@1000 1@1833');
    expect(capture.layout).toBe('transitions');
    expect(edgesUs(readText('time,a\n100,1\n1100,0\n1933,1\n2766,0\n', { sampleRateHz: 1e6 }), 'a')).toBe(
      '1 0@1000 1@1833 0@2666',
    );
  });

  it('tells the unit of a time column that states none', () => {
    const rows = (write: (i: number) => string): string =>
      `# Interval: 20 us\nTime,a\n${Array.from({ length: 40 }, (_, i) => `${write(i)},${(i >> 2) & 1}`).join('\n')}\n`;
    for (const text of [
      rows((i) => (i * 0.02).toFixed(2)),
      rows((i) => `${i * 20}`),
      rows((i) => (i * 2e-5).toFixed(5)),
      rows((i) => `${i}`),
    ]) {
      expect(edgesUs(readText(text), 'a')).toMatch(/^0 1@80 0@160 1@240 /);
    }
  });

  it.each([
    ['there is no time column', samples],
    ['the time column counts samples', 'Sample,a\n0,1\n1,0\n2,0\n3,1\n'],
  ])('is asked for where %s', (reason, text) => {
    const refusal = refusalOf(text);
    expect(refusal.code).toBe('no-sample-rate');
    expect(refusal.message).toBe(`${reason} and no sample rate is stated: state it with --sample-rate`);
    expect(refusal.place.line).toBe(2);
  });
});

describe('header and preamble', () => {
  it('skips any preamble, and finds the header on top of the rows', () => {
    const preamble =
      'Bench recorder, model 7\n"Operator","A. Example"\nDate,2024-02-30\nChannels,2\n\nSettings\n"Probe ""x10"""\n';
    expectRows(readText(preamble + table('time,a,b', (...cells) => cells.join(','))));
  });

  it.each(['#', '# ', ';', '//'])('skips comments that begin with %s', (mark) => {
    const text = `${mark} made by hand\n${table('time,a,b', (...cells) => cells.join(','), `\n${mark} note\n`)}`;
    expectRows(readText(text));
  });

  it('takes a header that is written as a comment', () => {
    expectRows(readText(table('# time,a,b', (...cells) => cells.join(','))));
    expectRows(readText(`# recorder\n# rate 1 MHz\n${table('#time;a;b', (...cells) => cells.join(';'))}`));
  });

  it('names channels by their header, trimmed, or by their column', () => {
    expect(
      readText('time, RTS# ,,"DTR (pin 4)"\n0,1,0,1\n0.1,0,1,0\n0.2,1,1,1\n').channels.map(
        ({ name }) => name,
      ),
    ).toEqual(['RTS#', 'column 3', 'DTR (pin 4)']);
  });

  // Source: ISO/IEC 8859-1 (B5 is the micro sign, E4 an a with diaeresis); rows beyond the header are ASCII.
  it('reads headers in Latin-1', () => {
    const text = 'Zeit (\u00b5s);M\u00e4rz\n0;1\n100;0\n200;1\n';
    const capture = readBytes(Uint8Array.from(text, (c) => c.charCodeAt(0)));
    expect(edgesUs(capture, 'M\u00e4rz')).toBe('1 0@100 1@200');
    expect(capture.defects).toEqual([]);
  });
});

describe('stamps of day and time', () => {
  const stamped = (write: (seconds: string) => string): string =>
    table('Zeit;a;b', (time, a, b) => `${write((30 + Number(time)).toFixed(4))};${a};${b}`);

  // Source: ISO 8601 for year-first dates; the others are practice.
  it.each([
    ['2031-04-05T12:30:30.0000Z', (s: string) => `2031-04-05T12:30:${s}Z`],
    ['2031-04-05 12:30:30.0000', (s: string) => `2031-04-05 12:30:${s}`],
    ['05.04.2031 12:30:30,0000', (s: string) => `05.04.2031 12:30:${s.replace('.', ',')}`],
    ['04/05/2031 12:30:30.0000 pm', (s: string) => `04/05/2031 12:30:${s} PM`],
    ['12:30:30.0000', (s: string) => `12:30:${s}`],
    ['12:30:30:0000', (s: string) => `12:30:${s.replace('.', ':')}`],
    ['30:30.0000', (s: string) => `30:${s}`],
  ])('are times: %s', (_, write) => {
    expectRows(readText(stamped(write)));
    expectRows(readText(stamped(write).replace('Zeit;a;b\n', '')), 'column 2', 'column 3');
    expectRows(readText(stamped((s) => `"${write(s)}"`)));
  });

  it('tell the second since 1970', () => {
    const capture = readText(
      'time,a\n1970-01-02 00:00:00.25,1\n1970-01-02 00:00:01.25,0\n1970-01-02 00:00:02,1\n',
    );
    expect(toSeconds(capture.timeBase, 0)).toBe(86_400.25);
    expect(edgesUs(capture, 'a')).toBe('1 0@1000000 1@1750000');
  });

  it('may have the date in a column of its own, and run past midnight', () => {
    const capture = readText(
      'Date,Time,a\n05.04.2031,23:59:59.9,1\n05.04.2031,23:59:59.95,0\n06.04.2031,00:00:00.1,1\n',
    );
    expect(capture.channels.map(({ name }) => name)).toEqual(['a']);
    expect(edgesUs(capture, 'a')).toBe('1 0@50000 1@200000');
  });

  it('that are none leave their row out', () => {
    const capture = readText(
      'time,a\n12:00:00.0,1\n12:00:00.1,0\n12:61:00.2,1\n12:00:00.3,1\n12:00:00.4,0\n12:00:00.5,1\n12:00:00.6,0\n12:00:00.7,1\n12:00:00.8,1\n12:00:00.9,1\n12:00:01,1\n12:00:02,1\n',
    );
    expect(defectsOf(capture)).toEqual(['bad-time 4:1']);
    expect(edgesOf(capture, 'a')).toBe('1 0@1 x@2 1@3 0@4 1@5 0@6 1@7');
  });
});

describe('numbers of other lands', () => {
  it.each([
    ['a decimal comma behind tabs', 'Zeit\ta\n0,5\t1\n0,75\t0\n1\t1\n'],
    ['a decimal comma and an exponent', 'Zeit;a\n5,0E-01;1\n7,5E-01;0\n1,0E+00;1\n'],
    ['an apostrophe between thousands', "t [ms];a\n1'500.0;1\n1'750.0;0\n2'000.0;1\n"],
    ['a blank between thousands', 't [ms];a\n1 500,0;1\n1 750,0;0\n2 000,0;1\n'],
    ['a no-break space between thousands', 't [ms];a\n1\u00a0500,0;1\n1\u00a0750,0;0\n2\u00a0000,0;1\n'],
    ['a narrow no-break space between thousands', 't [ms];a\n1\u202f500;1\n1\u202f750;0\n2\u202f000;1\n'],
    ['a minus sign that is no hyphen', 'time,a\n\u22120.5,1\n\u22120.25,0\n0,1\n'],
  ])('may have %s', (_, text) => {
    const capture = readText(text);
    expect(capture.defects).toEqual([]);
    expect(edgesUs(capture, 'a')).toBe('1 0@250000 1@500000');
  });

  it('may be voltages with any of them', () => {
    const capture = readText('t;K1 [mV]\n0;\u22121\u00a0500,5\n1;1\u00a0500,5\n2;\u22120,5\n');
    expect([...analogOf(capture, 'K1 [mV]').values].map((v) => Math.round(v * 1e4))).toEqual([
      -15005, 15005, -5,
    ]);
  });
});

describe('levels and volts', () => {
  it.each([
    ['H', 'L'],
    ['high', 'low'],
    ['TRUE', 'FALSE'],
    ['1.0', '0.0'],
    ['On', 'Off'],
    ['"1"', '"0"'],
  ])('takes %s and %s for levels', (high, low) => {
    const capture = readText(
      table('time;a;b', (time, a, b) =>
        [time, ...[a, b].map((level) => (level === 1 ? high : low))].join(';'),
      ),
    );
    expectRows(capture);
  });

  it('takes x and z for unknown levels, and an empty cell for the level before', () => {
    const capture = readText('time,a,b\n0,,0\n0.1,1,\n0.2,x,\n0.3,0,1\n0.4,,\n0.5,Z,0\n');
    expect(edgesOf(capture, 'a')).toBe('x 1@1 x@2 0@3 x@5');
    expect(edgesOf(capture, 'b')).toBe('0 1@3 0@5');
    expect(capture.defects).toEqual([]);
  });

  it('reads volts, millivolts and levels side by side', () => {
    const rows = Array.from(
      { length: 50 },
      (_, i) =>
        `${(i * 25e-6).toFixed(6)},${i % 2 === 0 ? '-9.5' : '9.25'},${i % 2 === 0 ? -9500 : 9250},${(i >> 3) & 1}`,
    );
    const capture = readText(`Time (s),CH1 (V),CH2 (mV),D0\n${rows.join('\n')}\n`);
    expect(capture.channels.map(({ kind }) => kind)).toEqual(['analog', 'analog', 'digital']);
    for (const name of ['CH1 (V)', 'CH2 (mV)']) {
      const { values, times, isStepped } = analogOf(capture, name);
      expect([...values.subarray(0, 4)]).toEqual([-9.5, 9.25, -9.5, 9.25]);
      expect(times).toEqual({ kind: 'uniform', startTicks: 0, stepTicks: 25, count: 50 });
      expect(isStepped).toBe(false);
    }
    expect(edgesOf(capture, 'D0')).toBe('0 1@200 0@400 1@600 0@800 1@1000 0@1200');
  });

  it('takes volts with decimal comma and exponents', () => {
    const capture = readText('Zeit [ms];K1 [V]\n0,00;-9,5\n0,01;1,25E+01\n0,02;NaN\n0,03;-9,5\n0,05;\n');
    expect([...analogOf(capture, 'K1 [V]').values]).toEqual([-9.5, 12.5, NaN, -9.5, -9.5]);
    expect(analogOf(capture, 'K1 [V]').times).toEqual({
      kind: 'listed',
      ticks: Float64Array.of(0, 1, 2, 3, 5),
    });
  });

  it('takes zeros in a column of volts for volts', () => {
    const capture = readText('time,CH1 (V),d\n0,0,0\n0.1,0,0\n0.2,0,1\n');
    expect(capture.channels.map(({ kind }) => kind)).toEqual(['analog', 'digital']);
  });
});

describe('the layout of a table', () => {
  const sampled = (count: number, write: (i: number) => string): Capture =>
    readText(`time,a,b\n${Array.from({ length: count }, (_, i) => write(i)).join('\n')}\n`);

  it('is told to be samples by even rows', () => {
    const capture = sampled(300, (i) => `${(i * 1e-5).toFixed(6)},${(i >> 4) & 1},0`);
    expect(capture).toMatchObject({ layout: 'sampled', sampleIntervalTicks: 1, unitTicks: 0.1 });
    expect(secondsPerTick(capture.timeBase)).toBe(1e-5);
  });

  it('is told to be samples by rows that rounding moved, with their mean interval', () => {
    const capture = sampled(500, (i) => `${(i / 11025).toFixed(7)},${(i >> 3) & 1},${i & 1}`);
    expect(capture.layout).toBe('sampled');
    expect(capture.sampleIntervalTicks).toBeCloseTo(907.0295, 1);
  });

  it('is told to be samples where a few are missing', () => {
    const rows = (i: number): string => `${((i + Math.floor(i / 70)) * 1e-4).toFixed(4)},${(i >> 4) & 1},0`;
    expect(sampled(300, rows)).toMatchObject({ layout: 'sampled', sampleIntervalTicks: 1 });
  });

  it('is told to be changes by uneven rows', () => {
    const capture = sampled(100, (i) => `${(Math.floor((i * i) / 3) * 1e-4).toFixed(4)},${i & 1},0`);
    expect(capture).toMatchObject({ layout: 'transitions', sampleIntervalTicks: null });
  });

  it('is told to be changes where a few rows happen to be even', () => {
    expect(sampled(4, (i) => `0.${i},${i & 1},${i >> 1}`)).toMatchObject({ layout: 'transitions' });
  });
});

describe('a damaged table', () => {
  const read = (rows: string): Capture =>
    readText(`time,a,b\n0.0,1,0\n0.1,0,0\n${rows}\n0.5,0,1\n0.6,1,1\n0.7,1,1\n0.8,0,1\n`);

  it.each([
    ['a row too short', '0.3,1', 'row-too-short 4:6', '1 0@1 x@3 0@5 1@6 0@8'],
    ['a row too long', '0.3,1,0,1,1', 'row-too-long 4:9', '1 0@1 x@3 0@5 1@6 0@8'],
    ['text for a time', 'n/a,1,0', 'bad-time 4:1', '1 0@1 x@2 0@5 1@6 0@8'],
    ['an infinite time', 'inf,1,0', 'bad-time 4:1', '1 0@1 x@2 0@5 1@6 0@8'],
    ['a time that is no number', 'NaN,1,0', 'bad-time 4:1', '1 0@1 x@2 0@5 1@6 0@8'],
    ['a time beyond all reason', '1e300,1,0', 'bad-time 4:1', '1 0@1 x@2 0@5 1@6 0@8'],
    ['a missing time', ',1,0', 'no-time 4:1', '1 0@1 x@2 0@5 1@6 0@8'],
    ['a time that runs backwards', '0.05,1,0', 'time-backwards 4:1', '1 0@10 x@11 0@50 1@60 0@80'],
    ['text for a level', '0.3,maybe,0', 'bad-level 4:5', '1 0@1 x@3 0@5 1@6 0@8'],
    ['a NUL byte', '0.3,\0,0', 'bad-level 4:5', '1 0@1 x@3 0@5 1@6 0@8'],
    ['lines of text', 'lost 5 samples', 'row-too-short 4:15', '1 0@1 x@2 0@5 1@6 0@8'],
  ])('is read in spite of %s', (_, row, defect, edges) => {
    const capture = read(row);
    expect(defectsOf(capture)).toEqual([defect]);
    expect(edgesOf(capture, 'a')).toBe(edges);
  });

  it('tells the byte', () => {
    expect(read('n/a,1,0').defects[0].byte).toBe('time,a,b\n0.0,1,0\n0.1,0,0\n'.length);
  });

  it('is read up to where the time stays behind', () => {
    const capture = readText('time,a\n0.5,1\n0.6,0\n0.1,1\n0.2,0\n0.3,1\n0.7,1\n');
    expect(defectsOf(capture)).toEqual(['time-backwards 4:1', 'time-backwards 5:1']);
    expect(edgesOf(capture, 'a')).toBe('1 0@1');
  });

  it('tells that it was cut inside a row', () => {
    expect(defectsOf(readText('time,a,b\n0.0,1,0\n0.1,0,0\n0.2,1'))).toEqual(['cut-short 4:6']);
    expect(defectsOf(readText('time,a,b\n0.3,1,0\n0.4,0,0\n0.'))).toEqual(['cut-short 4:3']);
  });

  it('is read up to a quote that is never closed', () => {
    const rows = Array.from({ length: 1000 }, (_, i) => `${i / 1000},${i & 1}`).join('\n');
    const capture = readText(`time,a\n${rows}\n"1,0\n${'2,1\n'.repeat(500_000)}`);
    expect(defectsOf(capture)).toEqual(['unclosed-quote 1002:1']);
    expect(digitalOf(capture, 'a').edgeCount).toBe(999);
  });

  it('begins with a damaged first row', () => {
    const capture = readText('time,a,b\nn/a,1,0\n0.1,0,0\n0.2,1,0\n0.3,1,1\n');
    expect(defectsOf(capture)).toEqual(['bad-time 2:1']);
    expect(edgesOf(capture, 'a')).toBe('0 1@1');
  });
});

describe('a table that cannot be used', () => {
  it.each([
    [
      'not-a-capture',
      'Dear team,\nplease find the capture attached, it shows\nthe fault. Thanks,\nA. Example\n',
    ],
    ['not-a-capture', '<html><body>1, 2</body></html>\n'],
    ['no-rows', 'time,data,rts\n'],
    ['no-rows', 'time,a\nNaN,1\nNaN,0\nNaN,1\n'],
    ['no-channels', `time\n${Array.from({ length: 20 }, (_, i) => `${i / 10}`).join('\n')}\n`],
    ['too-many-columns', `${'0,'.repeat(200_000)}0\n${'1,'.repeat(200_000)}0\n`],
    ['unclosed-quote', `time,a\n"0,1\n${'1,0\n'.repeat(1_000_000)}`],
  ])('is refused as %s', (code, text) => {
    const refusal = refusalOf(text);
    expect([refusal.name, refusal.code]).toEqual(['CaptureError', code]);
    expect(refusal.where).not.toBe('');
  });
});
