/** Chances of the neighbouring counts first, first + 1, …; they sum to 1. Counts left out are less likely than anybody can notice. */
export interface CountChances {
  readonly first: number;
  readonly chances: Float64Array;
}

/**
 * A distribution on 0..size, from its chance at one count and the ratios of neighbouring chances.
 * @param mode        a count near the highest chance, from which the table is built both ways
 * @param atMode      chance of that count, up to a constant factor
 * @param ratio       chance of k + 1 over chance of k, for 0 <= k < size
 * @param negligible  tails end where a chance, as a share of the one at the mode, falls below this
 */
export function countChances(
  size: number,
  mode: number,
  atMode: number,
  ratio: (k: number) => number,
  negligible: number,
): CountChances {
  const below: number[] = [];
  for (let k = mode - 1, mass = atMode; k >= 0; k--) {
    const step = ratio(k);
    mass /= step;
    if (mass < negligible * atMode && step > 1) break;
    below.push(mass);
  }
  const above: number[] = [];
  for (let k = mode, mass = atMode; k < size; k++) {
    const step = ratio(k);
    mass *= step;
    if (mass < negligible * atMode && step < 1) break;
    above.push(mass);
  }
  const masses = [...below.reverse(), atMode, ...above];
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  return { first: mode - below.length, chances: Float64Array.from(masses, (mass) => mass / total) };
}

/** All chance on one count. */
export function certainCount(count: number): CountChances {
  return { first: count, chances: Float64Array.of(1) };
}
