/** A canvas sized to its wrapper in device pixels, painted in CSS px. */
export interface PaintSurface {
  readonly ctx: CanvasRenderingContext2D;
  readonly widthPx: number;
  readonly heightPx: number;
}

/**
 * Fits the canvas to a size in CSS px and returns its context, scaled.
 * @param isOpaque every pixel is painted each time: cheaper to put on the screen; must stay the same for a canvas
 * @param mostPixelsPerPx caps the device pixel ratio
 * @returns null where the browser gives none, or there is no room
 */
export function prepareSurface(
  canvas: HTMLCanvasElement,
  widthPx: number,
  heightPx: number,
  isOpaque = false,
  mostPixelsPerPx = Infinity,
): PaintSurface | null {
  const ratio = Math.min(window.devicePixelRatio || 1, mostPixelsPerPx);
  const [width, height] = [Math.round(widthPx * ratio), Math.round(heightPx * ratio)];
  if (canvas.width !== width || canvas.height !== height) {
    canvas.width = width;
    canvas.height = height;
  }
  if (width === 0 || height === 0) return null;
  const ctx = canvas.getContext('2d', { alpha: !isOpaque });
  if (ctx === null) return null;
  ctx.setTransform(ratio, 0, 0, ratio, 0, 0);
  return { ctx, widthPx, heightPx };
}
