import type { LineRole } from '../line/line-map';
import type { ComposedLine } from './compose';
import { channelLevel } from './write-vcd';

/** How a capture of volts looks. */
export interface VoltsLayout {
  /** Voltages of a positive and a negative line. */
  readonly high: number;
  readonly low: number;
  /** Peak of the evenly spread noise, volts. */
  readonly noise: number;
  /** Time from one level to the other in a straight line, µs; default 0. */
  readonly edgeUs?: number;
  /** Half-way each edge turns back by so many volts before it goes on; default 0. */
  readonly turnBackV?: number;
  /** Levels of single lines that differ. */
  readonly roles?: Partial<Record<LineRole, { readonly high: number; readonly low: number }>>;
}

const DEFAULT_LAYOUT: VoltsLayout = { high: 9, low: -9, noise: 0.1 };
/** Share of an edge spent on turning back. */
const TURN_SHARE = 0.1;

/** The voltage of a composed line; asked for at ascending instants. */
export class LineVoltage {
  private next = 0;
  private nextSag = 0;
  private from = 0;
  private to = 0;
  private changedAt = -Infinity;
  private readonly edgeNs: number;
  private readonly turnBackV: number;
  private readonly levels: { readonly high: number; readonly low: number };

  constructor(
    private readonly line: ComposedLine,
    layout: VoltsLayout = DEFAULT_LAYOUT,
  ) {
    this.edgeNs = (layout.edgeUs ?? 0) * 1e3;
    this.turnBackV = layout.turnBackV ?? 0;
    this.levels = layout.roles?.[line.role] ?? layout;
  }

  /** Volts without noise, `now` in ns. */
  at(now: number): number {
    const { changes } = this.line;
    for (; this.next < changes.length && changes[this.next][0] <= now; this.next++) {
      const [instant, level] = changes[this.next];
      const target = this.target(level);
      // The first level has always been there.
      this.from = this.next === 0 ? target : this.drawn(instant);
      this.to = target;
      this.changedAt = instant;
    }
    return this.drawn(now) - this.sagAt(now);
  }

  private target(level: number): number {
    const shown = channelLevel(this.line.role, this.line.polarity, level);
    if (shown === 2) return 0;
    return shown === 1 ? this.levels.high : this.levels.low;
  }

  private drawn(now: number): number {
    const part = this.edgeNs === 0 ? 1 : Math.min(1, (now - this.changedAt) / this.edgeNs);
    const swing = this.to - this.from;
    if (this.turnBackV === 0 || part >= 1) return this.from + swing * part;
    const back = Math.sign(swing) * this.turnBackV;
    const middle = this.from + swing / 2;
    if (part < 0.5) return this.from + swing * part;
    if (part < 0.5 + TURN_SHARE) return middle - (back * (part - 0.5)) / TURN_SHARE;
    return middle - back + ((swing / 2 + back) * (part - 0.5 - TURN_SHARE)) / (0.5 - TURN_SHARE);
  }

  /** Sags do not overlap. */
  private sagAt(now: number): number {
    const { sags } = this.line;
    while (this.nextSag < sags.length && sags[this.nextSag].to <= now) this.nextSag += 1;
    const sag = sags.at(this.nextSag);
    return sag !== undefined && now >= sag.from ? sag.volts : 0;
  }
}
