import type { Capture, Channel } from '../capture/capture';
import type { CharacterTable } from '../characters/character-table';
import { NO_CHARACTERS } from '../characters/character-builder';
import type { Detection } from '../detection/detection';
import { isNamedActiveLow, roleOfName } from '../detection/channel-names';
import type { ControlQuestion } from '../detection/find-control-lines';
import { tryControl, tryControlChannels } from '../detection/find-control-lines';
import type { DataQuestion, DataTrial } from '../detection/find-data-line';
import { isKnown, tryDataChannels } from '../detection/find-data-line';
import { findChannel } from '../line/find-channel';
import type { LineAssignment, LineMap, LineRole, Polarity } from '../line/line-map';
import { resolveLine } from '../line/resolve-line';
import type { ResolvedLine } from '../line/resolved-line';
import type { Span } from '../time/ticks';

/** The lines of a capture and why each was taken. */
export interface ResolvedLines {
  readonly lines: Partial<Record<LineRole, ResolvedLine>>;
  readonly detections: readonly Detection[];
  /** How the data channel was read when it was found or judged; null without characters. */
  readonly data: DataTrial | null;
}

/** Roles found by name only. */
const ROLES_BY_NAME = ['txd', 'dsr', 'supply', 'contact', 'ready'] as const;

/**
 * Decides which channel plays which part. What the map states is taken as it is; the rest is found from the signals, names
 * breaking ties.
 * @throws MapError where the map names a channel that is not there
 */
export function resolveLines(
  capture: Capture,
  map: LineMap,
  question: DataQuestion,
  unknownSpans: readonly Span[],
): ResolvedLines {
  const resolver = new LineResolver(capture, map, question, unknownSpans);
  return resolver.run();
}

class LineResolver {
  private readonly lines: Partial<Record<LineRole, ResolvedLine>> = {};
  private readonly detections: Detection[] = [];
  private readonly taken = new Set<Channel>();

  constructor(
    private readonly capture: Capture,
    private readonly map: LineMap,
    private readonly question: DataQuestion,
    private readonly unknownSpans: readonly Span[],
  ) {
    for (const assignment of Object.values(map.lines ?? {})) {
      if (assignment) this.taken.add(findChannel(capture.channels, assignment.channel));
    }
  }

  run(): ResolvedLines {
    const data = this.resolveData();
    const dataPolarity = data?.polarity ?? this.question.polarity ?? 'line';
    const control: ControlQuestion = {
      capture: this.capture,
      ticksPerSecond: this.question.ticksPerSecond,
      unknownSpans: this.unknownSpans,
      characters: data?.best?.line.characters ?? NO_CHARACTERS,
      dataPolarity,
      dataChannel: data?.channel.name ?? null,
    };
    this.resolveControl('rts', control);
    this.resolveControl('dtr', control);
    for (const role of ROLES_BY_NAME) this.resolveByName(role, dataPolarity, control.characters);
    return { lines: this.lines, detections: this.detections, data };
  }

  private stated(role: LineRole): LineAssignment | null | undefined {
    return this.map.lines?.[role];
  }

  private free(): Channel[] {
    return this.capture.channels.filter((channel) => !this.taken.has(channel));
  }

  private statedPolarity(role: LineRole): Polarity | undefined {
    const polarity = this.stated(role)?.polarity;
    return polarity === undefined || polarity === 'auto' ? this.question.polarity : polarity;
  }

  private resolveData(): DataTrial | null {
    const stated = this.stated('data');
    if (stated === null) return null;
    const question = {
      ...this.question,
      polarity: this.statedPolarity('data'),
      thresholds: stated?.thresholds,
    };
    const channels =
      stated === undefined ? this.free() : [findChannel(this.capture.channels, stated.channel)];
    const trials = tryDataChannels(question, channels, 'data');
    const best = this.preferData(trials, stated !== undefined);
    if (best === undefined) return null;
    this.put('data', best.channel, best.polarity, stated ?? undefined);
    this.explainData(best, trials, stated !== undefined);
    return best;
  }

  /** The best reading; without characters only a channel stated or named as data counts. */
  private preferData(trials: readonly DataTrial[], isStated: boolean): DataTrial | undefined {
    const [best] = trials;
    if (best === undefined || isStated) return best;
    if (best.best !== null && best.best.line.characters.count > 0 && best.score > 0) return best;
    const named = trials.filter((trial) =>
      [trial.channel.name, ...trial.channel.aliases].some((name) => roleOfName(name) === 'data'),
    );
    const known = named.find((trial) =>
      isKnown(resolveLine(this.capture, trial.channel, 'data', trial.polarity, this.unknownSpans).trace),
    );
    if (known !== undefined) return known;
    return trials.find(
      ({ best: reading }) => reading !== null && reading.line.characters.count > reading.damaged * 3,
    );
  }

  private explainData(best: DataTrial, trials: readonly DataTrial[], isStated: boolean): void {
    const other = trials.find((trial) => trial.channel !== best.channel && trial.best !== null);
    const count = best.best?.line.characters.count ?? 0;
    const damaged = best.best?.damaged ?? 0;
    const found =
      count === 0
        ? 'no characters on it; its name says so'
        : `${count} characters in the stretch tried, ${damaged} of them damaged`;
    this.detections.push({
      subject: 'line',
      role: 'data',
      chosen: best.channel.name,
      reason: isStated ? 'stated' : found,
      runnerUp: other?.channel.name ?? null,
    });
    const isPolarityStated = this.statedPolarity('data') !== undefined;
    const opposite = trials.find(
      (trial) => trial.channel === best.channel && trial.polarity !== best.polarity,
    );
    this.detections.push({
      subject: 'polarity',
      role: 'data',
      chosen: best.polarity,
      reason: isPolarityStated
        ? 'stated'
        : count === 0
          ? 'the line rests at this level'
          : `read the other way ${opposite?.best?.damaged ?? 0} of ${opposite?.best?.line.characters.count ?? 0} characters are damaged`,
      runnerUp: opposite?.polarity ?? null,
    });
  }

  private resolveControl(role: 'rts' | 'dtr', question: ControlQuestion): void {
    const stated = this.stated(role);
    if (stated === null) return;
    const polarity = this.statedPolarity(role);
    if (stated !== undefined) {
      const channel = findChannel(this.capture.channels, stated.channel);
      const trial = tryControl(question, channel, role, polarity, stated.thresholds);
      const used = trial?.polarity ?? polarity ?? question.dataPolarity;
      this.put(role, channel, used, stated);
      this.explainControl(role, channel, used, 'stated', null, polarity !== undefined, trial?.reason ?? '');
      return;
    }
    const trials = tryControlChannels(question, this.free(), role, polarity);
    const [best] = trials;
    if (best === undefined) return;
    this.put(role, best.channel, best.polarity, undefined);
    const runnerUp = trials[1]?.channel.name ?? null;
    this.explainControl(
      role,
      best.channel,
      best.polarity,
      best.reason,
      runnerUp,
      polarity !== undefined,
      best.reason,
    );
  }

  private explainControl(
    role: LineRole,
    channel: Channel,
    polarity: Polarity,
    reason: string,
    runnerUp: string | null,
    isPolarityStated: boolean,
    polarityReason: string,
  ): void {
    this.detections.push({ subject: 'line', role, chosen: channel.name, reason, runnerUp });
    this.detections.push({
      subject: 'polarity',
      role,
      chosen: polarity,
      reason: isPolarityStated ? 'stated' : polarityReason === '' ? 'as the data line' : polarityReason,
      runnerUp: null,
    });
  }

  private resolveByName(role: LineRole, dataPolarity: Polarity, characters: CharacterTable): void {
    const stated = this.stated(role);
    if (stated === null) return;
    const channel =
      stated === undefined
        ? this.free().find(
            (c) =>
              [c.name, ...c.aliases].some((name) => roleOfName(name) === role) &&
              !(c.kind === 'digital' && c.isTooBusy) &&
              isKnown(resolveLine(this.capture, c, role, dataPolarity, this.unknownSpans).trace),
          )
        : findChannel(this.capture.channels, stated.channel);
    if (channel === undefined) return;
    void characters;
    const named: Polarity = isNamedActiveLow(channel.name) ? 'logic' : dataPolarity;
    const isOfPort = role === 'txd' || role === 'dsr';
    const polarity = this.statedPolarity(role) ?? (isOfPort ? named : 'line');
    this.put(role, channel, polarity, stated ?? undefined);
    const reason = stated === undefined ? 'its name says so' : 'stated';
    this.detections.push({ subject: 'line', role, chosen: channel.name, reason, runnerUp: null });
  }

  private put(
    role: LineRole,
    channel: Channel,
    polarity: Polarity,
    stated: LineAssignment | undefined,
  ): void {
    this.taken.add(channel);
    this.lines[role] = resolveLine(
      this.capture,
      channel,
      role,
      polarity,
      this.unknownSpans,
      stated?.thresholds ?? undefined,
    );
  }
}
