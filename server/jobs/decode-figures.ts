import { framingName } from '#shared/characters/framing';
import { DENSITY_COLUMNS } from '#shared/contract/http/decodes';
import type { DetectionView, ResolvedLineView } from '#shared/contract/http/decodes';
import type { Decoded } from '#shared/decode/decoded';
import { measure } from '#shared/decode/metrics';
import { toDuration } from '#shared/time/time-base';
import type { DecodeDetail, DecodeFigures } from '../entities/decode';

const MOST_DEFECTS = 1000;

/** A decode at a glance. */
export function figuresOf(decoded: Decoded): DecodeFigures {
  const { capture, framing } = decoded;
  return {
    protocol: decoded.protocol,
    framing: framing === null ? null : framingName(framing),
    bitRate: framing?.bitRate ?? null,
    nominalBitRate: framing?.nominalBitRate ?? null,
    durationS: toDuration(capture.timeBase, capture.endTicks),
    resets: decoded.resets.length,
    characters: decoded.characters.count,
    packets: decoded.packets.count,
    defects: capture.defects.length,
    density: densityOf(decoded),
    metrics: measure(decoded),
  };
}

/** What is told of a decode one by one. */
export function detailOf(decoded: Decoded): DecodeDetail {
  return {
    lines: linesOf(decoded),
    detections: detectionsOf(decoded),
    defectList: decoded.capture.defects.slice(0, MOST_DEFECTS).map((defect) => ({ ...defect })),
  };
}

export function linesOf(decoded: Decoded): ResolvedLineView[] {
  return Object.values(decoded.lines).map(({ role, channel, polarity, thresholds }) => ({
    role,
    channel,
    polarity,
    thresholds: thresholds === null ? null : { ...thresholds },
  }));
}

export function detectionsOf(decoded: Decoded): DetectionView[] {
  return decoded.detections.map(({ role, ...detection }) => ({ ...detection, role: role ?? null }));
}

/** Share of the line in use per column: characters cut at the borders of the columns. */
function densityOf({ characters, capture }: Decoded): number[] {
  const used = new Float64Array(DENSITY_COLUMNS);
  const width = Math.max(1, capture.endTicks) / DENSITY_COLUMNS;
  for (let i = 0; i < characters.count; i++) {
    const start = characters.startTicks[i];
    const end = characters.endTicks[i];
    for (let c = Math.floor(start / width); c < DENSITY_COLUMNS && c * width < end; c++) {
      used[c] += Math.min(end, (c + 1) * width) - Math.max(start, c * width);
    }
  }
  return Array.from(used, (ticks) => round(Math.min(1, ticks / width), 3));
}

/** Fewer digits make lists shorter. */
export function round(value: number, digits: number): number {
  const factor = 10 ** digits;
  return Math.round(value * factor) / factor;
}
