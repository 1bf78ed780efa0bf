import type { Framing } from '../characters/framing';
import { isDataRole } from '../line/digital-trace';
import type { LineRole } from '../line/line-map';
import { isMFamily } from '../packets/packet-lengths';
import type { ButtonName, Protocol } from '../packets/packet-table';
import type { ComposedCapture, ComposedTruth, Sag } from './compose';
import { encodePnp } from './encode-identification';
import { encodePacket, largestStep } from './encode-packet';
import { figureSteps } from './figures';
import { LineDrawing } from './line-drawing';
import { SeededRandom } from './random';
import type { FramingName, PacketFault, Script, Step } from './script';
import { ScriptError } from './script';
import { SerialPen } from './serial-pen';

const MS = 1e6;
/** Pause after an identification before anything else, ns. */
const AFTER_REPLY = 5 * MS;
/** Longest capture the composer makes, ns: an hour. */
const LONGEST = 3600e9;

type Mutable<T> = { -readonly [K in keyof T]: T[K] extends readonly (infer I)[] ? I[] : T[K] };

/** The state of a device and its host while a script is played. */
export class Composition {
  private readonly lines = new Map<LineRole, LineDrawing>();
  private readonly pen: SerialPen;
  private readonly hostPen: SerialPen;
  private readonly truth: Mutable<ComposedTruth> = { characters: [], resets: [], packets: [], faults: [] };
  private readonly buttons = new Set<ButtonName>();
  private readonly sags = new Map<LineRole, Sag[]>();
  private readonly seed: number;
  private protocol: Protocol;
  private now = 0;
  private latest = 0;

  constructor(private readonly script: Script) {
    this.seed = script.seed ?? 1;
    this.protocol = script.protocol;
    const roles = new Set<LineRole>(['data', 'rts', 'dtr', 'txd', ...(script.lines ?? [])]);
    for (const role of roles) this.lines.set(role, new LineDrawing(startLevel(script, role)));
    const framing = parseFraming(script.framing ?? defaultFraming(script.protocol));
    const nominal = 1e9 / (script.bitRate ?? 1200);
    const bitNs = nominal / (1 + (script.rateErrorPercent ?? 0) / 100);
    const random = new SeededRandom(this.seed);
    const setup = {
      framing,
      bitNs,
      jitterNs: ((script.jitterPercent ?? 0) / 100) * nominal,
      biasNs: ((script.biasPercent ?? 0) / 100) * nominal,
    };
    this.pen = new SerialPen(this.line('data'), setup, random);
    this.hostPen = new SerialPen(
      this.line('txd'),
      { ...setup, bitNs: nominal, jitterNs: 0, biasNs: 0 },
      random,
    );
  }

  play(step: Step, index: number): void {
    switch (step.do) {
      case 'wait':
        this.now += this.length(step.ms, index);
        break;
      case 'set':
        this.set(step.line, step.on, index);
        break;
      case 'reset':
        this.reset(step, index);
        break;
      case 'move':
        this.packet(step.dx, step.dy, step.wheel ?? 0, index, step);
        break;
      case 'press':
      case 'release':
        this.click(step, index);
        break;
      case 'protocol':
        this.note(index, `packets of ${step.protocol} from here`);
        this.protocol = step.protocol;
        break;
      case 'sag':
        this.sag(step, index);
        break;
      case 'draw':
        this.draw(step, index);
        break;
      case 'idle-packet':
        this.note(index, 'idle packet');
        this.packet(0, 0, 0, index);
        break;
      case 'characters':
        for (const value of step.values) this.character(value);
        break;
      case 'host':
        for (const value of step.values) this.now = this.hostPen.draw(this.now, value);
        break;
      case 'glitch':
        this.glitch(step, index);
        break;
      case 'break':
        this.breakLine(step.ms, index);
        break;
      case 'unknown':
        this.note(index, 'unknown level');
        this.line(step.line, index).hide(this.now, this.now + this.length(step.ms, index));
        break;
      default:
        throw new ScriptError(`there is no step "${String((step as { do: unknown }).do)}"`, index);
    }
    this.latest = Math.max(this.latest, this.now);
    if (this.latest > LONGEST) throw new ScriptError('the capture would be longer than an hour', index);
  }

  finish(): ComposedCapture {
    const polarity = this.script.polarity ?? 'line';
    const roles = this.script.lines ?? ['data', 'rts', 'dtr'];
    return {
      name: this.script.name,
      seed: this.seed,
      durationNs: Math.round(this.latest),
      lines: roles.map((role) => ({
        role,
        polarity,
        changes: this.line(role).finish(),
        sags: [...(this.sags.get(role) ?? [])].sort((a, b) => a.from - b.from),
      })),
      truth: this.truth,
    };
  }

  private line(role: LineRole, index?: number): LineDrawing {
    const line = this.lines.get(role);
    if (line === undefined) throw new ScriptError(`the line ${role} is not recorded`, index);
    return line;
  }

  private length(ms: number, index: number): number {
    if (!Number.isFinite(ms) || ms < 0) throw new ScriptError(`${ms} ms is no length of time`, index);
    return ms * MS;
  }

  private note(step: number, kind: string): void {
    this.truth.faults.push({ at: Math.round(this.now), step, kind });
  }

  private set(role: Extract<Step, { do: 'set' }>['line'], isOn: boolean, index: number): void {
    this.line(role, index).set(this.now, isOn);
    if (role === 'dtr' && this.script.dsrFollows !== false) this.lines.get('dsr')?.set(this.now, isOn);
  }

  private reset(step: Extract<Step, { do: 'reset' }>, index: number): void {
    const rts = this.line('rts');
    rts.set(this.now, false);
    if (step.withDtr === true) this.set('dtr', false, index);
    this.now += this.length(step.widthMs, index);
    if (step.withDtr === true) this.set('dtr', true, index);
    rts.set(this.now, true);
    this.buttons.clear();
    const onAt = Math.round(this.now);
    if (step.latencyMs === null) {
      this.truth.resets.push({ onAt, replyAt: null, identity: null });
      this.now += 200 * MS;
      this.note(index, 'no reply');
      return;
    }
    this.now += this.length(step.latencyMs, index);
    const replyAt = Math.round(this.now);
    for (const stray of step.strays ?? []) this.character(stray);
    const identity = step.identity ?? defaultIdentity(this.script.protocol);
    Array.from(identity).forEach((letter, i) => {
      if (i > 0) this.now += this.length(step.gapMs ?? 0, index);
      this.character(letter.charCodeAt(0));
    });
    if (step.pnp !== undefined) {
      for (const value of encodePnp(step.pnp)) {
        this.now += this.length(step.pnpGapMs ?? 0, index);
        this.character(value);
      }
    }
    this.truth.resets.push({ onAt, replyAt, identity: identity === '' ? null : identity });
    this.now += AFTER_REPLY;
  }

  private click(step: Extract<Step, { do: 'press' | 'release' }>, index: number): void {
    const { button } = step;
    const isDown = step.do === 'press';
    if (this.buttons.has(button) === isDown) {
      throw new ScriptError(`the ${button} button is already ${isDown ? 'down' : 'up'}`, index);
    }
    const wasMiddleDown = this.buttons.has('middle');
    if (isDown) this.buttons.add(button);
    else this.buttons.delete(button);
    if (step.contactMs !== undefined) {
      this.line('contact', index).set(this.now, isDown);
      this.now += this.length(step.contactMs, index);
    }
    this.packet(0, 0, 0, index, step, wasMiddleDown);
  }

  private draw(step: Extract<Step, { do: 'draw' }>, index: number): void {
    if (!(step.packets >= 1 && step.packets <= 100_000))
      throw new ScriptError('a figure takes 1 to 100000 packets', index);
    for (const { dx, dy } of figureSteps(step)) {
      this.packet(dx, dy, 0, index);
      this.now += this.length(step.pauseMs ?? 0, index);
    }
  }

  private packet(
    dx: number,
    dy: number,
    wheel: number,
    index: number,
    how: { readonly fault?: PacketFault; readonly gapMs?: number } = {},
    wasMiddleDown?: boolean,
  ): void {
    const { protocol } = this;
    const { fault } = how;
    const largest = largestStep(protocol);
    if (!Number.isInteger(dx) || !Number.isInteger(dy) || Math.max(Math.abs(dx), Math.abs(dy)) > largest) {
      throw new ScriptError(`(${dx}, ${dy}) is no step of whole counts up to ${largest}`, index);
    }
    if (!Number.isInteger(wheel) || wheel < -8 || wheel > 7)
      throw new ScriptError(`the wheel takes −8 to 7, not ${wheel}`, index);
    const release = this.script.release ?? 'explicit';
    const report = {
      dx,
      dy,
      wheel,
      buttons: this.buttons,
      wasMiddleDown: wasMiddleDown ?? this.buttons.has('middle'),
    };
    const values = encodePacket(protocol, report, release);
    const at = Math.round(this.now);
    if (fault !== undefined) this.note(index, `${fault.kind} of character ${fault.character + 1}`);
    values.forEach((value, i) => {
      if (i > 0) this.now += this.length(how.gapMs ?? 0, index);
      this.packetCharacter(value, i, fault);
    });
    const isWhole = fault === undefined || fault.kind === 'bits';
    const isTold = protocol === 'MZ';
    if (isWhole) {
      const buttons = [...this.buttons].sort();
      this.truth.packets.push({ at, dx, dy, wheel: isTold ? wheel : 0, buttons });
    }
  }

  private packetCharacter(value: number, i: number, fault?: PacketFault): void {
    if (fault === undefined || fault.character !== i) {
      this.character(value);
      return;
    }
    if (fault.kind === 'lost') this.now += this.pen.characterNs;
    else if (fault.kind === 'bits') this.character(value | fault.mask);
    else this.character(value, { stop: fault.kind === 'stop', parity: fault.kind === 'parity' });
  }

  private character(value: number, damage?: { stop?: boolean; parity?: boolean }): void {
    this.truth.characters.push({ at: Math.round(this.now), value, isDamaged: damage !== undefined });
    this.now = this.pen.draw(this.now, value, damage);
    // A damaged stop element needs mark before the next start edge can be seen.
    if (damage?.stop === true) this.now += 2 * (this.pen.characterNs / 9);
  }

  private glitch(step: Extract<Step, { do: 'glitch' }>, index: number): void {
    const from = this.now + this.length(step.afterMs ?? 0, index);
    this.note(index, 'glitch');
    this.line(step.line ?? 'data', index).pulse(from, from + this.length(step.widthUs / 1000, index));
  }

  private sag(step: Extract<Step, { do: 'sag' }>, index: number): void {
    const from = this.now + this.length(step.afterMs ?? 0, index);
    this.note(index, 'sag');
    const list = this.sags.get(step.line) ?? [];
    list.push({ from, to: from + this.length(step.ms, index), volts: step.volts });
    this.sags.set(step.line, list);
  }

  private breakLine(ms: number, index: number): void {
    this.note(index, 'break');
    const data = this.line('data');
    data.set(this.now, false);
    this.now += this.length(ms, index);
    data.set(this.now, true);
    this.now += this.pen.characterNs;
  }
}

function startLevel(script: Script, role: LineRole): boolean {
  if (isDataRole(role)) return true;
  if (role === 'rts') return script.start?.rts ?? false;
  return role === 'dtr' || role === 'dsr' ? (script.start?.dtr ?? true) : false;
}

function defaultFraming(protocol: Protocol): FramingName {
  if (isMFamily(protocol)) return '7N1';
  return protocol === 'MM' ? '8O1' : '8N1';
}

function defaultIdentity(protocol: Protocol): string {
  if (protocol === 'M3' || protocol === 'MZ') return protocol;
  if (isMFamily(protocol)) return 'M';
  return protocol === 'five-byte' ? 'H' : '';
}

function parseFraming(name: FramingName): Pick<Framing, 'dataBits' | 'parity' | 'stopBits'> {
  const match = /^([78])([NO])([12])$/.exec(name);
  if (match === null) throw new ScriptError(`there is no framing "${name}"`);
  return {
    dataBits: Number(match[1]) as 7 | 8,
    parity: match[2] === 'O' ? 'odd' : 'none',
    stopBits: Number(match[3]) as 1 | 2,
  };
}
