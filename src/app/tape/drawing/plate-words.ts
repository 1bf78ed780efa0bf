import type { Reset } from '#shared/resets/reset';
import type { TextStyle } from './text-measure';
import { textWidth } from './text-measure';

export const PLATE_NAME: TextStyle = { face: 'mono', sizePx: 22, weight: 600 };
export const PLATE_WORDS: TextStyle = { face: 'sans', sizePx: 11, weight: 400 };
export const PLATE_INSET_PX = 16;
export const PLATE_GAP_PX = 11;

/** What each identification says of the device. Source: mouse(4), Linux man-pages 6.03. */
const MEANINGS: Readonly<Record<string, readonly [string, string]>> = {
  M: ['two buttons', '3 characters'],
  M3: ['three buttons', '3 or 4 characters'],
  MZ: ['wheel', '4 characters'],
};

/** The two lines beside the name. */
export function plateWords(reset: Reset): readonly string[] {
  const meaning: readonly string[] = MEANINGS[reset.identity ?? ''] ?? ['identification'];
  return reset.pnp === null ? meaning : [meaning[0], 'and a PnP string'];
}

export function plateSize(
  reset: Reset,
  heightPx: number,
): { readonly width: number; readonly height: number } {
  const words = Math.max(...plateWords(reset).map((line) => textWidth(line, PLATE_WORDS)));
  const width = PLATE_INSET_PX + textWidth(reset.identity ?? '', PLATE_NAME) + PLATE_GAP_PX + words + 8;
  return { width: Math.ceil(width), height: heightPx };
}
