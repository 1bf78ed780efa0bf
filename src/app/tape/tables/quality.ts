import { BUTTON_NAMES } from '#shared/packets/packet-table';
import { formatInterval } from '../../ui/format-interval';
import type { TapeModel } from '../drawing/tape-model';

/** One thing a capture should hold, whether this one does, and what would do. Source of the figures: rules.md, section 11. */
export interface QualityLine {
  readonly isMet: boolean;
  readonly has: string;
  readonly wants: string;
}

const FINE_S = 4e-6;
const COARSE_S = 100e-6;
const BEFORE_RESET_S = 1;
const MOTION_S = 30;
const REST_S = 60;
/** Resets for HSK-4, for its 95/95 statement, and for HSK-10. */
const RESETS = { least: 20, index: 25, sure: 59 } as const;

/** What this capture can and cannot show. */
export function qualityOf(model: TapeModel): readonly QualityLine[] {
  return [
    sampling(model),
    ...controlLines(model),
    beforeReset(model),
    resets(model),
    motion(model),
    rest(model),
    buttons(model),
    ...wheel(model),
  ];
}

function sampling({ tape }: TapeModel): QualityLine {
  const seconds = tape.resolutionTicks * tape.tickS;
  const has = `Times to ${formatInterval(seconds)}`;
  if (seconds <= FINE_S) return { isMet: true, has, wants: 'enough for distortion to 0.5 % of a bit' };
  if (seconds <= COARSE_S)
    return { isMet: false, has, wants: 'enough for handshakes; 4 µs or finer shows distortion to 0.5 %' };
  return { isMet: false, has, wants: '100 µs or finer shows handshakes, 4 µs distortion' };
}

function controlLines({ lines }: TapeModel): QualityLine[] {
  return (['rts', 'dtr'] as const).map((role) => {
    const name = role.toUpperCase();
    return lines[role] === undefined
      ? { isMet: false, has: `${name} is not recorded`, wants: `record ${name} too: resets are judged by it` }
      : { isMet: true, has: `${name} is recorded`, wants: '' };
  });
}

function beforeReset({ tape }: TapeModel): QualityLine {
  const first = tape.resets[0];
  if (first === undefined)
    return { isMet: false, has: 'No reset', wants: 'record RTS going from OFF to ON at least once' };
  const seconds = first.onTicks * tape.tickS;
  return seconds >= BEFORE_RESET_S
    ? { isMet: true, has: `${seconds.toFixed(1)} s before the first reset`, wants: '' }
    : {
        isMet: false,
        has: `${seconds.toFixed(2)} s before the first reset`,
        wants: 'start recording 1 s before it, so that power-up is seen',
      };
}

function resets({ tape }: TapeModel): QualityLine {
  const count = tape.resets.length;
  const has = `${count} ${count === 1 ? 'reset' : 'resets'}`;
  if (count >= RESETS.sure) return { isMet: true, has, wants: '' };
  if (count >= RESETS.least)
    return {
      isMet: count >= RESETS.index,
      has,
      wants: `${RESETS.index} show the spread of latency, ${RESETS.sure} give 95 % sure of 95 %`,
    };
  return { isMet: false, has, wants: `${RESETS.least} show whether every reset is answered` };
}

function motion({ runs, tape }: TapeModel): QualityLine {
  const seconds = runs.reduce((sum, run) => sum + (run.endTicks - run.startTicks), 0) * tape.tickS;
  const has = `${seconds.toFixed(1)} s of motion`;
  return {
    isMet: seconds >= MOTION_S,
    has,
    wants: seconds >= MOTION_S ? '' : 'record 30 s in all directions',
  };
}

function rest({ packetStarts, packetEnds, tape }: TapeModel): QualityLine {
  let longest = packetStarts.length === 0 ? tape.endTicks : packetStarts[0];
  for (let p = 0; p < packetStarts.length; p++) {
    const next = p + 1 < packetStarts.length ? packetStarts[p + 1] : tape.endTicks;
    longest = Math.max(longest, next - packetEnds[p]);
  }
  const seconds = longest * tape.tickS;
  const has = `${seconds.toFixed(1)} s the longest rest`;
  return { isMet: seconds >= REST_S, has, wants: seconds >= REST_S ? '' : 'leave it at rest for 60 s' };
}

function buttons({ tape }: TapeModel): QualityLine {
  let pressed = 0;
  for (const held of tape.packets.buttons) pressed |= held;
  const names = BUTTON_NAMES.filter((_, bit) => (pressed >> bit) & 1);
  return names.length >= 2
    ? { isMet: true, has: `Pressed: ${names.join(', ')}`, wants: '' }
    : {
        isMet: false,
        has: names.length === 0 ? 'No button is pressed' : `Pressed: ${names.join(', ')} only`,
        wants: 'press each button alone and while moving',
      };
}

function wheel({ tape }: TapeModel): QualityLine[] {
  if (!tape.packets.hasWheel) return [];
  const turns = tape.packets.wheel.reduce((count, step) => count + Number(step !== 0), 0);
  return turns > 0
    ? [{ isMet: true, has: `The wheel turns in ${turns} packets`, wants: '' }]
    : [{ isMet: false, has: 'The wheel never turns', wants: 'turn it slowly and fast' }];
}
