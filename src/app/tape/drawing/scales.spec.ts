import { describe, expect, it } from 'vitest';
import { scaleAt } from './scales';

describe('scaleAt', () => {
  it('changes at the borders of the design and belongs to the closer scale there', () => {
    expect([0.0004, 0.1199].map(scaleAt)).toEqual(['survey', 'survey']);
    expect([0.12, 1.1999].map(scaleAt)).toEqual(['packets', 'packets']);
    expect([1.2, 5.9].map(scaleAt)).toEqual(['characters', 'characters']);
    expect([6, 7.99].map(scaleAt)).toEqual(['sub-cells', 'sub-cells']);
    expect([8, 23.9].map(scaleAt)).toEqual(['bits', 'bits']);
    expect([24, 120].map(scaleAt)).toEqual(['edges', 'edges']);
  });
});
