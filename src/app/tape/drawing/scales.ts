/** How much is drawn at a scale. Source: design 8. */
export type ScaleName = 'survey' | 'packets' | 'characters' | 'sub-cells' | 'bits' | 'edges';

/** The name of a scale of `pxPerBit`. */
export function scaleAt(pxPerBit: number): ScaleName {
  if (pxPerBit < 0.12) return 'survey';
  if (pxPerBit < 1.2) return 'packets';
  if (pxPerBit < 6) return 'characters';
  if (pxPerBit < 8) return 'sub-cells';
  return pxPerBit < 24 ? 'bits' : 'edges';
}

/** Scales, px a bit, from which a single thing is drawn. Source: design 8. */
export const FROM = {
  heldName: 0.6,
  hexInCell: 1.9,
  replyDimension: 2,
  bitRule: 2.4,
  idleBits: 4,
  packetNumber: 6,
  letters: 8,
  samples: 60,
} as const;
