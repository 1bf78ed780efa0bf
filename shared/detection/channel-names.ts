import type { LineRole } from '../line/line-map';

/** Names people give to lines, by role, in English and German. Source: circuit names of V.24 and TIA-232-F, from memory; common practice. */
const WORDS: Record<LineRole, readonly string[]> = {
  data: ['rxd', 'rx', 'rd', 'data', 'daten', 'dat', 'sin', 'din', 'rxdata', 'sdata'],
  rts: ['rts'],
  dtr: ['dtr'],
  txd: ['txd', 'tx', 'td', 'sout', 'dout', 'txdata'],
  dsr: ['dsr'],
  supply: ['supply', 'vcc', 'vdd', 'vbus', 'rail'],
  contact: ['contact'],
  ready: ['ready', 'rdy'],
};

/** The role a channel's name suggests, by its last part, or undefined. */
export function roleOfName(name: string): LineRole | undefined {
  const words = wordsOf(name);
  for (const role of Object.keys(WORDS) as LineRole[]) {
    if (words.some((word) => WORDS[role].includes(word))) return role;
  }
  return undefined;
}

/** The name says that the signal is active low: `RTS_N`, `nRTS`, `rts#`, `/RTS`. Such control lines show the logic side. */
export function isNamedActiveLow(name: string): boolean {
  const leaf = leafOf(name).trim().toLowerCase();
  return (
    /(#|_n|_b|_bar|\bn)$/.test(leaf) || /^[/!~]/.test(leaf) || /^n_?(rts|dtr|dsr|cts|rxd|txd)\b/.test(leaf)
  );
}

/** Scope path in front of the last part; empty without one. */
export function scopeOf(name: string): string {
  const dot = name.lastIndexOf('.');
  return dot < 0 ? '' : name.slice(0, dot);
}

function leafOf(name: string): string {
  const dot = name.lastIndexOf('.');
  // A dot inside a CSV header ("RTS (0.1 V)") does not part a path.
  return dot < 0 || /[\s()[\]]/.test(name) ? name : name.slice(dot + 1);
}

function wordsOf(name: string): string[] {
  const leaf = leafOf(name).replace(/[([].*?[)\]]/g, ' ');
  const parts = leaf
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .toLowerCase()
    .split(/[^a-z0-9]+/);
  return parts.flatMap((part) => {
    const word = part.replace(/\d+$/, '');
    return word.startsWith('n') && word.length === 4 ? [word, word.slice(1)] : [word];
  });
}
