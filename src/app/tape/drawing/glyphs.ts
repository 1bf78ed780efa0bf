/** What a glyph can say. `waived` is added by people, `open` is a manual item before it is entered. */
export type GlyphVerdict =
  'pass' | 'violation' | 'inconclusive' | 'waived' | 'not-shown' | 'open' | 'not-applicable';

/** A part of a glyph in a box of 16 by 16, as the data of an SVG path. */
export interface GlyphPart {
  readonly path: string;
  /** `fill`: in the verdict's colour. `stroke`: a line of 1.6 in that colour. `cut`: a line of 1.6 in the colour of the ground. */
  readonly as: 'fill' | 'stroke' | 'cut';
  readonly dash?: readonly number[];
}

/** Width of the lines in a box of 16. */
export const GLYPH_STROKE = 1.6;

const RING = 'M14.2 8A6.2 6.2 0 1 1 1.8 8A6.2 6.2 0 1 1 14.2 8Z';
const DASHED_RING: readonly GlyphPart[] = [{ path: RING, as: 'stroke', dash: [2.6, 2.27] }];

/** Shapes of the verdicts, shared by canvas and SVG. Source: design 7. */
export const VERDICT_GLYPHS: Readonly<Record<GlyphVerdict, readonly GlyphPart[]>> = {
  pass: [
    { path: RING, as: 'stroke' },
    { path: 'M5 8.3L7.2 10.4L11 6', as: 'stroke' },
  ],
  violation: [
    { path: 'M8 .6L15.4 8L8 15.4L.6 8Z', as: 'fill' },
    { path: 'M5.9 5.9L10.1 10.1M10.1 5.9L5.9 10.1', as: 'cut' },
  ],
  inconclusive: [
    { path: 'M2 2H14V14H2Z', as: 'stroke' },
    { path: 'M4.6 8.7C5.6 6.4 7 6.8 8 8C9 9.2 10.4 9.6 11.4 7.3', as: 'stroke' },
  ],
  waived: [
    { path: 'M8 1.6L14.4 8L8 14.4L1.6 8Z', as: 'stroke' },
    { path: 'M.8 8H15.2', as: 'stroke' },
  ],
  'not-shown': DASHED_RING,
  open: DASHED_RING,
  'not-applicable': [{ path: 'M4.5 8H11.5', as: 'stroke' }],
};
