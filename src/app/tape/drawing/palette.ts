/** Colours of the tape as CSS text that a canvas takes. */
export interface Palette {
  readonly sheet: string;
  readonly surface: string;
  readonly grid: string;
  readonly gridMinor: string;
  readonly ink: string;
  readonly ink2: string;
  readonly ink3: string;
  readonly ribbon: string;
  readonly tint: string;
  readonly rule: string;
  readonly primary: string;
  readonly onPrimary: string;
  readonly pass: string;
  readonly open: string;
  readonly violation: string;
  readonly primaryContainer: string;
  readonly passContainer: string;
  readonly openContainer: string;
  readonly violationContainer: string;
  readonly onPrimaryContainer: string;
  readonly onPassContainer: string;
  readonly onOpenContainer: string;
  readonly onViolationContainer: string;
}

/** The custom property behind each colour. All are registered as colours: unregistered ones read as text of `light-dark(…)`. */
export const PALETTE_PROPERTIES: Readonly<Record<keyof Palette, string>> = {
  sheet: '--lw-sheet',
  surface: '--lw-surface',
  grid: '--lw-grid',
  gridMinor: '--lw-grid-2',
  ink: '--lw-ink',
  ink2: '--lw-ink-2',
  ink3: '--lw-ink-3',
  ribbon: '--lw-ribbon',
  tint: '--lw-tint',
  rule: '--lw-rule',
  primary: '--lw-primary',
  onPrimary: '--lw-on-primary',
  pass: '--lw-pass',
  open: '--lw-open',
  violation: '--lw-violation',
  primaryContainer: '--lw-primary-container',
  passContainer: '--lw-pass-container',
  openContainer: '--lw-open-container',
  violationContainer: '--lw-violation-container',
  onPrimaryContainer: '--lw-on-primary-container',
  onPassContainer: '--lw-on-pass-container',
  onOpenContainer: '--lw-on-open-container',
  onViolationContainer: '--lw-on-violation-container',
};

/** System colours that take over where the person forces colours. Source: CSS Color 4, system colors. */
const FORCED: Partial<Record<keyof Palette, string>> = {
  sheet: 'Canvas',
  surface: 'Canvas',
  tint: 'Canvas',
  ink: 'CanvasText',
  ink2: 'CanvasText',
  ink3: 'GrayText',
  ribbon: 'CanvasText',
  primary: 'Highlight',
  onPrimary: 'HighlightText',
  pass: 'CanvasText',
  open: 'CanvasText',
  violation: 'CanvasText',
  rule: 'GrayText',
  primaryContainer: 'Canvas',
  passContainer: 'Canvas',
  openContainer: 'Canvas',
  violationContainer: 'Canvas',
  onPrimaryContainer: 'CanvasText',
  onPassContainer: 'CanvasText',
  onOpenContainer: 'CanvasText',
  onViolationContainer: 'CanvasText',
};

/** Reads the colours in force at an element. Read again when the theme changes. */
export function readPalette(element: Element): Palette {
  const style = getComputedStyle(element);
  const isForced = typeof matchMedia === 'function' && matchMedia('(forced-colors: active)').matches;
  const entries = Object.entries(PALETTE_PROPERTIES) as [keyof Palette, string][];
  const colours = entries.map(([key, property]) => {
    const own = style.getPropertyValue(property).trim();
    return [key, isForced ? (FORCED[key] ?? own) : own];
  });
  return Object.fromEntries(colours) as unknown as Palette;
}
