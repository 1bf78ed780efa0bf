import { composeModel, LATE_REPLY } from './drawing/testing/composed-tape';
import { fromAddress, toAddress } from './tape-address';

describe('the address of a view', () => {
  const model = composeModel(LATE_REPLY);
  const nothing = { a: null, b: null };

  it('brings window, dividers and selection back', () => {
    for (const selection of [
      { kind: 'packet' as const, index: 3 },
      { kind: 'character' as const, index: 7 },
      { kind: 'reset' as const, index: 1 },
      { kind: 'finding' as const, index: 2 },
    ]) {
      const window = { startTicks: 1000, endTicks: model.tape.endTicks / 2 };
      const dividers = { a: 4000, b: 9000 };
      const address = toAddress(model, { window, dividers, selection, isStacked: false });
      const place = fromAddress(model, {
        w: address.w ?? undefined,
        a: address.a ?? undefined,
        b: address.b ?? undefined,
        sel: address.sel ?? undefined,
      });
      expect(place.selection).toEqual(selection);
      expect(place.window?.startTicks).toBeCloseTo(window.startTicks, 3);
      expect(place.dividers.b).toBeCloseTo(9000, 3);
    }
  });

  it('names a finding by its rule and place, so that it means the same in another decode', () => {
    const index = model.findings.findIndex(({ rule }) => rule === 'HSK-1');
    const address = toAddress(model, {
      window: { startTicks: 0, endTicks: model.tape.endTicks },
      dividers: nothing,
      selection: { kind: 'finding', index },
      isStacked: true,
    });
    expect(address.sel).toMatch(/^HSK-1@\d/);
    expect(address.w).toBeNull();
    expect(address.stack).toBe('resets');
  });

  it('leaves out whatever is wrong', () => {
    const place = fromAddress(model, { w: 'x,2', a: '', b: 'NaN', sel: 'FOO-9@0.2' });
    expect(place).toEqual({ window: null, dividers: nothing, selection: null });
    expect(fromAddress(model, { w: '2,1' }).window).toBeNull();
    expect(fromAddress(model, { sel: 'packet' }).selection).toBeNull();
  });
});
