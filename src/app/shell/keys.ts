/** Keys by where they work, as the Keys sheet shows them. Single letters work only while their region has the focus. */
export interface KeyGroup {
  readonly where: string;
  readonly keys: readonly (readonly [keys: string, does: string])[];
}

export const KEY_GROUPS: readonly KeyGroup[] = [
  {
    where: 'Everywhere',
    keys: [
      ['Ctrl K', 'find a capture, a device or an action'],
      ['/', 'search in this screen'],
      ['?', 'this sheet'],
      ['F6, Shift F6', 'next, previous region'],
      ['Esc', 'close menu, dialog, drawer'],
      ['↑ ↓ Home End', 'rows of a list; Enter opens'],
    ],
  },
  {
    where: 'Captures',
    keys: [
      ['U', 'upload'],
      ['M', 'map the lines of the row'],
      ['Space', 'mark the row for a batch'],
    ],
  },
  {
    where: 'Tape',
    keys: [
      ['← →', 'pan a tenth, with Shift a window'],
      ['+ −', 'zoom at the focus'],
      ['0', 'whole tape'],
      ['H', 'first handshake'],
      ['R', 'all resets stacked'],
      ['E', 'edges at the focus'],
      ['N P', 'next, previous finding'],
      [', .', 'previous, next packet'],
      ['[ ]', 'previous, next character'],
      ['I', 'character under the glass'],
      ['G', 'find a time, value, rule or movement'],
      ['A B', 'set a divider; then ← → moves it edge to edge, Alt one sample'],
      ['X', 'swap the dividers'],
      ['Ctrl C', 'copy the read-out'],
      ['M T', 'motion sheet, table'],
      ['C', 'copy the link to this view'],
    ],
  },
];
