import type { LinesView } from '#shared/contract/http/mapping';
import { LineMapDraft } from './line-map-draft';

function suggested(): LineMapDraft {
  const draft = new LineMapDraft();
  draft.suggest({
    suggestions: [
      { role: 'data', channel: 'a', polarity: 'logic' },
      { role: 'rts', channel: 'b', polarity: 'line' },
      { role: 'dtr', channel: null, polarity: null },
    ],
  } as LinesView);
  return draft;
}

describe('LineMapDraft', () => {
  it('leaves the lines to be found until somebody touches them', () => {
    const draft = suggested();
    draft.setExtras({ resolutionS: 2e-6 });
    expect(draft.map()).toEqual({ resolutionS: 2e-6 });
    expect(draft.useOf('a')).toEqual({ role: 'data', polarity: 'logic' });
  });

  it('states every line once one was touched, absent ones too', () => {
    const draft = suggested();
    draft.setPolarity('b', 'logic');
    expect(draft.map().lines).toMatchObject({
      data: { channel: 'a', polarity: 'logic' },
      rts: { channel: 'b', polarity: 'logic' },
      dtr: null,
    });
  });

  it('gives a role to one channel only', () => {
    const draft = suggested();
    draft.assign('c', 'rts');
    expect(draft.useOf('b')).toBeNull();
    expect(draft.useOf('c')).toEqual({ role: 'rts', polarity: 'auto' });
    draft.assign('c', 'dtr');
    expect(draft.map().lines?.rts).toBeNull();
  });

  it('takes over a preset whole and gives it back', () => {
    const draft = suggested();
    const map = {
      lines: { data: { channel: 'x', polarity: 'line' as const } },
      thresholdSkewS: 1e-6,
      excluded: [{ startS: 1, endS: 2, reason: 'cable moved' }],
    };
    draft.use({ map, options: { sampleRateHz: 1e6 } });
    expect(draft.presetMap([])).toMatchObject(map);
    expect(draft.options()).toEqual({ sampleRateHz: 1e6 });
  });

  it('shows the polarity that was found where the person left it open', () => {
    const draft = suggested();
    draft.assign('c', 'dtr');
    const found = [{ role: 'dtr' as const, channel: 'c', polarity: 'logic' as const, thresholds: null }];
    expect(draft.polarityOf('c', found)).toBe('logic');
    draft.setPolarity('c', 'line');
    expect(draft.polarityOf('c', found)).toBe('line');
  });
});
