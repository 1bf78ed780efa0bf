import type { LineRole } from '#shared/line/line-map';

/** The parts a channel can play, as they are named on screen. In the order of the library's `LINE_ROLES`. */
export const ROLE_NAMES: Readonly<Record<LineRole, string>> = {
  data: 'Data',
  rts: 'RTS',
  dtr: 'DTR',
  txd: 'TXD, host to device',
  dsr: 'DSR',
  supply: 'Supply rail',
  contact: 'Button contact',
  ready: 'Device ready',
};

export const ROLES = Object.keys(ROLE_NAMES) as readonly LineRole[];
