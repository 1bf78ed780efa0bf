import type { Sheet } from './sheet';
import { inkOf, laneOf, plateColours } from './sheet';

const WASH = 0.5;
const FAINT_WASH = 0.55;

/** A wash over the span of what is selected, under everything else. */
export function paintWash(sheet: Sheet): void {
  const span = selectedSpan(sheet);
  if (span === undefined) return;
  const { ctx, pen, scale, lanes } = sheet;
  const time = laneOf(sheet, 'time');
  const findings = laneOf(sheet, 'findings');
  const top = time === undefined ? 0 : time.topPx + time.heightPx;
  const bottom = findings?.topPx ?? lanes.reduce((end, lane) => Math.max(end, lane.topPx + lane.heightPx), 0);
  const x0 = Math.max(sheet.leftPx, scale.xOf(span.startTicks));
  const x1 = Math.min(sheet.rightPx, scale.xOf(span.endTicks));
  if (x1 - x0 < 2) return;
  ctx.save();
  ctx.globalAlpha = span.alpha;
  pen.fill({ x: x0, y: top, width: x1 - x0, height: bottom - top }, span.colour);
  ctx.restore();
}

interface Span {
  readonly startTicks: number;
  readonly endTicks: number;
  readonly colour: string;
  readonly alpha: number;
}

function selectedSpan(sheet: Sheet): Span | undefined {
  const { model, view, palette } = sheet;
  const { selection } = view;
  if (selection === null) return undefined;
  switch (selection.kind) {
    case 'finding': {
      const finding = model.findings[selection.index];
      if (finding === undefined || !model.places[selection.index].isSpan) return undefined;
      const { ground } = plateColours(palette, finding.verdict);
      return { startTicks: finding.startTicks, endTicks: finding.endTicks, colour: ground, alpha: WASH };
    }
    case 'packet':
      return {
        startTicks: model.packetStarts[selection.index],
        endTicks: model.packetEnds[selection.index],
        colour: palette.primaryContainer,
        alpha: FAINT_WASH,
      };
    default:
      return undefined;
  }
}

/** The span of the selected finding as a bar with two hooks on the rule above the Findings lane. */
export function paintSpanBar(sheet: Sheet): void {
  const { model, view, palette, pen, scale } = sheet;
  const findings = laneOf(sheet, 'findings');
  if (view.selection?.kind !== 'finding' || findings === undefined) return;
  const finding = model.findings[view.selection.index];
  if (finding === undefined || !model.places[view.selection.index].isSpan) return;
  const x0 = scale.xOf(finding.startTicks);
  const x1 = scale.xOf(finding.endTicks);
  if (x1 - x0 < 6 || x1 < sheet.leftPx || x0 > sheet.rightPx) return;
  const colour = inkOf(palette, finding.verdict);
  const y = findings.topPx - 1.5;
  pen.across(Math.max(x0, sheet.leftPx), Math.min(x1, sheet.rightPx), y, colour, 3);
  pen.down(x0, y - 6, y + 1.5, colour);
  pen.down(x1, y - 6, y + 1.5, colour);
}
