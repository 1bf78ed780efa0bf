import { closeSync, openSync, writeSync } from 'node:fs';

/** A line of text per sample or change is collected up to this size before it is written. */
const BLOCK_BYTES = 4_194_304;

const BIT_US = 1e6 / 1200;
const RESET_AT_US = 100_000;
const MOVES_FROM_US = 400_000;
const PACKET_EVERY_US = 30_000;

/** A growing text file without a string per line. */
class LineWriter {
  private readonly block = new Uint8Array(BLOCK_BYTES);
  private used = 0;
  private written = 0;
  private readonly file: number;

  constructor(path: string) {
    this.file = openSync(path, 'w');
  }

  get length(): number {
    return this.written + this.used;
  }

  text(text: string): void {
    for (let i = 0; i < text.length; i++) this.byte(text.charCodeAt(i));
  }

  byte(byte: number): void {
    if (this.used === BLOCK_BYTES) this.flush();
    this.block[this.used++] = byte;
  }

  close(): void {
    this.flush();
    closeSync(this.file);
  }

  private flush(): void {
    writeSync(this.file, this.block, 0, this.used);
    this.written += this.used;
    this.used = 0;
  }
}

/** Line characters of a device of the M protocol: start of each in µs, its seven data bits. Deterministic, endless. */
function* characters(): Generator<{ startUs: number; value: number }> {
  yield { startUs: RESET_AT_US + 10_000, value: 0x4d };
  let seed = 12345;
  for (let packet = 0; ; packet++) {
    seed = (Math.imul(seed, 1103515245) + 12345) >>> 0;
    const dx = ((seed >>> 8) % 21) - 10;
    const dy = ((seed >>> 16) % 21) - 10;
    const buttons = (seed >>> 24) % 8 === 0 ? 0x20 : 0;
    const first = 0x40 | buttons | (((dy & 0xc0) >> 4) & 0x0c) | (((dx & 0xc0) >> 6) & 0x03);
    const bytes = [first, dx & 0x3f, dy & 0x3f];
    for (let k = 0; k < 3; k++) {
      yield { startUs: MOVES_FROM_US + packet * PACKET_EVERY_US + k * 9 * BIT_US, value: bytes[k] };
    }
  }
}

/** Changes of the data line (mark = 1), in µs: a start element, seven bits, one stop element. */
function* dataChanges(): Generator<{ us: number; level: 0 | 1 }> {
  for (const { startUs, value } of characters()) {
    let level: 0 | 1 = 1;
    const elements = [0, ...Array.from({ length: 7 }, (_, i) => (value >> i) & 1), 1];
    for (let i = 0; i < elements.length; i++) {
      const next = elements[i] as 0 | 1;
      if (next !== level) yield { us: Math.round(startUs + i * BIT_US), level: next };
      level = next;
    }
  }
}

/** A table of samples, `time,data,rts,dtr`, every 10 µs. Levels of the logic side: RTS is ON while its channel is low. */
export function writeSampledCsv(path: string, bytes: number): void {
  const out = new LineWriter(path);
  out.text('time,data,rts,dtr\n');
  const changes = dataChanges();
  let next = changes.next().value;
  let level = 1;
  for (let us = 0; out.length < bytes; us += 10) {
    while (next !== undefined && next.us <= us) {
      level = next.level;
      next = changes.next().value;
    }
    const rts = us < RESET_AT_US && us >= 10_000 ? 1 : 0;
    out.text((us / 1e6).toFixed(6));
    out.text(`,${level},${rts},${rts}\n`);
  }
  out.close();
}

/** A dump of changes in ns with an unrelated clock of `clockHertz`. */
export function writeBusyVcd(path: string, bytes: number, clockHertz: number): void {
  const out = new LineWriter(path);
  out.text('$timescale 1ns $end\n$scope module bench $end\n');
  out.text(
    '$var wire 1 ! clk $end\n$var wire 1 " data $end\n$var wire 1 # rts $end\n$var wire 1 $ dtr $end\n',
  );
  out.text('$upscope $end\n$enddefinitions $end\n#0\n$dumpvars\n0!\n1"\n0#\n0$\n$end\n');
  const changes = dataChanges();
  const halfNs = Math.round(5e8 / clockHertz);
  let next = changes.next().value;
  let clock = 0;
  let pulse = 0;
  for (let ns = halfNs; out.length < bytes; ns += halfNs) {
    while (next !== undefined && next.us * 1000 < ns) {
      out.text(`#${next.us * 1000}\n${next.level}"\n`);
      next = changes.next().value;
    }
    clock ^= 1;
    out.text(`#${ns}\n${clock}!\n`);
    while (next !== undefined && next.us * 1000 === ns) {
      out.text(`${next.level}"\n`);
      next = changes.next().value;
    }
    if (pulse === 0 && ns >= 10_000_000) {
      pulse = 1;
      out.text('1#\n1$\n');
    } else if (pulse === 1 && ns >= RESET_AT_US * 1000) {
      pulse = 2;
      out.text('0#\n0$\n');
    }
  }
  out.close();
}

/** Hours of motion without a clock: what is decoded, not how fast it is read, decides here. Returns the packets written. */
export function writeLongVcd(path: string, packets: number): number {
  const out = new LineWriter(path);
  out.text('$timescale 1us $end\n$scope module bench $end\n');
  out.text('$var wire 1 " data $end\n$var wire 1 # rts $end\n$var wire 1 $ dtr $end\n');
  out.text('$upscope $end\n$enddefinitions $end\n#0\n$dumpvars\n1"\n0#\n0$\n$end\n');
  out.text(`#10000\n1#\n1$\n#${RESET_AT_US}\n0#\n0$\n`);
  const endUs = MOVES_FROM_US + packets * PACKET_EVERY_US;
  for (const { us, level } of dataChanges()) {
    if (us >= endUs) break;
    out.text(`#${us}\n${level}"\n`);
  }
  out.text(`#${endUs}\n`);
  out.close();
  return packets;
}
