/** A few units in the last place: rates that are equal by arithmetic must be equal here, however they were computed. */
const ULPS = 8 * Number.EPSILON;

/** Equal up to the rounding of a few operations. */
export function sameByArithmetic(a: number, b: number): boolean {
  return Math.abs(a - b) <= ULPS * Math.max(Math.abs(a), Math.abs(b));
}

/**
 * Where a value lies, as a signed zone: 0 on the centre line, 1 within 1 sigma (zone C), 2 from 1 to 2 (B), 3 from 2 to 3 (A),
 * 4 beyond 3 sigma; negative below the centre line. "Beyond" is strict, with a tolerance of a few ulps.
 */
export function zoneOf(value: number, center: number, sigma: number): number {
  const tolerance = ULPS * Math.max(Math.abs(value), Math.abs(center));
  const distance = Math.abs(value - center);
  if (distance <= tolerance) return 0;
  const side = value > center ? 1 : -1;
  if (distance > 3 * sigma + tolerance) return side * 4;
  if (distance > 2 * sigma + tolerance) return side * 3;
  if (distance > sigma + tolerance) return side * 2;
  return side;
}

/** Direction of the move from one value to the next: -1, 0 (equal by arithmetic), 1. */
export function moveOf(previous: number, value: number): number {
  const tolerance = ULPS * Math.max(Math.abs(previous), Math.abs(value));
  const difference = value - previous;
  return Math.abs(difference) <= tolerance ? 0 : difference > 0 ? 1 : -1;
}
