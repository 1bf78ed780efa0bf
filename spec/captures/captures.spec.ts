import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { CaptureReader } from '#shared/capture/read-capture';
import { framingName } from '#shared/characters/framing';
import { decode } from '#shared/decode/decode';
import type { Decoded } from '#shared/decode/decoded';
import type { LineMap } from '#shared/line/line-map';
import { BUTTON_NAMES } from '#shared/packets/packet-table';
import { toSeconds } from '#shared/time/time-base';
import { loadTruths } from './truth';
import type { Truth } from './truth';

// Source: the truth files beside the captures, written by simulators independent of this library.

function read(path: string): ReturnType<CaptureReader['finish']> {
  const reader = new CaptureReader({});
  reader.push(readFileSync(path));
  return reader.finish();
}

function mapOf(truth: Truth): LineMap {
  const lines: Record<string, { channel: string; polarity: 'auto' }> = {};
  for (const role of ['data', 'rts', 'dtr']) {
    const channel = truth.lines[role];
    if (channel) lines[role] = { channel, polarity: 'auto' };
  }
  return { lines };
}

function expectTruth(decoded: Decoded, truth: Truth): void {
  const base = decoded.capture.timeBase;
  const bitS = 1 / truth.bitRate;
  const tolerance = Math.max(truth.timescale_s ?? 0, truth.time_tolerance_s ?? 0, bitS / 4) + 1e-12;
  const seconds = (ticks: number): number => toSeconds(base, ticks);

  const optional = (t: number): boolean => truth.optional_characters.some(([at]) => Math.abs(at - t) <= tolerance);
  const characters = Array.from({ length: decoded.characters.count }, (_, i) => ({
    t: seconds(decoded.characters.startTicks[i]),
    value: decoded.characters.values[i],
  })).filter(({ t }) => !optional(t));
  expect(characters.map(({ value }) => value)).toEqual(truth.characters.map(([, value]) => value));
  truth.characters.forEach(([t], i) => expect(Math.abs(characters[i].t - t)).toBeLessThanOrEqual(tolerance));

  expect(decoded.protocol).toBe(truth.protocol);
  expect(decoded.framing && framingName(decoded.framing)).toBe(truth.framing);
  expect(decoded.framing?.nominalBitRate).toBe(truth.bitRateNominal);
  expect(Math.abs((decoded.framing?.bitRate ?? 0) / truth.bitRate - 1)).toBeLessThan(0.005);
  expect(decoded.lines.data?.polarity).toBe(truth.polarity);

  expect(
    decoded.resets.map((reset) => ({ identity: reset.identity, hasReply: reset.replyTicks !== null })),
  ).toEqual(truth.resets.map((reset) => ({ identity: reset.identity, hasReply: reset.t_reply !== null })));
  truth.resets.forEach((reset, i) => {
    expect(Math.abs(seconds(decoded.resets[i].onTicks) - reset.t_assert)).toBeLessThanOrEqual(tolerance);
    if (reset.t_reply !== null) {
      expect(Math.abs(seconds(decoded.resets[i].replyTicks!) - reset.t_reply)).toBeLessThanOrEqual(tolerance);
    }
    if (reset.t_deassert_before !== null) {
      expect(Math.abs(seconds(decoded.resets[i].offTicks) - reset.t_deassert_before)).toBeLessThanOrEqual(tolerance);
    }
  });

  const packets = Array.from({ length: decoded.packets.count }, (_, p) => ({
    dx: decoded.packets.dx[p],
    dy: decoded.packets.dy[p],
    wheel: decoded.packets.hasWheel ? decoded.packets.wheel[p] : null,
    buttons: BUTTON_NAMES.filter((_, bit) => (decoded.packets.buttons[p] >> bit) & 1).sort(),
  }));
  expect(packets).toEqual(
    truth.packets.map(({ dx, dy, wheel, buttons }) => ({ dx, dy, wheel, buttons: [...buttons].sort() })),
  );
  truth.packets.forEach(({ t, halves }, p) => {
    const first = decoded.packets.firstCharacter[p];
    expect(Math.abs(seconds(decoded.characters.startTicks[first]) - t)).toBeLessThanOrEqual(tolerance);
    if (halves !== undefined) {
      expect([decoded.packets.firstStepDx?.[p], decoded.packets.firstStepDy?.[p]]).toEqual(halves[0]);
    }
  });
  expectPnp(decoded, truth);
}

function expectPnp(decoded: Decoded, truth: Truth): void {
  if (truth.pnp === undefined) return;
  const pnp = decoded.resets.find((reset) => reset.pnp !== null)?.pnp;
  expect(pnp).toMatchObject({ form: truth.pnp['charset'], revision: truth.pnp['rev'] });
  expect(pnp?.eisaId?.text ?? null).toBe(truth.pnp['eisa']);
  expect(pnp?.productId?.text ?? null).toBe(truth.pnp['product']);
  expect(pnp?.serialNumber?.text ?? null).toBe(truth.pnp['serial']);
  expect(pnp?.className?.text ?? null).toBe(truth.pnp['class']);
  expect(pnp?.driverId?.text ?? null).toBe(truth.pnp['driver']);
  expect(pnp?.userName?.text ?? null).toBe(truth.pnp['user']);
  expect(pnp?.checksumSent ?? null).toBe(truth.pnp['checksum_sent']);
  expect(pnp?.checksumComputed ?? null).toBe(truth.pnp['checksum_right']);
}

describe.each(loadTruths())('$truth.id', ({ path, truth }) => {
  it('decodes to its truth with the channels named', () => {
    expectTruth(decode(read(path), mapOf(truth)), truth);
  });

  it('decodes to its truth with nothing said', () => {
    const decoded = decode(read(path));
    expectTruth(decoded, truth);
    for (const role of ['data', 'rts', 'dtr'] as const) {
      const channel = truth.lines[role];
      if (channel === undefined) continue;
      const allowed = [channel, ...(truth.lines_aliases?.[role] ?? [])];
      const line = decoded.lines[role];
      const names = decoded.capture.channels.find((c) => c.name === line?.channel);
      const found = names === undefined ? [null] : [names.name, ...names.aliases];
      expect(found.some((name) => allowed.includes(name))).toBe(true);
    }
  });
});
