import { BUTTON_NAMES } from '#shared/packets/packet-table';
import { formatFigure, formatSigned, hexByte } from '../drawing/figures';
import type { TapeModel } from '../drawing/tape-model';
import { errorNames } from '../tables/character-table';
import { ms, positionOf } from '../tables/positions';

export interface Facts {
  readonly title: string;
  /** The figure written large, with its unit. */
  readonly figure: string;
  readonly unit: string;
  readonly rows: readonly (readonly [name: string, value: string])[];
  readonly startTicks: number;
  readonly endTicks: number;
}

export function packetFacts(model: TapeModel, index: number): Facts {
  const { packets, characters } = model.tape;
  const first = packets.firstCharacter[index];
  const values = Array.from(
    characters.values.subarray(first, first + packets.characterCount[index]),
    hexByte,
  );
  const startTicks = model.packetStarts[index];
  const endTicks = model.packetEnds[index];
  const held = BUTTON_NAMES.filter((_, bit) => (packets.buttons[index] >> bit) & 1);
  const steps =
    packets.firstStepDx === undefined || packets.firstStepDy === undefined
      ? []
      : [
          [
            'First half',
            `${formatSigned(packets.firstStepDx[index])}, ${formatSigned(packets.firstStepDy[index])}`,
          ] as const,
          [
            'Second half',
            `${formatSigned(packets.dx[index] - packets.firstStepDx[index])}, ${formatSigned(packets.dy[index] - packets.firstStepDy[index])}`,
          ] as const,
        ];
  return {
    title: `Packet ${index}`,
    figure: `${formatSigned(packets.dx[index])}, ${formatSigned(packets.dy[index])}`,
    unit: 'counts right, down',
    rows: [
      ['Starts', `${positionOf(model, startTicks)} s`],
      ['Lasts', `${ms(model, endTicks - startTicks)} ms`],
      ...(index > 0
        ? [['After the last', `${ms(model, startTicks - model.packetStarts[index - 1])} ms`] as const]
        : []),
      ['Characters', values.join(' ')],
      ...steps,
      ...(packets.hasWheel ? [['Wheel', formatSigned(packets.wheel[index])] as const] : []),
      ['Held', held.length === 0 ? 'no button' : held.join(', ')],
    ],
    startTicks,
    endTicks,
  };
}

export function characterFacts(model: TapeModel, index: number): Facts {
  const { characters, framing, packetOfCharacter, resetOfCharacter } = model.tape;
  const value = characters.values[index];
  const startTicks = characters.startTicks[index];
  const endTicks = characters.endTicks[index];
  const bits = [...value.toString(2).padStart(framing?.dataBits ?? 7, '0')].reverse();
  const packet = packetOfCharacter[index];
  const errors = errorNames(characters.errors[index]);
  return {
    title: `Character ${index}`,
    figure: hexByte(value),
    unit: value > 32 && value < 127 ? `“${String.fromCharCode(value)}”` : '',
    rows: [
      ['Starts', `${positionOf(model, startTicks)} s`],
      ['Lasts', `${ms(model, endTicks - startTicks)} ms`],
      ['Bits, first sent first', bits.join(' ')],
      [
        'Belongs to',
        packet >= 0 ? `packet ${packet}` : resetOfCharacter[index] >= 0 ? 'an identification' : 'nothing',
      ],
      ['Errors', errors.length === 0 ? 'none' : errors.join(', ')],
    ],
    startTicks,
    endTicks,
  };
}

export function resetFacts(model: TapeModel, index: number): Facts {
  const reset = model.tape.resets[index];
  const { tickS } = model.tape;
  const { replyTicks, onTicks, offTicks } = reset;
  return {
    title: `Reset ${index + 1} of ${model.tape.resets.length}`,
    figure: replyTicks === null ? 'no reply' : formatFigure((replyTicks - onTicks) * tickS * 1e3, 2),
    unit: replyTicks === null ? '' : 'ms to the reply',
    rows: [
      ['RTS goes ON', `${positionOf(model, onTicks)} s`],
      ['OFF before', `${reset.isPulseStartSeen ? '' : 'at least '}${ms(model, onTicks - offTicks)} ms`],
      [
        'Kind',
        reset.isPowerUp === null
          ? 'not known: DTR is not recorded'
          : reset.isPowerUp
            ? 'power-up'
            : 'warm reset',
      ],
      ['Answers as', reset.identity ?? 'nothing known'],
      ['Characters', String(reset.identification.length)],
      ...(reset.isWindowCut ? [['Reply window', 'cut off by the end of the record'] as const] : []),
    ],
    startTicks: offTicks,
    endTicks: reset.identificationEndTicks ?? replyTicks ?? reset.windowEndTicks,
  };
}

/** Fields of the PnP string; null where the reply has none. */
export function pnpFacts(model: TapeModel, index: number): Facts['rows'] | null {
  const pnp = model.tape.resets[index].pnp;
  if (pnp === null) return null;
  const text = (field: { readonly text: string } | null): string => field?.text ?? 'not sent';
  return [
    ['Form', `${pnp.form} data bits${pnp.isComplete ? '' : ', broken off'}`],
    ['Revision', pnp.revision === null ? 'not sent' : (pnp.revision / 100).toFixed(2)],
    ['Maker', text(pnp.eisaId)],
    ['Product', text(pnp.productId)],
    ['Serial number', text(pnp.serialNumber)],
    ['Class', text(pnp.className)],
    ['Compatible ids', text(pnp.driverId)],
    ['Name', text(pnp.userName)],
    ['Checksum sent', pnp.checksumSent ?? 'not sent'],
    ['Checksum due', pnp.checksumComputed ?? 'cannot be said'],
    ...pnp.deviations.map(({ rule, message }) => [rule, message] as const),
  ];
}
