import type { Uniform } from './uniform.ts';

/** Turns uniform numbers into counts of one distribution. */
export interface CountSampler {
  /** the count at which the cumulative chance first reaches u */
  quantile(u: number): number;
  draw(uniform: Uniform): number;
}

/** Counts less likely than this are never drawn: far below anything a simulation of ten thousand histories can see. */
const NEGLIGIBLE = 1e-13;
const GUIDE_CELLS = 512;

/**
 * Inverse-transform sampler for a distribution on 0..size, from its chance at one count and the ratios of neighbouring chances.
 * @param mode   a count near the highest chance, from which the table is built both ways
 * @param atMode chance of that count, up to a constant factor
 * @param ratio  chance of k + 1 over chance of k, for 0 <= k < size
 * Source: Devroye 1986, Non-Uniform Random Variate Generation, section III.2.4, method of guide tables (section from memory).
 */
export function tableSampler(size: number, mode: number, atMode: number, ratio: (k: number) => number): CountSampler {
  const below: number[] = [];
  for (let k = mode - 1, mass = atMode; k >= 0; k--) {
    const step = ratio(k);
    mass /= step;
    if (mass < NEGLIGIBLE * atMode && step > 1) break;
    below.push(mass);
  }
  const above: number[] = [];
  for (let k = mode, mass = atMode; k < size; k++) {
    const step = ratio(k);
    mass *= step;
    if (mass < NEGLIGIBLE * atMode && step < 1) break;
    above.push(mass);
  }
  const masses = [...below.reverse(), atMode, ...above];
  const total = masses.reduce((sum, mass) => sum + mass, 0);
  const cumulative = new Float64Array(masses.length);
  let sum = 0;
  masses.forEach((mass, i) => {
    sum += mass / total;
    cumulative[i] = sum;
  });
  return fromTable(mode - below.length, cumulative);
}

/** A distribution with all its chance on one count. */
export function certainSampler(count: number): CountSampler {
  return fromTable(count, Float64Array.of(1));
}

function fromTable(first: number, cumulative: Float64Array): CountSampler {
  const guide = new Int32Array(GUIDE_CELLS);
  let at = 0;
  for (let cell = 0; cell < GUIDE_CELLS; cell++) {
    while (at < cumulative.length - 1 && cumulative[at]! < cell / GUIDE_CELLS) at++;
    guide[cell] = at;
  }
  const last = cumulative.length - 1;
  const quantile = (u: number): number => {
    let i = guide[Math.floor(u * GUIDE_CELLS)]!;
    while (i < last && cumulative[i]! < u) i++;
    return first + i;
  };
  return { quantile, draw: (uniform) => quantile(uniform()) };
}
