import type { Protocol } from './packet-table';

/** Characters in the shortest and the longest packet of a protocol. Source: protocol-facts 5. */
export function characterRange(protocol: Protocol): { readonly shortest: number; readonly longest: number } {
  switch (protocol) {
    case 'M':
    case 'M-null':
    case 'three-byte':
    case 'MM':
      return { shortest: 3, longest: 3 };
    case 'M3':
      return { shortest: 3, longest: 4 };
    case 'MZ':
      return { shortest: 4, longest: 4 };
    case 'five-byte':
      return { shortest: 5, longest: 5 };
  }
}

/** The protocols of the M family: seven data bits, identification by `M`. */
export function isMFamily(protocol: Protocol): boolean {
  return protocol === 'M' || protocol === 'M3' || protocol === 'MZ' || protocol === 'M-null';
}
