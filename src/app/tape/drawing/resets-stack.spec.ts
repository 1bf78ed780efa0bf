import { describe, expect, it } from 'vitest';
import type { Script } from '#shared/composer/script';
import { hitResetStack, layOutResetStack, paintResetStack, STACK_HEAD_PX } from './resets-stack';
import { composeModel, NAMED_PALETTE } from './testing/composed-tape';
import { RecordingContext } from './testing/recording-context';

const MANY: Script = {
  name: 'resets',
  protocol: 'M',
  steps: [11, 15.62, null, 12.5].flatMap((latencyMs) => [
    { do: 'wait', ms: 80 } as const,
    { do: 'reset', widthMs: 104.2, latencyMs } as const,
    { do: 'wait', ms: 250 } as const,
  ]),
};
const model = composeModel(MANY);

describe('all resets stacked', () => {
  it('stand in order of time, or with the unanswered and the slowest on top', () => {
    expect(layOutResetStack(model, 'time', 1044, 96).rows).toEqual([0, 1, 2, 3]);
    expect(layOutResetStack(model, 'latency', 1044, 96).rows).toEqual([2, 1, 3, 0]);
  });

  it('are aligned at RTS ON and show every reply', () => {
    const { scale, figuresX } = layOutResetStack(model, 'time', 1044, 96);
    expect(scale.xOf(0)).toBeGreaterThan(96);
    for (const reply of model.replies) {
      if (reply.latencyTicks !== null) expect(scale.xOf(reply.latencyTicks)).toBeLessThan(figuresX);
    }
  });

  it('count each answer once in the histogram', () => {
    const { bins } = layOutResetStack(model, 'time', 1044, 96);
    expect(bins.reduce((sum, bin) => sum + bin.count, 0)).toBe(3);
  });

  it('are found by their row', () => {
    const layout = layOutResetStack(model, 'latency', 1044, 96);
    expect(hitResetStack(layout, STACK_HEAD_PX + 15)).toBe(1);
    expect(hitResetStack(layout, 10)).toBeNull();
    expect(hitResetStack(layout, layout.heightPx + 1)).toBeNull();
  });

  it('write every latency, the late one in vermilion, and the limit', () => {
    const recording = new RecordingContext();
    paintResetStack(recording.ctx, layOutResetStack(model, 'time', 1044, 96), NAMED_PALETTE);
    const colours = new Map(recording.texts().map((text) => [text.text, text.colour]));
    expect(colours.get('15.62 ms')).toBe('violation');
    expect(colours.get('11.00 ms')).toBe('ink');
    expect(colours.has('no reply')).toBe(true);
    expect(colours.has('limit 14.00')).toBe(true);
  });
});
