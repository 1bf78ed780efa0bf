/** 412 → `LW-0412`. */
export function numberOf(id: number): string {
  return `LW-${String(id).padStart(4, '0')}`;
}

/** `LW-0412` → 412. */
export function idOf(number: string): number {
  return Number(number.slice(3));
}
