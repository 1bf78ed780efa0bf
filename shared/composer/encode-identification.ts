import type { PnpScript } from './script';

/** The bytes of an identity and its PnP string. Source: Plug and Play External COM Device Specification 1.00, 3.1. */
export function encodePnp(pnp: PnpScript): number[] {
  const form = pnp.form ?? 6;
  const shift = form === 6 ? 0x20 : 0;
  const revision = pnp.revision ?? 100;
  const text = (value: string): number[] => Array.from(value, (c) => (c.charCodeAt(0) - shift) & 0x7f);
  const optional = [pnp.serialNumber, pnp.className, pnp.driverId, pnp.userName];
  while (optional.length > 0 && optional[optional.length - 1] === undefined) optional.pop();
  const body = [
    form === 6 ? 0x08 : 0x28,
    ...(pnp.revisionBytes ?? [(revision >> 6) & 0x3f, revision & 0x3f]),
    ...text(pnp.eisaId),
    ...text(pnp.productId),
    ...optional.flatMap((field) => [...text('\\'), ...text(field ?? '')]),
  ];
  const end = pnp.end ?? (form === 6 ? 0x09 : 0x29);
  if (optional.length === 0) return [...body, end];
  const sum = [...body, end].reduce((a, b) => a + b, 0) & 0xff;
  const checksum = pnp.checksum ?? sum.toString(16).toUpperCase().padStart(2, '0');
  return [...body, ...text(checksum), end];
}
