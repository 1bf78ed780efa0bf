import { computed, signal } from '@angular/core';
import type { z } from 'zod';
import type { DecodeOptionsDocument, ResolvedLineView } from '#shared/contract/http/decodes';
import type { LinesView, PresetView } from '#shared/contract/http/mapping';
import type { LineMapDocument, lineMapSchema } from '#shared/contract/line-map-document';
import type { LineRole, Polarity } from '#shared/line/line-map';
import { ROLES } from './line-roles';

/** A line map as it is sent: what has a default may be left out. */
export type LineMapInput = z.input<typeof lineMapSchema>;

export interface ChannelUse {
  readonly role: LineRole;
  readonly polarity: Polarity | 'auto';
  readonly thresholds?: { readonly high: number; readonly low: number };
}

export interface ExcludedSpan {
  readonly startS: number;
  readonly endS: number;
  readonly reason: string;
}

/** Everything of a map that is not about single lines, and the options of the decode. */
export interface MapExtras {
  readonly resolutionS: number | null;
  readonly sampleRateHz: number | null;
  readonly timeAccuracyPpm: number | null;
  readonly protocol: DecodeOptionsDocument['protocol'] | null;
  readonly excluded: readonly ExcludedSpan[];
}

const NOTHING: MapExtras = {
  resolutionS: null,
  sampleRateHz: null,
  timeAccuracyPpm: null,
  protocol: null,
  excluded: [],
};

/** A line map a person is working on. Until they touch the lines, everything is left to be found, with its reasons. */
export class LineMapDraft {
  private readonly uses = signal<ReadonlyMap<string, ChannelUse>>(new Map());
  private readonly touched = signal(false);
  private readonly rest = signal<MapExtras>(NOTHING);
  /** Of a preset, that this screen does not edit. */
  private readonly kept = signal<LineMapInput>({});

  readonly isTouched = this.touched.asReadonly();
  readonly extras = this.rest.asReadonly();

  /** As it is sent. */
  readonly map = computed((): LineMapInput => {
    const { resolutionS, timeAccuracyPpm, excluded } = this.rest();
    return {
      ...this.kept(),
      ...(this.touched() ? { lines: this.linesDocument() } : {}),
      ...(resolutionS === null ? {} : { resolutionS }),
      ...(timeAccuracyPpm === null ? {} : { timeAccuracyPpm }),
      ...(excluded.length === 0 ? {} : { excluded: [...excluded] }),
    };
  });
  readonly options = computed((): DecodeOptionsDocument => {
    const { sampleRateHz, protocol } = this.rest();
    return {
      ...(sampleRateHz === null ? {} : { sampleRateHz }),
      ...(protocol === null || protocol === undefined ? {} : { protocol }),
    };
  });

  /** Takes over what the library suggests. */
  suggest({ suggestions }: LinesView): void {
    const uses = new Map<string, ChannelUse>();
    for (const { role, channel, polarity } of suggestions) {
      if (channel !== null) uses.set(channel, { role, polarity: polarity ?? 'auto' });
    }
    this.uses.set(uses);
    this.touched.set(false);
  }

  /** Takes over a preset, whole. */
  use({ map, options }: Pick<PresetView, 'map' | 'options'>): void {
    const { lines, resolutionS, timeAccuracyPpm, excluded, ...kept } = map;
    this.kept.set(kept);
    this.rest.set({
      resolutionS: resolutionS ?? null,
      timeAccuracyPpm: timeAccuracyPpm ?? null,
      excluded: excluded ?? [],
      sampleRateHz: options.sampleRateHz ?? null,
      protocol: options.protocol ?? null,
    });
    if (lines === undefined) return;
    const uses = new Map<string, ChannelUse>();
    for (const role of ROLES) {
      const line = lines[role];
      if (line) uses.set(line.channel, { role, polarity: line.polarity, thresholds: line.thresholds });
    }
    this.uses.set(uses);
    this.touched.set(true);
  }

  useOf(channel: string): ChannelUse | null {
    return this.uses().get(channel) ?? null;
  }

  /** One channel per line: whoever had the role before loses it. */
  assign(channel: string, role: LineRole | null): void {
    this.change((uses) => {
      for (const [name, use] of uses) if (use.role === role || name === channel) uses.delete(name);
      if (role !== null) uses.set(channel, { role, polarity: 'auto' });
    });
  }

  setPolarity(channel: string, polarity: Polarity): void {
    this.change((uses) => {
      const use = uses.get(channel);
      if (use !== undefined) uses.set(channel, { ...use, polarity });
    });
  }

  setThresholds(channel: string, thresholds: ChannelUse['thresholds']): void {
    this.change((uses) => {
      const use = uses.get(channel);
      if (use !== undefined) uses.set(channel, { ...use, thresholds });
    });
  }

  setExtras(part: Partial<MapExtras>): void {
    this.rest.update((rest) => ({ ...rest, ...part }));
  }

  /** The polarity in force: the person's, else the one that was found. */
  polarityOf(channel: string, found: readonly ResolvedLineView[]): Polarity | null {
    const use = this.useOf(channel);
    if (use === null) return null;
    if (use.polarity !== 'auto') return use.polarity;
    return found.find(({ role }) => role === use.role)?.polarity ?? null;
  }

  /** As a preset keeps it: every line by name, nothing left to be found that was seen. */
  presetMap(found: readonly ResolvedLineView[]): LineMapInput {
    const lines: NonNullable<LineMapInput['lines']> = {};
    for (const [channel, { role, thresholds }] of this.uses()) {
      lines[role] = { channel, polarity: this.polarityOf(channel, found) ?? 'auto', thresholds };
    }
    return { ...this.map(), lines };
  }

  get channels(): string[] {
    return [...this.uses().keys()];
  }

  private linesDocument(): NonNullable<LineMapDocument['lines']> {
    const lines: NonNullable<LineMapDocument['lines']> = {};
    for (const role of ROLES) lines[role] = null;
    for (const [channel, { role, ...use }] of this.uses()) lines[role] = { channel, ...use };
    return lines;
  }

  private change(edit: (uses: Map<string, ChannelUse>) => void): void {
    this.touched.set(true);
    this.uses.update((uses) => {
      const next = new Map(uses);
      edit(next);
      return next;
    });
  }
}
