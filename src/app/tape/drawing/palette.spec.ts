import { afterEach, describe, expect, it, vi } from 'vitest';
import { PALETTE_PROPERTIES, readPalette } from './palette';

describe('readPalette', () => {
  afterEach(() => vi.unstubAllGlobals());

  const style = { getPropertyValue: (name: string) => ` computed(${name}) ` };

  it('takes every colour from its custom property', () => {
    vi.stubGlobal('getComputedStyle', () => style);
    const palette = readPalette({} as Element);
    expect(palette.sheet).toBe('computed(--lw-sheet)');
    expect(palette.gridMinor).toBe('computed(--lw-grid-2)');
    expect(Object.keys(palette).sort()).toEqual(Object.keys(PALETTE_PROPERTIES).sort());
  });

  it('follows the colours a person forces', () => {
    vi.stubGlobal('getComputedStyle', () => style);
    vi.stubGlobal('matchMedia', () => ({ matches: true }));
    const palette = readPalette({} as Element);
    expect(palette.ink).toBe('CanvasText');
    expect(palette.primary).toBe('Highlight');
    expect(palette.sheet).toBe('Canvas');
  });
});
