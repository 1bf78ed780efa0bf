import type { GlyphVerdict } from './glyphs';
import { GLYPH_STROKE, VERDICT_GLYPHS } from './glyphs';
import type { TextStyle } from './text-measure';
import { fontOf, textRuns, textWidth } from './text-measure';

export interface Rect {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export interface InkedText extends TextStyle {
  readonly colour: string;
  readonly align?: 'left' | 'center' | 'right';
}

/** Gap between two groups of three figures, in em. */
const GROUP_GAP_EM = 0.22;

/**
 * Draws crisp lines and set text on a canvas whose unit is the CSS px. Straight lines lie on whole device pixels and are whole
 * device pixels wide, whatever the ratio.
 */
export class Pen {
  private readonly ratio: number;

  constructor(readonly ctx: CanvasRenderingContext2D) {
    this.ratio = ctx.getTransform().a || 1;
  }

  /** The nearest border between two device pixels. */
  snap(px: number): number {
    return Math.round(px * this.ratio) / this.ratio;
  }

  private thickness(px: number): number {
    return Math.max(1, Math.round(px * this.ratio)) / this.ratio;
  }

  fill(rect: Rect, colour: string): void {
    this.ctx.fillStyle = colour;
    this.ctx.fillRect(rect.x, rect.y, rect.width, rect.height);
  }

  /** Straight across, centred on y. */
  across(x0: number, x1: number, y: number, colour: string, widthPx = 1): void {
    const t = this.thickness(widthPx);
    this.ctx.fillStyle = colour;
    this.ctx.fillRect(Math.min(x0, x1), this.snap(y - t / 2), Math.abs(x1 - x0), t);
  }

  /** Straight down, centred on x. */
  down(x: number, y0: number, y1: number, colour: string, widthPx = 1): void {
    const t = this.thickness(widthPx);
    this.ctx.fillStyle = colour;
    this.ctx.fillRect(this.snap(x - t / 2), Math.min(y0, y1), t, Math.abs(y1 - y0));
  }

  /** A dashed line straight down or across. */
  dashed(
    x0: number,
    y0: number,
    x1: number,
    y1: number,
    dash: readonly number[],
    colour: string,
    widthPx = 1,
  ): void {
    const { ctx } = this;
    const t = this.thickness(widthPx);
    const nudge = (px: number): number => this.snap(px - t / 2) + t / 2;
    ctx.save();
    ctx.setLineDash([...dash]);
    ctx.lineWidth = t;
    ctx.strokeStyle = colour;
    ctx.beginPath();
    ctx.moveTo(x0 === x1 ? nudge(x0) : x0, y0 === y1 ? nudge(y0) : y0);
    ctx.lineTo(x0 === x1 ? nudge(x1) : x1, y0 === y1 ? nudge(y1) : y1);
    ctx.stroke();
    ctx.restore();
  }

  /** The outline of a rectangle, its line inside. */
  frame(rect: Rect, colour: string, widthPx = 1): void {
    const { x, y, width, height } = rect;
    const t = this.thickness(widthPx);
    const left = this.snap(x);
    const top = this.snap(y);
    const right = this.snap(x + width);
    const bottom = this.snap(y + height);
    this.ctx.fillStyle = colour;
    this.ctx.fillRect(left, top, right - left, t);
    this.ctx.fillRect(left, bottom - t, right - left, t);
    this.ctx.fillRect(left, top + t, t, bottom - top - 2 * t);
    this.ctx.fillRect(right - t, top + t, t, bottom - top - 2 * t);
  }

  line(x0: number, y0: number, x1: number, y1: number, colour: string, widthPx = 1): void {
    const { ctx } = this;
    ctx.strokeStyle = colour;
    ctx.lineWidth = widthPx;
    ctx.beginPath();
    ctx.moveTo(x0, y0);
    ctx.lineTo(x1, y1);
    ctx.stroke();
  }

  polygon(points: readonly (readonly [number, number])[], colour: string): void {
    const { ctx } = this;
    ctx.fillStyle = colour;
    ctx.beginPath();
    points.forEach(([x, y], i) => {
      if (i === 0) ctx.moveTo(x, y);
      else ctx.lineTo(x, y);
    });
    ctx.closePath();
    ctx.fill();
  }

  /** A slim arrowhead with its tip at (x, y). `angle` in radians: 0 points right. */
  arrowhead(x: number, y: number, angle: number, colour: string, lengthPx = 9, halfPx = 2.4): void {
    const cos = Math.cos(angle);
    const sin = Math.sin(angle);
    const backX = x - lengthPx * cos;
    const backY = y - lengthPx * sin;
    this.polygon(
      [
        [x, y],
        [backX - halfPx * sin, backY + halfPx * cos],
        [backX + halfPx * sin, backY - halfPx * cos],
      ],
      colour,
    );
  }

  disc(x: number, y: number, radiusPx: number, colour: string): void {
    const { ctx } = this;
    ctx.fillStyle = colour;
    ctx.beginPath();
    ctx.arc(x, y, radiusPx, 0, 2 * Math.PI);
    ctx.fill();
  }

  ring(x: number, y: number, radiusPx: number, colour: string, widthPx = 1): void {
    const { ctx } = this;
    ctx.strokeStyle = colour;
    ctx.lineWidth = widthPx;
    ctx.beginPath();
    ctx.arc(x, y, radiusPx, 0, 2 * Math.PI);
    ctx.stroke();
  }

  /** Lines at 45° over rectangles, rising to the right, in one stroke. */
  hatch(rects: readonly Rect[], colour: string, pitchPx = 3.5, widthPx = 0.8): void {
    if (rects.length === 0) return;
    const { ctx } = this;
    ctx.strokeStyle = colour;
    ctx.lineWidth = widthPx;
    ctx.beginPath();
    for (const { x, y, width, height } of rects) {
      // Counted from the rectangle's corner, so that a hatch moves with its cell.
      for (let c = pitchPx / 2; c < width + height; c += pitchPx) {
        const fromX = Math.max(0, c - height);
        const toX = Math.min(width, c);
        ctx.moveTo(x + fromX, y + c - fromX);
        ctx.lineTo(x + toX, y + c - toX);
      }
    }
    ctx.stroke();
  }

  /** Sets a text on its base line. Returns its width. */
  text(text: string, x: number, baseY: number, style: InkedText): number {
    const { ctx } = this;
    const width = textWidth(text, style);
    ctx.fillStyle = style.colour;
    ctx.textBaseline = 'alphabetic';
    ctx.textAlign = 'left';
    let at = style.align === 'right' ? x - width : style.align === 'center' ? x - width / 2 : x;
    const runs = textRuns(text, style.face);
    for (const run of runs) {
      const runStyle = runs.length === 1 ? style : { ...style, face: run.face };
      ctx.font = fontOf(runStyle);
      ctx.fillText(run.text, at, baseY);
      if (runs.length > 1) at += textWidth(run.text, runStyle);
    }
    return width;
  }

  /** Sets a text on a patch of the ground's colour, so that lines stop short of it. */
  label(text: string, x: number, baseY: number, style: InkedText, ground: string, padPx = 3): number {
    const width = textWidth(text, style);
    const left = style.align === 'right' ? x - width : style.align === 'center' ? x - width / 2 : x;
    const height = style.sizePx + 3;
    this.fill(
      { x: left - padPx, y: baseY - style.sizePx * 0.36 - height / 2, width: width + 2 * padPx, height },
      ground,
    );
    return this.text(text, x, baseY, style);
  }

  /** Sets groups of figures with a thin gap between. Returns the width. */
  groups(groups: readonly string[], x: number, baseY: number, style: InkedText): number {
    const gap = GROUP_GAP_EM * style.sizePx;
    const width = groupsWidth(groups, style);
    let at = style.align === 'right' ? x - width : style.align === 'center' ? x - width / 2 : x;
    for (const group of groups) at += this.text(group, at, baseY, { ...style, align: 'left' }) + gap;
    return width;
  }

  /** The glyph of a verdict centred on (x, y). */
  glyph(
    verdict: GlyphVerdict,
    x: number,
    y: number,
    sizePx: number,
    colour: string,
    ground: string,
    isOpaque = true,
  ): void {
    const { ctx } = this;
    const scale = sizePx / 16;
    ctx.save();
    ctx.translate(x - sizePx / 2, y - sizePx / 2);
    ctx.scale(scale, scale);
    ctx.lineWidth = GLYPH_STROKE;
    const parts = VERDICT_GLYPHS[verdict];
    const [outline] = parts;
    if (isOpaque && outline.as === 'stroke' && verdict !== 'not-applicable') {
      ctx.fillStyle = ground;
      ctx.fill(pathOf(outline.path));
    }
    for (const part of parts) {
      ctx.setLineDash([...(part.dash ?? [])]);
      const path = pathOf(part.path);
      if (part.as === 'fill') {
        ctx.fillStyle = colour;
        ctx.fill(path);
      } else {
        ctx.strokeStyle = part.as === 'cut' ? ground : colour;
        ctx.stroke(path);
      }
    }
    ctx.restore();
  }
}

const paths = new Map<string, Path2D>();

/** The path of a glyph's part, made once. */
function pathOf(data: string): Path2D {
  let path = paths.get(data);
  if (path === undefined) {
    path = new Path2D(data);
    paths.set(data, path);
  }
  return path;
}

/** Width of figures set in groups, px. */
export function groupsWidth(groups: readonly string[], style: TextStyle): number {
  const gaps = (groups.length - 1) * GROUP_GAP_EM * style.sizePx;
  return groups.reduce((sum, group) => sum + textWidth(group, style), gaps);
}
