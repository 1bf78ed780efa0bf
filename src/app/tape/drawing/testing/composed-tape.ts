import { CaptureReader } from '#shared/capture/read-capture';
import { compose } from '#shared/composer/compose';
import type { Script, Step } from '#shared/composer/script';
import { writeVcd } from '#shared/composer/write-vcd';
import type { FindingView } from '#shared/contract/http/checks';
import { decodeTape, encodeTape } from '#shared/contract/tape-payload';
import type { Tape } from '#shared/contract/tape-payload';
import { decode } from '#shared/decode/decode';
import { BASELINE } from '#shared/rules/baseline';
import { check } from '#shared/rules/check';
import type { Palette } from '../palette';
import { PALETTE_PROPERTIES } from '../palette';
import { buildTapeModel } from '../tape-model';
import type { TapeLimits, TapeModel } from '../tape-model';
import { ticksAtSeconds } from '../time-scale';
import type { TapeView } from '../view';

export const LIMITS: TapeLimits = { replyLimitS: 0.014, lineUseLimit: 85, distortionLimit: 5 };

/** A tape with its findings, as the server hands them over. */
export function composeTape(script: Script): { tape: Tape; findings: FindingView[] } {
  const file = new TextEncoder().encode([...writeVcd(compose(script))].join(''));
  const reader = new CaptureReader();
  reader.push(file);
  const decoded = decode(reader.finish());
  const tape = decodeTape(encodeTape(decoded).buffer as ArrayBuffer);
  const findings = check(decoded, BASELINE).findings.map((finding) => ({
    ...finding,
    startS: tape.originS + finding.startTicks * tape.tickS,
    endS: tape.originS + finding.endTicks * tape.tickS,
  }));
  return { tape, findings };
}

export function composeModel(script: Script, limits: TapeLimits = LIMITS): TapeModel {
  const { tape, findings } = composeTape(script);
  return buildTapeModel(tape, findings, limits);
}

const wait = (ms: number): Step => ({ do: 'wait', ms });

/** A trackball whose reply to the warm reset is 1.62 ms too late; then it moves with the left button held. */
export const LATE_REPLY: Script = {
  name: 'late reply',
  protocol: 'M3',
  framing: '7N1',
  steps: [
    wait(150),
    { do: 'reset', widthMs: 104.2, latencyMs: 13.1 },
    wait(60),
    { do: 'move', dx: 9, dy: -4 },
    wait(60),
    { do: 'reset', widthMs: 104.2, latencyMs: 15.62 },
    wait(10),
    { do: 'press', button: 'left' },
    { do: 'draw', figure: 'circle', size: 300, packets: 40 },
    { do: 'release', button: 'left' },
    wait(40),
  ],
};

/** A device that answers no reset. */
export const SILENT: Script = {
  name: 'silent',
  protocol: 'M',
  steps: [wait(100), { do: 'reset', widthMs: 104.2, latencyMs: null }, wait(500)],
};

/** A wheel device with one packet whose second character is lost. */
export const WHEEL: Script = {
  name: 'wheel',
  protocol: 'MZ',
  steps: [
    wait(100),
    { do: 'reset', widthMs: 104.2, latencyMs: 11 },
    wait(30),
    { do: 'move', dx: 0, dy: 0, wheel: 3 },
    wait(30),
    { do: 'move', dx: 5, dy: 5, wheel: -2 },
    wait(30),
    { do: 'move', dx: 5, dy: 5, fault: { kind: 'lost', character: 1 } },
    { do: 'move', dx: 6, dy: 2 },
    wait(30),
    { do: 'press', button: 'fourth' },
    wait(30),
    { do: 'release', button: 'fourth' },
    wait(100),
  ],
};

/** A view of [fromS, toS] of the file's clock on a canvas of 1044 by 462 with a gutter of 96. */
export function viewOf(model: TapeModel, fromS: number, toS: number, more: Partial<TapeView> = {}): TapeView {
  return {
    window: {
      startTicks: ticksAtSeconds(model.tape, fromS),
      endTicks: ticksAtSeconds(model.tape, toS),
    },
    widthPx: 1044,
    heightPx: 464,
    gutterPx: 96,
    isPhone: false,
    selection: null,
    dividers: { a: null, b: null },
    hover: null,
    hiddenLanes: [],
    ...more,
  };
}

/** A palette whose colours are their own names, so that a test reads what was meant. */
export const NAMED_PALETTE: Palette = Object.fromEntries(
  Object.keys(PALETTE_PROPERTIES).map((key) => [key, key]),
) as unknown as Palette;
