const UNITS = [
  [1, 's'],
  [1e-3, 'ms'],
  [1e-6, 'µs'],
  [1e-9, 'ns'],
] as const;

/** A duration in the unit that suits it, at most four digits: 20 µs, 1.25 ms. */
export function formatInterval(seconds: number): string {
  if (seconds === 0) return '0 s';
  const [factor, unit] = UNITS.find(([least]) => Math.abs(seconds) >= least * 0.9995) ?? UNITS[3];
  return `${Number((seconds / factor).toPrecision(4))} ${unit}`.replace('-', '−');
}
