import { describe, expect, it } from 'vitest';
import { VERDICT_GLYPHS } from './glyphs';

describe('the glyphs of the verdicts', () => {
  it('differ in shape, not only in colour', () => {
    const shapes = (
      ['pass', 'violation', 'inconclusive', 'waived', 'not-shown', 'not-applicable'] as const
    ).map((verdict) => JSON.stringify(VERDICT_GLYPHS[verdict]));
    expect(new Set(shapes).size).toBe(shapes.length);
  });

  it('stay inside a box of 16', () => {
    for (const parts of Object.values(VERDICT_GLYPHS)) {
      for (const { path } of parts) {
        const numbers = (path.match(/\d*\.?\d+/g) ?? []).map(Number);
        expect(Math.max(...numbers)).toBeLessThanOrEqual(16);
      }
    }
  });
});
