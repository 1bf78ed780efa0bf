import { spawnSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { gzipSync } from 'node:zlib';
import { afterAll, describe, expect, it } from 'vitest';
import { decodeResultSchema } from '#shared/contract/decode-result';

const ROOT = fileURLToPath(new URL('../../', import.meta.url));
const folder = mkdtempSync(join(tmpdir(), 'linewitness-cli-'));
afterAll(() => rmSync(folder, { recursive: true }));

function run(...args: string[]) {
  const result = spawnSync(process.execPath, ['--import', 'tsx', 'server/cli/main.ts', ...args], {
    cwd: ROOT,
    encoding: 'utf8',
    env: { ...process.env, TSX_TSCONFIG_PATH: 'server/tsconfig.json' },
    maxBuffer: 1 << 28,
  });
  return { code: result.status, out: result.stdout, err: result.stderr };
}

function file(name: string, content: string | Uint8Array): string {
  const path = join(folder, name);
  writeFileSync(path, content);
  return path;
}

const oneLine = /^[^\n]+\n$/;

describe('decode', () => {
  it('prints the contract as one line of JSON, exit code 0', () => {
    const { code, out, err } = run('decode', 'spec/captures/01_nominal_m.vcd');
    expect({ code, err }).toEqual({ code: 0, err: '' });
    expect(out).toMatch(oneLine);
    const result = decodeResultSchema.parse(JSON.parse(out));
    expect(result).toMatchObject({
      protocol: 'M',
      framing: { nominalBitRate: 1200, dataBits: 7, parity: 'none' },
    });
    expect(result.resets[0]).toMatchObject({ t: 0.18, replyT: 0.194, latencyS: 0.014, identity: 'M' });
    // A device at exactly its limit is inconclusive, whatever the doubles say.
    expect(result.rules.find(({ id }) => id === 'HSK-1')?.verdict).toBe('inconclusive');
  });

  it('reads a file packed by gzip as the file in it; name, length and hash are those of the packed one', () => {
    const plain = readFileSync(join(ROOT, 'spec/captures/01_nominal_m.vcd'));
    const packed = gzipSync(plain);
    const path = file('nominal.vcd.gz', packed);
    const result = decodeResultSchema.parse(JSON.parse(run('decode', path).out));
    const other = decodeResultSchema.parse(JSON.parse(run('decode', 'spec/captures/01_nominal_m.vcd').out));
    expect(result.capture.sha256).toBe(createHash('sha256').update(packed).digest('hex'));
    expect(result.capture.bytes).toBe(packed.length);
    expect({ ...result, capture: null }).toEqual({ ...other, capture: null });
  });

  it('exits with 1 where a blocking rule is violated, and with --strict where one is open', () => {
    expect(run('decode', 'spec/captures/05_late_id_19ms.vcd', '--format', 'summary').code).toBe(1);
    expect(run('decode', 'spec/captures/01_nominal_m.vcd', '--format', 'summary', '--strict').code).toBe(1);
  });

  it('takes unique endings of channel names and says which channels there are', () => {
    expect(run('decode', 'spec/captures/01_nominal_m.vcd', '--data', 'rxd', '--rts', 'port.rts').code).toBe(
      0,
    );
    const { code, out, err } = run('decode', 'spec/captures/01_nominal_m.vcd', '--data', 'nosuch');
    expect({ code, out }).toEqual({ code: 2, out: '' });
    expect(err).toMatch(oneLine);
    expect(err).toContain('tb01.port.rxd');
  });

  it('prints one result per line for several files, a table with --format summary', () => {
    const files = ['spec/captures/01_nominal_m.vcd', 'spec/captures/09_dropped_byte.vcd'];
    const lines = run('decode', ...files)
      .out.trim()
      .split('\n');
    expect(lines.map((line) => (JSON.parse(line) as { capture: { file: string } }).capture.file)).toEqual([
      '01_nominal_m.vcd',
      '09_dropped_byte.vcd',
    ]);
    const table = run('decode', ...files, '--format', 'summary')
      .out.trim()
      .split('\n');
    expect(table).toHaveLength(3);
    expect(table[1]).toContain('09_dropped_byte.vcd');
  });

  it('writes a log, packets and JUnit', () => {
    expect(run('decode', 'samples/late-warm-reset.vcd', '--format', 'log').out).toContain('> HSK-1');
    expect(run('decode', 'samples/late-warm-reset.vcd', '--format', 'packets').out).toMatch(
      /^packet,start_s,.*\r\n0,/,
    );
    expect(run('decode', 'samples/late-warm-reset.vcd', '--format', 'junit').out).toContain(
      '<failure message="violation',
    );
  });

  const ROWS = Array.from({ length: 200 }, (_, i) => `${(i / 1000).toFixed(3)},${i % 2},0,1`).join('\n');
  const BAD: readonly [string, string | Uint8Array][] = [
    ['empty.vcd', ''],
    ['nul.csv', new Uint8Array(4096)],
    ['prose.csv', 'Dear colleague,\nplease find enclosed the capture.\nBest regards\n'],
    ['no-variables.vcd', '$timescale 1 ns $end\n$enddefinitions $end\n#0\n#10\n'],
    ['unit.vcd', '$timescale 1 parsec $end\n$var wire 1 ! d $end\n$enddefinitions $end\n#0\n0!\n#5\n1!\n'],
    ['deep.vcd', `${'$scope module a $end\n'.repeat(20_000)}$enddefinitions $end\n`],
    ['wide.csv', `t,${'a,'.repeat(200_000)}b\n`],
    ['quote.csv', `t,a\n"${'x'.repeat(3_000_000)}`],
    ['no-time.csv', '0,1\n1,1\n0,0\n1,1\n0,1\n1,0\n0,0\n1,1\n0,1\n1,1\n'],
  ];

  it.each(BAD)('refuses %s with one line and exit code 2', (name, content) => {
    const path = file(name, content);
    const { code, out, err } = run('decode', path);
    expect({ code, out }).toEqual({ code: 2, out: '' });
    expect(err).toMatch(oneLine);
    expect(err).toContain(name);
    expect(err.length).toBeLessThan(600);
    expect(err).not.toMatch(/\bat .*\.ts/);
  });

  it.each([
    ['a missing file', ['decode', 'no/such/file.vcd']],
    ['a folder', ['decode', 'samples']],
    ['an unknown option', ['decode', 'samples/silent.vcd', '--frobnicate']],
    ['a wrong number', ['decode', 'samples/silent.vcd', '--bit-rate', 'fast']],
    ['a wrong framing', ['decode', 'samples/silent.vcd', '--framing', '9X7']],
    ['a rulebook that is none', ['decode', 'samples/silent.vcd', '--rulebook', 'README.md']],
    ['no file at all', ['decode']],
    ['an unknown command', ['frobnicate']],
  ])('refuses %s in one line', (_, args) => {
    const { code, out, err } = run(...args);
    expect({ code, out }).toEqual({ code: 2, out: '' });
    expect(err).toMatch(oneLine);
  });

  it('takes a silent device and a file without RTS as results', () => {
    const silent = JSON.parse(run('decode', 'samples/silent.vcd').out) as {
      protocol: unknown;
      framing: unknown;
      resets: { replyT: unknown }[];
    };
    expect(silent).toMatchObject({ protocol: null, framing: null });
    expect(silent.resets.map(({ replyT }) => replyT)).toEqual([null, null, null]);
    const path = file('two.csv', `time,a,b,c\n${ROWS}\n`);
    expect(run('decode', path).code).toBe(0);
  });
});
