import type { Step } from './script';

type DrawStep = Extract<Step, { do: 'draw' }>;

/** The figure as steps of whole counts, one a packet; their sum stays true to the figure. */
export function figureSteps(step: DrawStep): { dx: number; dy: number }[] {
  const steps: { dx: number; dy: number }[] = [];
  let x = 0;
  let y = 0;
  const [originX, originY] = pointAt(step, 0);
  for (let i = 1; i <= step.packets; i++) {
    const [px, py] = pointAt(step, i / step.packets);
    const dx = Math.round(px - originX) - x;
    const dy = Math.round(py - originY) - y;
    steps.push({ dx, dy });
    x += dx;
    y += dy;
  }
  return steps;
}

/** Position on the figure, counts; `part` from 0 to 1. */
function pointAt({ figure, size, angle = 0 }: DrawStep, part: number): [number, number] {
  const turn = 2 * Math.PI * part;
  switch (figure) {
    case 'line': {
      const direction = (angle * Math.PI) / 180;
      // A hand starts and stops gently.
      const eased = part - Math.sin(turn) / (2 * Math.PI);
      return [size * eased * Math.cos(direction), size * eased * Math.sin(direction)];
    }
    case 'circle':
      return [(size / 2) * Math.cos(turn), (size / 2) * Math.sin(turn)];
    case 'square':
      return squarePoint(size, part);
    case 'spiral':
      return [(size / 2) * part * Math.cos(4 * turn), (size / 2) * part * Math.sin(4 * turn)];
    case 'eight':
      return [(size / 2) * Math.sin(turn), (size / 4) * Math.sin(2 * turn)];
  }
}

function squarePoint(side: number, part: number): [number, number] {
  const along = (part * 4) % 1;
  switch (Math.floor(part * 4) % 4) {
    case 0:
      return [side * along, 0];
    case 1:
      return [side, side * along];
    case 2:
      return [side * (1 - along), side];
    default:
      return [0, side * (1 - along)];
  }
}
