import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { toSeconds } from '../time/time-base';
import type { Capture } from './capture';
import { bytesOf, defectsOf, readBytes, readText, refusalOf } from './spec-texts';

// There is no standard for such logs; all forms here are common practice.

/** `4D@0.194 >2A@0.257`: hexadecimal value and time in seconds, `>` in front of what the host sent. */
function bytesShown(capture: Capture): string {
  const { log } = capture;
  if (log === null) throw new Error('no log');
  const shown = Array.from(log.values, (value, i) => {
    const hex = value.toString(16).toUpperCase().padStart(2, '0');
    const time = Math.round(toSeconds(capture.timeBase, log.ticks[i]) * 1e9) / 1e9;
    return `${log.isFromHost[i] === 1 ? '>' : ''}${hex}@${time}`;
  });
  return shown.join(' ');
}

const SENT = '4D@0.194 33@0.257 >2A@0.8 >71@0.8 40@0.9 03@0.9 00@0.9';

function expectSent(text: string): void {
  const capture = readText(text);
  expect(capture.format).toBe('bytes');
  expect(bytesShown(capture)).toBe(SENT);
  expect(capture).toMatchObject({ channels: [], gaps: [], defects: [] });
}

/** The log above, line by line. */
function log(write: (time: string, isFromHost: boolean, hex: string) => string, endOfLine = '\n'): string {
  const rows: [string, boolean, string][] = [
    ['0.194', false, '4D'],
    ['0.257', false, '33'],
    ['0.800', true, '2A 71'],
    ['0.900', false, '40 03 00'],
  ];
  return rows.map((row) => write(...row)).join(endOfLine) + endOfLine;
}

describe('a log of bytes', () => {
  it.each([
    ['RX', 'TX'],
    ['<', '>'],
    ['<-', '->'],
    ['<<', '>>'],
    ['in', 'out'],
    ['Received', 'Sent'],
    ['[R]', '[T]'],
    ['device', 'host'],
    ['device -> host', 'host -> device'],
    ['host <- device', 'device <- host'],
    ['RXD:', 'TXD:'],
    ['read', 'write'],
  ])('tells by the marks %s and %s who sent, as the host sees it', (device, host) => {
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? host : device} ${hex}`));
    expectSent(log((time, isFromHost, hex) => `${time}\t${hex}\t${isFromHost ? host : device}`));
    expectSent(log((time, isFromHost, hex) => `${isFromHost ? host : device} ${time}: ${hex}`));
  });

  it.each<[string, (hex: string) => string]>([
    ['blanks', (hex) => hex],
    ['small letters', (hex) => hex.toLowerCase()],
    ['commas', (hex) => hex.replaceAll(' ', ',')],
    ['dashes', (hex) => hex.replaceAll(' ', '-')],
    ['nothing between', (hex) => hex.replaceAll(' ', '')],
    [
      '0x',
      (hex) =>
        hex
          .replace(/../g, '0x$&')
          .replaceAll('0x ', ' 0x')
          .replace(/0x(.)( |$)/g, '$1$2'),
    ],
    ['h', (hex) => hex.replace(/\w\w/g, '$&h')],
    ['sharp brackets', (hex) => hex.replace(/\w\w/g, '<$&>')],
    ['quotes', (hex) => `"${hex}"`],
  ])('takes bytes in hexadecimal with %s', (_, write) => {
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${write(hex)}`));
  });

  it.each([
    ['0.194', (time: string) => time],
    ['[0.194]', (time: string) => `[${time}]`],
    ['(0.194 s)', (time: string) => `(${time} s)`],
    ['194.0 ms', (time: string) => `${(Number(time) * 1e3).toFixed(1)} ms`],
    ['194000us', (time: string) => `${Math.round(Number(time) * 1e6)}us`],
    ['0,194', (time: string) => time.replace('.', ',')],
    ['1.94e-1', (time: string) => Number(time).toExponential()],
    ['00:00:00.194', (time: string) => `00:00:0${time}`],
    ['1970-01-01T00:00:00.194Z', (time: string) => `1970-01-01T00:00:0${time}Z`],
    ['01.01.1970 00:00:00,194', (time: string) => `01.01.1970 00:00:0${time.replace('.', ',')}`],
  ])('takes times such as %s', (_, write) => {
    expectSent(log((time, isFromHost, hex) => `${write(time)} ${isFromHost ? '>' : '<'} ${hex}`));
    expectSent(log((time, isFromHost, hex) => `${write(time)}; ${isFromHost ? '>' : '<'}; ${hex}`));
  });

  it.each(['\n', '\r\n', '\r', '\n\n'])('takes %j for an end of line', (endOfLine) => {
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex}`, endOfLine));
  });

  it('may be a table with a header, its unit there', () => {
    const ms = (time: string): string => `${Number(time) * 1e3}`;
    expectSent(
      `Time [ms];Direction;Bytes\n${log((time, isFromHost, hex) => `${ms(time)};${isFromHost ? 'TX' : 'RX'};${hex}`)}`,
    );
    expectSent(
      `# recorder 7\n# time unit: us\nNo,Time,Data,Dir\n${log((time, isFromHost, hex) => `7,${Number(time) * 1e6},${hex},${isFromHost ? 'host' : 'device'}`)}`.replaceAll(
        /^7,/gm,
        '',
      ),
    );
    expectSent(
      `time (s),dir,byte (dec)\n${log((time, isFromHost, hex) => `${time},${isFromHost ? 'tx' : 'rx'},${hex.replace(/\w\w/g, (pair) => `${parseInt(pair, 16)}`)}`)}`,
    );
  });

  it('finds the unit of whole numbers by the pace of bytes', () => {
    for (const factor of [1e3, 1e6, 1e9]) {
      const lines = Array.from(
        { length: 30 },
        (_, i) => `${(194 + i * 8) * (factor / 1e3)} ${i % 3 === 0 ? '4F' : '00'}`,
      );
      const capture = readText(`${lines.join('\n')}\n`);
      expect(toSeconds(capture.timeBase, 0)).toBe(0.194);
      expect(toSeconds(capture.timeBase, capture.endTicks)).toBe(0.426);
    }
  });

  it('minds neither numbers of lines nor text, comments and characters beside the bytes', () => {
    let line = 0;
    expectSent(log((time, isFromHost, hex) => `${++line} ${time} ${isFromHost ? 'TX' : 'RX'} ${hex}`));
    const characters: Record<string, string> = { '4D': 'M', '33': '3', '2A 71': '*q', '40 03 00': '@..' };
    expectSent(
      log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex}  ${characters[hex]}`),
    );
    expectSent(
      log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex} |${characters[hex]}|`),
    );
    expectSent(
      log((time, isFromHost, hex) => `${time},${isFromHost ? 'TX' : 'RX'},${hex},"${characters[hex]}"`),
    );
    expectSent(
      `# begin\n${log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex} ; note`)}; end\n`,
    );
    expectSent(
      log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex}`).replace(
        '0.8',
        '0.18 RTS ON\n0.8',
      ),
    );
  });

  it('takes bytes as text, with escapes for what cannot be printed', () => {
    const quoted: Record<string, string> = { '4D': 'M', '33': '3', '2A 71': '*q', '40 03 00': '@\\x03\\0' };
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} "${quoted[hex]}"`));
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} '${quoted[hex]}'`));
    const bare: Record<string, string> = { '4D': 'M', '33': '3', '2A 71': '*q', '40 03 00': '@<03><NUL>' };
    expectSent(log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${bare[hex]}`));
  });

  it('may be written in UTF-16', () => {
    const text = log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex}`);
    const bytes = Uint8Array.from(
      `\ufeff${text}`.split('').flatMap((c) => [c.charCodeAt(0) & 255, c.charCodeAt(0) >> 8]),
    );
    expect(bytesShown(readBytes(bytes))).toBe(SENT);
  });

  it('without times tells the order, and says so', () => {
    for (const text of [
      '4D 33 40 03 00\n40 01 3F\n',
      '4D33400300\n40013F\n',
      '00000000: 4D 33 40 03 00\n00000005: 40 01 3F\n',
    ]) {
      const capture = readText(text);
      expect(Array.from(capture.log?.values ?? [])).toEqual([0x4d, 0x33, 0x40, 3, 0, 0x40, 1, 0x3f]);
      expect(Array.from(capture.log?.ticks ?? [])).toEqual([0, 1, 2, 3, 4, 5, 6, 7]);
      expect(capture.log?.hasTimes).toBe(false);
      expect(capture.defects.map(({ code }) => code)).toEqual(['no-times']);
    }
  });

  it('counts on past midnight', () => {
    expect(bytesShown(readText('23:59:59.9 RX 4D\n00:00:00.1 RX 33\n'))).toBe('4D@86399.9 33@86400.1');
  });
});

describe('a damaged log of bytes', () => {
  const read = (line: string): Capture =>
    readText(`0.1 RX 40\n0.2 RX 03\n0.3 RX 00\n${line}\n0.5 RX 4C\n0.6 RX 05\n0.7 RX 3D\n`);

  it.each([
    ['a word', 'lost', 'bad-line 4:1', ''],
    ['no bytes', '0.4 RX', 'bad-line 4:7', ''],
    ['a byte cut short', '0.4 RX 4D 3', 'bad-byte 4:11', ' 4D@0.4'],
    ['a time that runs backwards', '0.25 RX 4D', 'time-backwards 4:1', ' 4D@0.3'],
    ['a time that is none', '1e99 RX 4D', 'bad-time 4:1', ' 4D@0.3'],
  ])('is read in spite of %s', (_, line, defect, bytes) => {
    const capture = read(line);
    expect(defectsOf(capture)).toEqual([defect]);
    expect(bytesShown(capture)).toBe(`40@0.1 03@0.2 00@0.3${bytes} 4C@0.5 05@0.6 3D@0.7`);
  });

  it('tells the byte of the file', () => {
    const text = '0.1 RX 40\n0.2 RX 03\n0.3 RX 00\n0.4 RX 0G\n0.5 RX 4C\n';
    expect(readText(text).defects[0].byte).toBe(text.indexOf('0G'));
  });

  it('tells that it was cut', () => {
    expect(defectsOf(readText('0.1 RX 40\n0.2 RX 03\n0.3 RX 0'))).toEqual(['cut-short 3:8']);
  });
});

describe('the chunks of a log', () => {
  it('make no difference', () => {
    const text = `# log\r\n${log((time, isFromHost, hex) => `${time} ${isFromHost ? 'TX' : 'RX'} ${hex}`, '\r\n')}\r\nbad\r\n1.0 RX 4D\r\n1.1 RX 4`;
    const whole = readText(text);
    expect(whole.byteLength).toBe(text.length);
    for (const chunk of [1, 2, 3, 7, 50]) expect(readBytes(bytesOf(text), {}, chunk)).toEqual(whole);
  });

  it('make no difference for a long one', () => {
    const text = Array.from(
      { length: 9000 },
      (_, i) => `${(i / 100).toFixed(2)} RX ${(i % 128).toString(16).padStart(2, '0')}`,
    ).join('\r\n');
    const whole = readText(text);
    expect(whole.log?.count).toBe(9000);
    expect(readBytes(bytesOf(text), {}, 4099)).toEqual(whole);
  });
});

describe('a log in one line', () => {
  it('is read in pieces, whatever the chunks', () => {
    const text = '4D3340000040013F'.repeat(150_000);
    const whole = readText(text);
    expect(whole.log?.count).toBe(text.length / 2);
    const other = readBytes(bytesOf(text), {}, 777_777);
    expect(other.log?.values.every((value, i) => value === whole.log?.values[i])).toBe(true);
    expect(other.defects).toEqual(whole.defects);
    expect(whole.byteLength).toBe(text.length);
  });

  // Patterns that look back and forth would need hours for these.
  it.each([
    ['marks', '-'.repeat(400_000)],
    ['points and dashes', '.-/'.repeat(100_000)],
    ['blanks between digits', `0.1 RX 4D${' '.repeat(300_000)}4D\n0.2 RX 33\n`],
    ['bytes', `0.1 RX ${'4D '.repeat(300_000)}\n0.2 RX 33\n`],
    ['times', `${'12:00:00 '.repeat(50_000)}\n`],
    ['text', `0.1 RX "${'\\\\'.repeat(200_000)}"\n0.2 RX "M"\n`],
  ])('of many %s comes to an end', (_, text) => {
    try {
      readText(`0.01 RX 4D\n0.02 RX 33\n${text}`);
    } catch (error) {
      expect(error).toMatchObject({ name: 'CaptureError' });
    }
    try {
      readText(text);
    } catch (error) {
      expect(error).toMatchObject({ name: 'CaptureError' });
    }
  });
});

describe('bytes without any text', () => {
  // Source: mouse(4), Linux man-pages 6.03 (M family, MM); the five-byte format: protocol-facts 5.5, as open drivers read it.
  it.each([
    ['M3 behind its identification', [0x4d, 0x33, 0x40, 0, 0, 0x40, 1, 0x3f, 0x60, 0, 0]],
    ['M taken as eight bits', [0xcd, 0xc0, 0x80, 0x80, 0xc0, 0x81, 0xbf, 0xe0, 0x80, 0x80]],
    ['MZ that moves down only', Array.from({ length: 200 }, (_, i) => [0x40, 0, i % 5, 0][i & 3])],
    ['five bytes', [0x87, 0, 0, 0, 0, 0x86, 0x7f, 0x7f, 0x7f, 0x7f, 0x83, 5, 3, 4, 0xfe]],
    ['MM', [0x94, 5, 3, 0x89, 2, 0x7f, 0x9a, 16, 16]],
  ])('are packets: %s', (_, values) => {
    const capture = readBytes(Uint8Array.from(values), {}, 4);
    expect(capture).toMatchObject({ format: 'bytes', byteLength: values.length, endTicks: values.length });
    expect(Array.from(capture.log?.values ?? [])).toEqual(values);
    expect(capture.defects.map(({ code }) => code)).toEqual(['no-times']);
  });

  it.each([
    ['zeros', new Uint8Array(5000)],
    ['chance', Uint8Array.from({ length: 5000 }, (_, i) => Math.imul(i + 1, 2654435761) >>> 24)],
    ['lines of text in the shape of packets', bytesOf('A10\nB20\nC30\nD40\n')],
    ['text beyond ASCII', bytesOf('測定器の記録です。'.repeat(9))],
  ])('are refused where they are %s', (_, bytes) => {
    expect(refusalOf(bytes).code).toBe('not-a-capture');
  });
});

describe('tables', () => {
  it.each([
    ['levels', 'time,a,b\n0.10,1,0\n0.20,0,0\n0.30,1,1\n'],
    ['voltages of two digits', 'time,a\n0.10,12\n0.20,10\n0.30,11\n'],
    ['quoted levels', '"time","a"\n"0.10","1"\n"0.20","0"\n"0.30","1"\n'],
    ['letters', 'time;a;b\n0.1;H;L\n0.2;L;L\n0.3;H;H\n'],
    ['switches', 'time;in;out\n0.1;on;off\n0.2;off;off\n0.3;on;on\n'],
    ['words', 'time;a\n0,10;high\n0,20;low\n0,30;high\n'],
  ])('of %s are no logs', (_, text) => {
    expect(readText(text).format).toBe('csv');
  });
});

describe('lines of a log in any order', () => {
  const piece = fc.constantFrom(
    '0.1',
    '12:00:00.5',
    '[7]',
    '7',
    'RX',
    'TX',
    '<',
    '>',
    '4D',
    '33',
    '0x40',
    'zz',
    '"M"',
    '\\',
    ';',
    ',',
    '\n',
    '\n',
    ' ',
    '#',
    '1e400',
    '-5',
    '\0',
  );

  it('never end in anything but a capture or a CaptureError', () => {
    fc.assert(
      fc.property(fc.array(piece, { maxLength: 150 }), fc.integer({ min: 1, max: 90 }), (pieces, chunk) => {
        const bytes = bytesOf(`0.01 RX 4D\n0.02 RX 33\n${pieces.join(' ')}\n90.0 RX 4D`);
        try {
          const { log: read, endTicks } = readBytes(bytes, {}, chunk);
          read?.ticks.forEach((tick, i) => {
            expect(
              Number.isSafeInteger(tick) && tick >= (i === 0 ? 0 : read.ticks[i - 1]) && tick <= endTicks,
            ).toBe(true);
          });
        } catch (error) {
          expect(error).toMatchObject({ name: 'CaptureError' });
        }
      }),
      { numRuns: 500 },
    );
  });
});
