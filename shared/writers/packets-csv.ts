import type { Decoded } from '../decode/decoded';
import { BUTTON_NAMES } from '../packets/packet-table';
import { toSeconds } from '../time/time-base';
import { hexByte } from './plain-text';

const HEADER = 'packet,start_s,end_s,characters,dx,dy,wheel,left,middle,right,fourth';

/** Packets as CSV: comma, CRLF, one record a packet. Source: RFC 4180, section 2. Yields pieces of many records. */
export function* writePacketsCsv(decoded: Decoded): Generator<string> {
  const { packets, characters, capture } = decoded;
  let piece = `${HEADER}\r\n`;
  for (let p = 0; p < packets.count; p++) {
    const first = packets.firstCharacter[p];
    const end = first + packets.characterCount[p];
    const fields = [
      p,
      toSeconds(capture.timeBase, characters.startTicks[first]),
      toSeconds(capture.timeBase, characters.endTicks[end - 1]),
      Array.from(characters.values.subarray(first, end), hexByte).join(' '),
      packets.dx[p],
      packets.dy[p],
      packets.hasWheel ? packets.wheel[p] : '',
      ...BUTTON_NAMES.map((_, bit) => (packets.buttons[p] >> bit) & 1),
    ];
    piece += `${fields.join(',')}\r\n`;
    if (piece.length > 1 << 16) {
      yield piece;
      piece = '';
    }
  }
  yield piece;
}
