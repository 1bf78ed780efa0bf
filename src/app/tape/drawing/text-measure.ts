/** Fonts of the canvas. The signs font fills what the others lack. Source: design 4. */
export const FACES = {
  mono: '"JetBrains Mono", "JetBrains Mono Signs", monospace',
  sans: '"Instrument Sans", "JetBrains Mono Signs", sans-serif',
} as const;

export interface TextStyle {
  readonly face: keyof typeof FACES;
  readonly sizePx: number;
  readonly weight: 400 | 500 | 600;
}

/** Advance of a figure of JetBrains Mono, in em. */
const MONO_EM = 0.6;
/** Mean advance of Instrument Sans, in em: only where there is no canvas to measure with. */
const SANS_EM = 0.5;

/** Signs that are always set in JetBrains Mono, also inside words. Source: design 4. */
const SIGNS = /([Δµ±≤≥Ω²−]+)/;

export function fontOf(style: TextStyle): string {
  return `${style.weight} ${style.sizePx}px ${FACES[style.face]}`;
}

/** A text cut into runs of one face. */
export function textRuns(text: string, face: TextStyle['face']): { text: string; face: TextStyle['face'] }[] {
  if (face === 'mono' || !SIGNS.test(text)) return [{ text, face }];
  return text
    .split(SIGNS)
    .map((part, i) => ({ text: part, face: i % 2 === 1 ? ('mono' as const) : face }))
    .filter((run) => run.text !== '');
}

/** Widths of words at 100 px, by weight and text. Words repeat from frame to frame. */
const widths = new Map<string, number>();
const MOST_WIDTHS = 5000;
const MEASURED_PX = 100;

let measuring: OffscreenCanvasRenderingContext2D | null | undefined;

/** Width of a text in px. Needs no canvas of its own, so that painting and hit testing agree. */
export function textWidth(text: string, style: TextStyle): number {
  if (style.face === 'mono') return text.length * MONO_EM * style.sizePx;
  const key = `${style.weight} ${text}`;
  let width = widths.get(key);
  if (width === undefined) {
    width = measureRuns(text, { ...style, sizePx: MEASURED_PX });
    if (widths.size >= MOST_WIDTHS) widths.clear();
    widths.set(key, width);
  }
  return (width * style.sizePx) / MEASURED_PX;
}

function measureRuns(text: string, style: TextStyle): number {
  let width = 0;
  for (const run of textRuns(text, style.face)) {
    width += run.face === 'mono' ? run.text.length * MONO_EM * style.sizePx : wordsWidth(run.text, style);
  }
  return width;
}

function wordsWidth(text: string, style: TextStyle): number {
  measuring ??= prepareMeasuring();
  if (measuring === null) return text.length * SANS_EM * style.sizePx;
  measuring.font = fontOf(style);
  return measuring.measureText(text).width;
}

function prepareMeasuring(): OffscreenCanvasRenderingContext2D | null {
  if (typeof OffscreenCanvas === 'undefined') return null;
  // A font that arrives late changes every width measured with its stand-in.
  if (typeof document !== 'undefined') document.fonts?.addEventListener('loadingdone', () => widths.clear());
  return new OffscreenCanvas(1, 1).getContext('2d');
}
