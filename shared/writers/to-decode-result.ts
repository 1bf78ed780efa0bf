import { BREAK_ERROR, FRAMING_ERROR, PARITY_ERROR } from '../characters/character-table';
import type { DecodeResult } from '../contract/decode-result';
import type { Decoded } from '../decode/decoded';
import { measure } from '../decode/metrics';
import { TOOL } from '../decode/version';
import { LINE_ROLES } from '../line/line-map';
import { BUTTON_NAMES } from '../packets/packet-table';
import type { Reset } from '../resets/reset';
import type { CheckResult } from '../rules/finding';
import { secondsPerTick, toDuration, toSeconds } from '../time/time-base';

/** What a decode does not know about its file. */
export interface FileFacts {
  readonly name: string;
  /** Hexadecimal, of the file as it was given. */
  readonly sha256: string;
  /** Length of the file as it was given. */
  readonly bytes: number;
}

type Lists = 'characters' | 'packets' | 'findings' | 'glitches';

/** A decode and its check in the form of the contract. Long lists are made at once: see `write-json` for a stream. */
export function toDecodeResult(decoded: Decoded, check: CheckResult, file: FileFacts): DecodeResult {
  return {
    ...toResultHead(decoded, check, file),
    characters: Array.from({ length: decoded.characters.count }, (_, i) => toCharacter(decoded, i)),
    packets: Array.from({ length: decoded.packets.count }, (_, p) => toPacket(decoded, p)),
    glitches: decoded.glitches.map((glitch) => ({
      t: toSeconds(decoded.capture.timeBase, glitch.startTicks),
      tEnd: toSeconds(decoded.capture.timeBase, glitch.endTicks),
    })),
    findings: check.findings.map(({ startTicks, endTicks, ...finding }) => ({
      ...finding,
      t: toSeconds(decoded.capture.timeBase, startTicks),
      tEnd: toSeconds(decoded.capture.timeBase, endTicks),
    })),
  };
}

function toResultHead(decoded: Decoded, check: CheckResult, file: FileFacts): Omit<DecodeResult, Lists> {
  const { capture } = decoded;
  const base = capture.timeBase;
  return {
    tool: { ...TOOL },
    capture: {
      file: file.name,
      sha256: file.sha256,
      format: capture.format,
      bytes: file.bytes,
      startS: toSeconds(base, 0),
      endS: toSeconds(base, capture.endTicks),
      resolutionS: decoded.resolutionTicks * secondsPerTick(base),
      channels: capture.channels.map((channel) => ({
        name: channel.name,
        kind: channel.kind,
        edges: channel.kind === 'digital' ? channel.edgeCount : 0,
        aliases: [...channel.aliases],
      })),
      defects: capture.defects.map((defect) => ({ ...defect })),
      gaps: capture.gaps.map((gap) => ({
        startS: toSeconds(base, gap.startTicks),
        endS: toSeconds(base, gap.endTicks),
      })),
    },
    lines: Object.fromEntries(
      LINE_ROLES.map((role) => {
        const line = decoded.lines[role];
        return [
          role,
          line === undefined
            ? null
            : { channel: line.channel, polarity: line.polarity, thresholds: line.thresholds },
        ];
      }),
    ) as DecodeResult['lines'],
    detections: decoded.detections.map((detection) => ({ ...detection, role: detection.role ?? null })),
    framing: decoded.framing === null ? null : { ...decoded.framing },
    protocol: decoded.protocol,
    controlEvents: decoded.controlEvents.map((event) => ({
      t: toSeconds(base, event.ticks),
      line: event.line,
      on: event.isOn,
    })),
    resets: decoded.resets.map((reset) => toReset(decoded, reset)),
    rulebook: { ...check.rulebook },
    rules: check.rules.map((rule) => ({ ...rule })),
    metrics: measure(decoded),
    verdict: check.verdict,
  };
}

function toCharacter(decoded: Decoded, i: number): DecodeResult['characters'][number] {
  const { characters, capture } = decoded;
  const flags = characters.errors[i];
  const errors: DecodeResult['characters'][number]['errors'] = [];
  if ((flags & FRAMING_ERROR) !== 0) errors.push('framing');
  if ((flags & PARITY_ERROR) !== 0) errors.push('parity');
  if ((flags & BREAK_ERROR) !== 0) errors.push('break');
  return { t: toSeconds(capture.timeBase, characters.startTicks[i]), value: characters.values[i], errors };
}

function toPacket(decoded: Decoded, p: number): DecodeResult['packets'][number] {
  const { packets, characters, capture } = decoded;
  const first = packets.firstCharacter[p];
  const last = first + packets.characterCount[p] - 1;
  const dx = packets.dx[p];
  const dy = packets.dy[p];
  const packet: DecodeResult['packets'][number] = {
    t: toSeconds(capture.timeBase, characters.startTicks[first]),
    tEnd: toSeconds(capture.timeBase, characters.endTicks[last]),
    dx,
    dy,
    wheel: packets.hasWheel ? packets.wheel[p] : null,
    buttons: BUTTON_NAMES.filter((_, bit) => ((packets.buttons[p] >> bit) & 1) === 1),
  };
  if (packets.firstStepDx === undefined || packets.firstStepDy === undefined) return packet;
  const firstStep = { dx: packets.firstStepDx[p], dy: packets.firstStepDy[p] };
  return { ...packet, steps: [firstStep, { dx: dx - firstStep.dx, dy: dy - firstStep.dy }] };
}

function toReset(decoded: Decoded, reset: Reset): DecodeResult['resets'][number] {
  const base = decoded.capture.timeBase;
  return {
    t: toSeconds(base, reset.onTicks),
    offS: toSeconds(base, reset.offTicks),
    replyT: reset.replyTicks === null ? null : toSeconds(base, reset.replyTicks),
    latencyS: reset.replyTicks === null ? null : toDuration(base, reset.replyTicks - reset.onTicks),
    identity: reset.identity,
    pnp: toPnp(reset),
    powerUp: reset.isPowerUp,
  };
}

function toPnp({ pnp }: Reset): DecodeResult['resets'][number]['pnp'] {
  if (pnp === null) return null;
  return {
    raw: pnp.raw.map((byte) => byte.toString(16).toUpperCase().padStart(2, '0')).join(' '),
    form: pnp.form,
    complete: pnp.isComplete,
    revision: pnp.revision === null ? null : (pnp.revision / 100).toFixed(2),
    eisaId: pnp.eisaId?.text ?? null,
    productId: pnp.productId?.text ?? null,
    serialNumber: pnp.serialNumber?.text ?? null,
    className: pnp.className?.text ?? null,
    driverId: pnp.driverId?.text ?? null,
    userName: pnp.userName?.text ?? null,
    checksumSent: pnp.checksumSent,
    checksumComputed: pnp.checksumComputed,
    deviations: pnp.deviations.map((deviation) => ({ ...deviation })),
  };
}
