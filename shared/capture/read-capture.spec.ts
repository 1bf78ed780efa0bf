import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Capture } from './capture';
import { CaptureError } from './capture-error';
import { CaptureReader, readCapture } from './read-capture';
import { bytesOf, defectsOf, edgesOf, readBytes, readText, refusalOf } from './spec-texts';

const DUMP =
  '$date today $end $timescale 1 us $end $scope module t $end $var wire 1 ! a $end $var wire 2 "" d [1:0] $end' +
  '\n$upscope $end\r\n$enddefinitions $end\n#0\n$dumpvars\n0!\nb10 ""\n$end\n#12345678\n1!\n#12345679\n0!\r\nb1 ""\n#12345680 1!\n';

const TABLE = `# Bench recorder\r\n"Time (s)";"a ""x""";b\r\n${Array.from({ length: 70 }, (_, i) => `${(i / 100).toFixed(3).replace('.', ',')};${(i >> 3) & 1};"${i & 1}"\r\n`).join('')}`;

function utf16(text: string, isLittleEndian: boolean): Uint8Array {
  const units = Array.from(text, (c) => c.charCodeAt(0));
  return Uint8Array.from(
    units.flatMap((unit) => (isLittleEndian ? [unit & 255, unit >> 8] : [unit >> 8, unit & 255])),
  );
}

describe('what a file is', () => {
  it('is told by its content', () => {
    expect(readText(DUMP).format).toBe('vcd');
    expect(readText(`\n  \t\n${DUMP}`).format).toBe('vcd');
    expect(readText(`\ufeff${DUMP}`).format).toBe('vcd');
    expect(readText(TABLE).format).toBe('csv');
  });

  it.each([
    ['a PNG picture', [0x89, 0x50, 0x4e, 0x47, 13, 10, 26, 10, 0, 0]],
    ['a JPEG picture', [0xff, 0xd8, 0xff, 0xe0, 0, 16]],
    ['a PDF document', [0x25, 0x50, 0x44, 0x46, 0x2d]],
    ['a zip archive or office document', [0x50, 0x4b, 3, 4, 20, 0]],
    ['packed by gzip: unpack it first', [0x1f, 0x8b, 8, 0, 0, 0]],
  ])('is told where it is %s', (what, bytes) => {
    const refusal = refusalOf(Uint8Array.from(bytes));
    expect([refusal.code, refusal.message, refusal.where]).toEqual([
      'not-a-capture',
      `the file is ${what}`,
      'byte 0',
    ]);
  });

  it('is nothing where it is empty, blank or binary', () => {
    expect(refusalOf('')).toMatchObject({ code: 'empty-file', message: 'the file is empty' });
    expect(refusalOf(' \n\t\r\n')).toMatchObject({ code: 'empty-file' });
    expect(refusalOf(new Uint8Array(100_000))).toMatchObject({ code: 'not-a-capture', where: 'byte 0' });
    const noise = Uint8Array.from({ length: 9999 }, (_, i) => Math.imul(i + 1, 2654435761) >>> 24);
    expect(refusalOf(noise)).toMatchObject({ code: 'not-a-capture' });
  });

  // Source: RFC 2781 (UTF-16 and its byte-order mark).
  it.each([
    ['little endian with mark', '\ufeff', true],
    ['big endian with mark', '\ufeff', false],
    ['little endian', '', true],
    ['big endian', '', false],
  ])('may be written in UTF-16, %s', (_, mark, isLittleEndian) => {
    const table = readBytes(utf16(`${mark}t (µs),β\r\n0,1\r\n100,0\r\n200,1\r\n`, isLittleEndian));
    expect(edgesOf(table, 'β')).toBe('1 0@100 1@200');
    expect(edgesOf(readBytes(utf16(mark + DUMP, isLittleEndian)), 't.a')).toBe(
      '0 1@12345678 0@12345679 1@12345680',
    );
  });

  it('names no byte of a file in UTF-16, whose defects have lines', () => {
    const bytes = utf16('\ufefftime,a\n0,1\nbad,1\n1,0\n2,1\n', true);
    expect(readBytes(bytes).defects).toMatchObject([{ code: 'bad-time', line: 3, column: 1, byte: null }]);
    expect(readBytes(bytes).byteLength).toBe(bytes.length);
    expect(refusalOf(utf16('\ufeffDear team,\nno capture today\n', true))).toMatchObject({ where: 'line 1' });
  });
});

describe('the chunks of a file', () => {
  const shown = (bytes: Uint8Array, chunks: readonly Uint8Array[]): Capture => {
    const reader = new CaptureReader();
    for (const chunk of chunks) reader.push(chunk);
    const capture = reader.finish();
    expect(capture.byteLength).toBe(bytes.length);
    return capture;
  };

  it.each([
    ['a dump', bytesOf(DUMP)],
    ['a table', bytesOf(TABLE)],
    ['a table in UTF-16', utf16(`\ufeff${TABLE.slice(0, 300)}`, true)],
    ['a damaged table', bytesOf(`${TABLE}9,1;0\r\n"9,2;0;0\r\n";1\r\nx;y;z\r\n9,3;1;1`)],
    ['a damaged dump', bytesOf(`${DUMP}#7\n0!\n#12345690\n1!\n1%\nfoo #12345699\n0`)],
  ])('make no difference for %s', (_, bytes) => {
    const whole = shown(bytes, [bytes]);
    for (let border = 0; border <= bytes.length; border++) {
      expect(shown(bytes, [bytes.subarray(0, border), bytes.subarray(border)])).toEqual(whole);
    }
    expect(
      shown(
        bytes,
        Array.from(bytes, (byte) => Uint8Array.of(byte)),
      ),
    ).toEqual(whole);
  });

  it('may share one buffer', () => {
    const reader = new CaptureReader();
    const buffer = new Uint8Array(10);
    const bytes = bytesOf(TABLE);
    for (let i = 0; i < bytes.length; i += 10) {
      const length = Math.min(10, bytes.length - i);
      buffer.set(bytes.subarray(i, i + length));
      reader.push(buffer.subarray(0, length));
    }
    expect(reader.finish()).toEqual(readText(TABLE));
  });
});

describe('reading from a source', () => {
  const halves = [bytesOf(DUMP).subarray(0, 100), bytesOf(DUMP).subarray(100)];

  it('tells its progress', async () => {
    const seen: number[] = [];
    const capture = await readCapture(halves, { onProgress: (bytes) => seen.push(bytes) });
    expect(capture).toEqual(readText(DUMP));
    expect(seen).toEqual([100, DUMP.length]);
  });

  it('can be cancelled', async () => {
    let chunks = 0;
    const reading = readCapture(halves, { onProgress: () => (chunks += 1), isCancelled: () => chunks === 1 });
    await expect(reading).rejects.toMatchObject({ name: 'CaptureError', code: 'cancelled' });
  });
});

/** What reading comes to; fails on any error that is not the library's own. */
function outcomeOf(bytes: Uint8Array, chunk: number): string {
  try {
    return readBytes(bytes, { sampleRateHz: 1e6 }, chunk).format;
  } catch (error) {
    if (!(error instanceof CaptureError)) throw error;
    expect(error.message).not.toBe('');
    return error.code;
  }
}

describe('any bytes whatever', () => {
  const chunk = fc.integer({ min: 1, max: 5000 });
  const words = fc.constantFrom(
    ...(
      '$timescale|1us|1 ns|$end|$scope|module|t|$var|wire|1|8|!|"|a|[7:0]|$upscope|$enddefinitions|#0|#1|#99999999999999999999|0!|1"' +
      '|x!|b01|bz|r1.5|rNaN|$dumpvars|$dumpoff|$dumpon|$dumpall|$comment|#|$|0|-|#5'
    ).split('|'),
  );
  const cells = fc.constantFrom(
    ...'time|t (ns)|a|b|0|1|0.1|1,5|-3|1e300|1e-300|1e999|NaN|inf|""|"|x|H|0.18000000000000002|99999999999999999999|sep=;|#|rate 1 kHz'.split(
      '|',
    ),
  );
  const marks = fc.constantFrom(',', ',', ',', ';', '\n', '\n', '\r\n', '\t', '|', ' ');

  it('never end in anything but a capture or a CaptureError', () => {
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 3000 }), chunk, (bytes, size) => void outcomeOf(bytes, size)),
      { numRuns: 300 },
    );
  });

  it('nor do words of a dump in any order', () => {
    fc.assert(
      fc.property(fc.array(words, { maxLength: 120 }), chunk, (list, size) => {
        const header = '$timescale 1us $end $var wire 1 ! a $end $var wire 8 " d $end ';
        outcomeOf(bytesOf(list.join(' ')), size);
        outcomeOf(bytesOf(header + list.join('\n')), size);
      }),
      { numRuns: 300 },
    );
  });

  it('nor do cells of a table in any order', () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(cells, marks), { maxLength: 200 }), chunk, (list, size) => {
        outcomeOf(bytesOf(list.flat().join('')), size);
        outcomeOf(bytesOf(`time,a\n0,1\n1,0\n2,1\n${list.flat().join('')}`), size);
      }),
      { numRuns: 300 },
    );
  });

  it('keep the changes of a channel in order and different', () => {
    fc.assert(
      fc.property(fc.array(fc.tuple(cells, marks), { maxLength: 200 }), (list) => {
        const bytes = bytesOf(`time,a,b\n0,1,0\n1,0,0\n2,1,1\n${list.flat().join('')}\n50,1,1\n60,0,0\n`);
        for (const channel of readBytes(bytes).channels) {
          if (channel.kind !== 'digital') continue;
          const { ticks, levels, initialLevel } = channel;
          ticks.forEach((tick, i) => {
            expect(Number.isSafeInteger(tick) && tick > (i === 0 ? 0 : ticks[i - 1])).toBe(true);
            expect(levels[i]).not.toBe(i === 0 ? initialLevel : levels[i - 1]);
          });
        }
      }),
      { numRuns: 300 },
    );
  });
});

describe('zeros at the end of a file', () => {
  it('are told, and what stands before is kept', () => {
    const capture = readText(`time,a\n0,1\n1,0\n2,1\n${'\0'.repeat(5000)}`);
    expect(defectsOf(capture)).toEqual(['cut-short 5:5001']);
    expect(edgesOf(capture, 'a')).toBe('1 0@1 1@2');
  });
});
