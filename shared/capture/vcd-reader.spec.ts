import { describe, expect, it } from 'vitest';
import { secondsPerTick, toSeconds } from '../time/time-base';
import { analogOf, defectsOf, digitalOf, edgesOf, readText, refusalOf } from './spec-texts';

/** A dump with one scope, `t`, that holds the given declarations. */
function dump(declarations: string, body: string, timescale = '1 us'): string {
  return `$timescale ${timescale} $end\n$scope module t $end\n${declarations}\n$upscope $end\n$enddefinitions $end\n${body}`;
}

const TWO = '$var wire 1 ! a $end\n$var wire 1 " b $end';

describe('declarations of a dump', () => {
  // Source: IEEE 1364-2005 §18.2.3.4 ($scope), §18.2.3.8 ($var).
  it('joins scopes and variable by points', () => {
    const capture = readText(
      '$timescale 1us $end $scope module top $end $scope begin b1 $end $var reg 1 ! x $end $upscope $end' +
        ' $scope fork f $end $scope task k $end $var wire 1 " y $end $upscope $end $upscope $end $upscope $end' +
        ' $var wire 1 # z $end $enddefinitions $end #0 1! 0" 1# #5',
    );
    expect(capture.channels.map(({ name }) => name)).toEqual(['top.b1.x', 'top.f.k.y', 'z']);
  });

  // Source: IEEE 1364-2005 §18.2.3.8, variable types; `logic`, `string` and struct scopes: IEEE 1800 §21.7 and practice.
  it('accepts every type of variable, and unknown types of scopes', () => {
    const types =
      'integer reg supply0 supply1 time tri triand trior trireg tri0 tri1 wand wire wor logic bit'.split(' ');
    const declarations = types.map((type, i) => `$var ${type} 1 c${i} ${type} $end`).join('\n');
    const capture = readText(
      dump(
        `$scope struct s $end ${declarations} $upscope $end`,
        `#0 ${types.map((_, i) => `1c${i}`).join(' ')} #1`,
      ),
    );
    expect(capture.channels.map(({ name }) => name)).toEqual(types.map((type) => `t.s.${type}`));
    expect(
      capture.channels.every((channel) => channel.kind === 'digital' && channel.initialLevel === 1),
    ).toBe(true);
  });

  // Source: IEEE 1364-2005 §18.2.3.8: an identifier code is shared where the nets are the same; seen between a port and its wire.
  it('takes several variables of one code for aliases of one channel', () => {
    const capture = readText(
      dump(`${TWO}\n$scope module d $end $var wire 1 ! port $end $upscope $end`, '#0 0! 0" #3 1!'),
    );
    expect(digitalOf(capture, 't.a').aliases).toEqual(['t.d.port']);
    expect(capture.channels).toHaveLength(2);
  });

  // Source: IEEE 1364-2005 §18.2.3.8, reference with bit or part select; the separate range: practice.
  it.each([
    ['d[3:0]', ['t.d[3]', 't.d[2]', 't.d[1]', 't.d[0]']],
    ['d [3:0]', ['t.d[3]', 't.d[2]', 't.d[1]', 't.d[0]']],
    ['d [0:3]', ['t.d[0]', 't.d[1]', 't.d[2]', 't.d[3]']],
    ['d [7:4]', ['t.d[7]', 't.d[6]', 't.d[5]', 't.d[4]']],
    ['d', ['t.d[3]', 't.d[2]', 't.d[1]', 't.d[0]']],
    ['\\d[x] [3:0]', ['t.d[x][3]', 't.d[x][2]', 't.d[x][1]', 't.d[x][0]']],
  ])('makes the bits of the vector %s channels', (reference, names) => {
    const capture = readText(dump(`$var wire 4 ! ${reference} $end`, '#0 b0 ! #7 b1010 !'));
    expect(capture.channels.map(({ name }) => name)).toEqual(names);
    expect(names.map((name) => edgesOf(capture, name))).toEqual(['0 1@7', '0', '0 1@7', '0']);
  });

  it.each([
    ['d [0:0]', 't.d'],
    ['d[0:0]', 't.d'],
    ['d [3]', 't.d[3]'],
    ['d[3]', 't.d[3]'],
    ['\\d[3]', 't.d[3]'],
    ['\\weird+name!', 't.weird+name!'],
    ['Zähler', 't.Zähler'],
  ])('names the one-bit variable %s %s', (reference, name) => {
    expect(readText(dump(`$var wire 1 ! ${reference} $end`, '#0 0! #1 1!')).channels[0].name).toBe(name);
  });

  // Source: IEEE 1364-2005 §18.2.1: codes are printable characters from ! to ~.
  it('compares codes as exact strings, whatever they begin with', () => {
    const codes = ['#', '$', 'b', 'b1', '0', '1', 'x', 'r', '#5', '$end1', 'abcdefgh', '~~~~', '!!'];
    const declarations = codes.map((code, i) => `$var wire 1 ${code} v${i} $end`).join(' ');
    const body = `#0 ${codes.map((code) => `0${code}`).join('\n')}\n${codes.map((code, i) => `#${i + 1}\n1${code}`).join('\n')}`;
    const capture = readText(dump(declarations, body));
    expect(capture.defects).toEqual([]);
    expect(codes.map((_, i) => edgesOf(capture, `t.v${i}`))).toEqual(codes.map((_, i) => `0 1@${i + 1}`));
  });

  it.each([
    ['1ns', 1e-9],
    ['1 ns', 1e-9],
    ['100\n\tps', 1e-10],
    ['10us', 1e-5],
    ['1 ms', 1e-3],
    ['1s', 1],
    ['1fs', 1e-15],
    ['25 ns', 25e-9],
  ])('reads the timescale %j', (timescale, seconds) => {
    expect(secondsPerTick(readText(dump(TWO, '#0 0! #1 1!', timescale)).timeBase)).toBe(seconds);
  });

  // Practice: the header's end may be missing; a stamp or a value then ends it.
  it.each(['#0\n0!\n#4\n1!', '$dumpvars 0! $end #0 #4 1!', '0!\n#0 #4 1!'])(
    'ends the header implicitly before %j',
    (body) => {
      const capture = readText(`$timescale 1us $end $scope module t $end ${TWO} ${body}`);
      expect(edgesOf(capture, 't.a')).toBe('0 1@4');
      expect(capture.defects).toEqual([]);
    },
  );

  it('forgives scopes that are not closed, and ones closed too often', () => {
    const open = `$timescale 1us $end $scope module t $end $scope interface i $end ${TWO} $enddefinitions $end #0 1! #1`;
    expect(readText(open).channels.map(({ name }) => name)).toEqual(['t.i.a', 't.i.b']);
    const closed = `$timescale 1us $end $upscope $end $upscope $end $scope module t $end ${TWO} $enddefinitions $end #0 1! #1`;
    expect(readText(closed).channels.map(({ name }) => name)).toEqual(['t.a', 't.b']);
  });

  it('skips free text, which may hold anything but $end', () => {
    const text =
      '$date today #5 0! $var 1b $end $version\n#1 $scope x\n$end $comment Größe $enddefinitions $end ';
    const capture = readText(`${text}${dump(TWO, '#0 0! $comment #3 1! b1 ! $dumpoff $end #9 1!')}`);
    expect(edgesOf(capture, 't.a')).toBe('0 1@9');
  });
});

describe('values of a dump', () => {
  // Source: IEEE 1364-2005 §18.2.1: white space separates tokens.
  it.each([' ', '\n', '\r\n', '\r', '\t', '\n\n  \n', ' \f '])('takes %j between words', (blank) => {
    const capture = readText(dump(TWO, '#0 0! 1" #5 1! 0" #9'.replaceAll(' ', blank)));
    expect([edgesOf(capture, 't.a'), edgesOf(capture, 't.b')]).toEqual(['0 1@5', '1 0@5']);
    expect(capture.endTicks).toBe(9);
    expect(capture.defects).toEqual([]);
  });

  it('starts unknown and takes x, z and nine-valued levels for what they say', () => {
    const capture = readText(dump(TWO, '#0\n#1 1! #2 x! #3 0! #4 Z! #5 H! #6 L! #7 u!'));
    expect(edgesOf(capture, 't.a')).toBe('x 1@1 x@2 0@3 x@4 1@5 0@6 x@7');
    expect(edgesOf(capture, 't.b')).toBe('x');
  });

  // Source: IEEE 1364-2005 §18.2.2, table of left extension.
  it.each([
    ['b1', '0001'],
    ['b0', '0000'],
    ['bx', 'xxxx'],
    ['bz1', 'xxx1'],
    ['b1zx1', '1xx1'],
    ['B10', '0010'],
    ['b110101', '0101'],
  ])('extends %s to the left', (value, bits) => {
    const capture = readText(dump('$var reg 4 ! d [3:0] $end', `#0 ${value} ! #1`));
    const shown = [3, 2, 1, 0].map((bit) => edgesOf(capture, `t.d[${bit}]`)).join('');
    expect(shown).toBe(bits);
  });

  it('takes the last of several changes at one time, and equal values for no change', () => {
    const capture = readText(dump(TWO, '#0 0! #5 1! 0! 1! #5 0! #6 0! #7 1! #7 #8 1!'));
    expect(edgesOf(capture, 't.a')).toBe('0 1@7');
  });

  // Source: IEEE 1364-2005 §18.2.3.9 to 12; both positions of $dumpvars are seen.
  it('takes $dumpvars before and after the first stamp, and $dumpall as values that hold', () => {
    expect(edgesOf(readText(dump(TWO, '$dumpvars 1! x" $end #0 #5 0!')), 't.a')).toBe('1 0@5');
    expect(
      edgesOf(readText(dump(TWO, '#0 $dumpvars 1! x" $end #5 0! #6 $dumpall 0! 1" $end #7 1!')), 't.a'),
    ).toBe('1 0@5 1@7');
  });

  // Source: IEEE 1364-2005 §18.2.3.10: $dumpoff sets all variables to x, $dumpon restores them.
  it('takes what is switched off for a gap', () => {
    const capture = readText(dump(TWO, '#0 0! 1" #10 $dumpoff x! x" $end #30 $dumpon 1! 1" $end #40 0! #50'));
    expect(capture.gaps).toEqual([{ startTicks: 10, endTicks: 30 }]);
    expect(edgesOf(capture, 't.a')).toBe('0 x@10 1@30 0@40');
    expect(edgesOf(capture, 't.b')).toBe('1 x@10 1@30');
  });

  // Source: a dump by an open simulator, in which reals become NaN (protocol-facts 8.1).
  it('takes vectors and reals that are switched off for a gap', () => {
    const declarations = '$var reg 4 ! d [3:0] $end $var real 64 r volt $end';
    const body = '#0 b101 ! r9.5 r #10 $dumpoff bx ! rNaN r $end #30 $dumpon b1 ! r-9.5 r $end #40';
    const capture = readText(dump(declarations, body));
    expect([2, 0].map((bit) => edgesOf(capture, `t.d[${bit}]`))).toEqual(['1 x@10 0@30', '1 x@10 1@30']);
    const { values, times } = analogOf(capture, 't.volt');
    expect(Array.from(values)).toEqual([9.5, NaN, -9.5]);
    expect(times).toEqual({ kind: 'listed', ticks: Float64Array.of(0, 10, 30) });
    expect(capture.gaps).toEqual([{ startTicks: 10, endTicks: 30 }]);
  });

  it('takes nine-valued levels in vectors, and several changes on a line', () => {
    const declarations = `${TWO} $var reg 9 v d [8:0] $end`;
    const capture = readText(dump(declarations, '#0 0! 0" bUX01ZWLH- v\n#5 1! 1"\tbL v 0!  x" 1" #6'));
    const bits = [8, 7, 6, 5, 4, 3, 2, 1, 0].map((bit) => edgesOf(capture, `t.d[${bit}]`));
    expect(bits).toEqual(['x 0@5', 'x 0@5', '0', '1 0@5', 'x 0@5', 'x 0@5', '0', '1 0@5', 'x 0@5']);
    expect([edgesOf(capture, 't.a'), edgesOf(capture, 't.b')]).toEqual(['0', '0 1@5']);
  });

  it('forgives a block that is not ended', () => {
    const capture = readText(dump(TWO, '#0 $dumpvars 0! 1" #10 1! $dumpoff x! x" #30 $dumpon 1! #40 0!'));
    expect(edgesOf(capture, 't.a')).toBe('0 x@10 1@30 0@40');
    expect(capture.defects).toEqual([]);
  });

  it('lets a gap that is never closed last to the end', () => {
    const capture = readText(dump(TWO, '#0 0! #10 $dumpoff x! x" $end #30'));
    expect(capture.gaps).toEqual([{ startTicks: 10, endTicks: 30 }]);
  });

  it('reads reals as a stepped analog channel, NaN where they are none', () => {
    const capture = readText(
      dump('$var real 64 r volt $end', '#0 r-9.5 r #5 r1.25e1 r #7 rNaN r #8 rinf r #9 R0 r #9 r3 r', '1ns'),
    );
    const channel = analogOf(capture, 't.volt');
    expect(channel.isStepped).toBe(true);
    expect(Array.from(channel.values)).toEqual([-9.5, 12.5, NaN, 3]);
    expect(channel.times).toEqual({ kind: 'listed', ticks: Float64Array.of(0, 5, 7, 9) });
  });

  it('ignores strings and events', () => {
    const declarations = `${TWO} $var string 0 s state $end $var event 1 e ping $end`;
    const capture = readText(dump(declarations, '#0 0! sIDLE\\x20now s 1e #5 1e 1! #6 1e'));
    expect(capture.channels.map(({ name }) => name)).toEqual(['t.a', 't.b']);
    expect(edgesOf(capture, 't.a')).toBe('0 1@5');
    expect(capture.defects).toEqual([]);
  });
});

describe('times of a dump', () => {
  it('begins with the first stamp and ends with the last, changes or not', () => {
    const capture = readText(dump(TWO, '#100 0! #100 #100 #150 1! #900'));
    expect(edgesOf(capture, 't.a')).toBe('0 1@50');
    expect(capture.endTicks).toBe(800);
    expect(capture.timeBase.originUnits).toBe(100n);
    expect(toSeconds(capture.timeBase, 50)).toBe(150e-6);
  });

  // Hours in femtoseconds pass 2^53; protocol-facts 8.1 asks for big integers.
  it('keeps times beyond 2^53 exact by taking the common divisor out', () => {
    const hour = 3_600_000_000_000_000_000n;
    const bit = 833_333_000_000n;
    const capture = readText(dump(TWO, `#0 0! #${hour} 1! #${hour + bit} 0! #${2n * hour} 1!`, '1 fs'));
    const { ticks } = digitalOf(capture, 't.a');
    const exact = Array.from(ticks, (tick) => BigInt(tick) * capture.timeBase.unitsPerTick);
    expect(exact).toEqual([hour, hour + bit, 2n * hour]);
    expect(toSeconds(capture.timeBase, ticks[2])).toBe(7200);
    expect(capture.defects).toEqual([]);
  });

  it('lets huge stamps begin anywhere', () => {
    const capture = readText(dump(TWO, '#900719925474099300001 0! #900719925474099300008 1!', '1 fs'));
    expect(edgesOf(capture, 't.a')).toBe('0 1@7');
    expect(capture.timeBase).toMatchObject({ originUnits: 900719925474099300001n, unitsPerTick: 1n });
  });

  it('does not let a busy channel decide the divisor', () => {
    const stamps: string[] = [];
    for (let i = 1; i <= 210_000; i++) stamps.push(`#${BigInt(i) * 41_666_667_001n} ${i & 1}"`);
    const late = 8_749_900_000_000_000n * 4n;
    const capture = readText(
      dump(TWO, `#0 0! 0" ${stamps.join('\n')} #${late} 1! #${late + 100_000_000n} 0!`, '1 fs'),
      { keep: ['b'] },
    );
    // Kept, the clock needs every femtosecond: then the times cannot all be exact.
    expect(defectsOf(capture)[0]).toMatch(/^time-range/);
    const other = readText(
      dump(
        TWO,
        `#0 0! 0" ${stamps.join('\n').replaceAll('667001', '667')} #${late} 1! #${late + 100_000_000n} 0!`,
        '1 fs',
      ),
    );
    expect(digitalOf(other, 't.b').isTooBusy).toBe(false);
  });
});

describe('a damaged dump', () => {
  it.each([
    ['a stamp that runs backwards', '#10 0! #20 1! #5 0! #30 1!', 'time-backwards 7:15', '0 1@10 x@11 1@20'],
    ['a stamp that is no number', '#10 0! #20 1! #2x 0! #30 1!', 'bad-time 7:15', '0 1@10 x@11 1@20'],
    ['an unknown code', '#10 0! #20 1! 0& #30 0!', 'unknown-code 7:16', '0 1@10 0@20'],
    ['a word that is nothing', '#10 0! #20 1! hello\nq #30 0!', 'unknown-code 7:16', '0 1@10 0@20'],
    ['an unknown command', '#10 0! #20 1! $lost\n#30 0!', 'unknown-word 7:15', '0 1@10 0@20'],
    ['a value without a code', '#10 0! #20 1! 0 #30 0!', 'bad-value 7:15', '0 1@10 0@20'],
    ['control characters', '#10 0! #20 1! \0\0\0 #30 0!', 'control-character 7:15', '0 1@10 0@20'],
    ['a cut inside a value', '#10 0! #20 1!\n#30 0! #35 1', 'cut-short 8:12', '0 1@10 0@20'],
    ['a cut inside a block', '#10 0! #20 1! $dumpall 0!', 'cut-short 7:15', '0'],
    ['a cut before a code', '#10 0! #20 1! b1', 'cut-short 7:17', '0 1@10'],
    ['a cut inside a comment', '#10 0! #20 1! $comment lost', 'cut-short 7:15', '0 1@10'],
    ['a cut inside a stamp', '#10 0! #20 1! #3', 'cut-short 7:15', '0 1@10'],
    ['a cut after #', '#10 0! #20 1! #', 'cut-short 7:15', '0 1@10'],
  ])('is read in spite of %s', (_, body, defect, edges) => {
    const capture = readText(dump(TWO, body));
    expect(defectsOf(capture)[0]).toBe(defect);
    expect(edgesOf(capture, 't.a')).toBe(edges);
  });

  it('is read up to where the time stays behind', () => {
    const capture = readText(dump(TWO, '#100 0! #200 1! #5 0! #10 1! #300 0!'));
    expect(defectsOf(capture)).toEqual(['time-backwards 7:17', 'time-backwards 7:23']);
    expect(edgesOf(capture, 't.a')).toBe('0 1@100');
    expect(capture.endTicks).toBe(100);
  });

  it('counts defects beyond the hundredth', () => {
    const capture = readText(dump(TWO, `#0 0! ${'junk '.repeat(1000)} #5 1!`));
    expect(capture.defects).toHaveLength(101);
    expect(capture.defects[100]).toMatchObject({
      code: 'more-defects',
      message: '900 more defects, not listed one by one',
    });
  });

  it.each([
    ['unknown-timescale', dump(TWO, '#0 0! #1 1!', '1 lightyear'), 'line 1, column 1, byte 0'],
    ['unknown-timescale', dump(TWO, '#0 0! #1 1!', ''), 'line 1, column 1, byte 0'],
    ['no-timescale', `${TWO} $enddefinitions $end #0 1!`, 'line 2, column 22, byte 42'],
    ['no-channels', '$timescale 1us $end $enddefinitions $end #0 #1', 'line 1, column 21, byte 20'],
    ['no-channels', dump('$var event 1 ! e $end', '#0 1!'), 'line 6, column 6, byte 104'],
    ['no-changes', dump(TWO, ''), 'line 7, column 1, byte 119'],
    ['no-changes', dump(TWO, '#0 #5'), 'line 7, column 6, byte 124'],
    ['cut-short', dump(TWO, '').slice(0, 70), 'line 4, column 1, byte 63'],
    ['cut-short', '$comment all is lost', 'line 1, column 1, byte 0'],
  ])('is refused as %s where nothing can be used', (code, text, where) => {
    const refusal = refusalOf(text);
    expect([refusal.name, refusal.code]).toEqual(['CaptureError', code]);
    expect(refusal.where).toBe(where);
  });
});

describe('a dump that claims too much', () => {
  it('leaves a vector of a billion bits out and reads the rest', () => {
    const capture = readText(
      dump(`$var reg 1000000000 v mem $end ${TWO}`, `#0 0! b${'01'.repeat(500_000)} v #5 1!`),
    );
    expect(capture.channels.map(({ name }) => name)).toEqual(['t.a', 't.b']);
    expect(defectsOf(capture)).toEqual(['vector-too-wide 3:1']);
  });

  it('takes the last digits of a million', () => {
    const capture = readText(dump('$var reg 2 v d $end', `#0 b${'01'.repeat(500_000)} v #5 b11 v`));
    expect(edgesOf(capture, 't.d[1]')).toBe('0 1@5');
  });

  it('refuses 20,000 nested scopes', () => {
    const refusal = refusalOf(
      `$timescale 1us $end ${'$scope module deep $end '.repeat(20_000)} ${TWO} $enddefinitions $end #0 1!`,
    );
    expect(refusal.code).toBe('scopes-too-deep');
    expect(refusal.place.line).toBe(1);
  });

  it('splits no more bits into channels than fit, except those asked for', () => {
    const declarations = Array.from(
      { length: 2000 },
      (_, i) => `$var wire 64 v${i} bus${i} [63:0] $end`,
    ).join('\n');
    const text = dump(declarations, '#0 b0 v0 b0 v1999 #5 b1 v1999');
    expect(readText(text).channels.length).toBeLessThanOrEqual(20_000);
    expect(edgesOf(readText(text, { keep: ['bus1999[0]'] }), 't.bus1999[0]')).toBe('0 1@5');
  });
});

describe('a busy channel', () => {
  const clock = (count: number, step: number): string =>
    Array.from({ length: count }, (_, i) => `#${(i + 1) * step}\n${(i + 1) & 1}"`).join('\n');

  it('is counted but not kept where it cannot be a serial line', () => {
    const capture = readText(dump(TWO, `#0 0! 0"\n${clock(300_000, 1)}\n#300001\n1!\n`));
    expect(digitalOf(capture, 't.b')).toMatchObject({
      isTooBusy: true,
      edgeCount: 300_000,
      ticks: new Float64Array(0),
    });
    expect(edgesOf(capture, 't.a')).toBe('0 1@300001');
  });

  it('is kept where it is asked for by the end of its name', () => {
    const channel = digitalOf(
      readText(dump(TWO, `#0 0! 0"\n${clock(300_000, 1)}\n`), { keep: ['.b'] }),
      't.b',
    );
    expect(channel).toMatchObject({ isTooBusy: false, edgeCount: 300_000 });
    expect(channel.ticks).toHaveLength(300_000);
  });

  it('is kept where its changes are slow enough', () => {
    expect(digitalOf(readText(dump(TWO, `#0 0! 0"\n${clock(300_000, 30)}\n`)), 't.b').ticks).toHaveLength(
      300_000,
    );
  });
});
