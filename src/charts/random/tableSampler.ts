import type { CountChances } from './countChances.ts';
import type { Uniform } from './uniform.ts';

/** Turns uniform numbers into counts of one distribution. */
export interface CountSampler {
  /** the count at which the cumulative chance first reaches u */
  quantile(u: number): number;
  draw(uniform: Uniform): number;
}

/** Counts less likely than this are never drawn: far below anything a simulation of ten thousand histories can see. */
export const NEVER_DRAWN = 1e-13;
const GUIDE_CELLS = 512;

/**
 * Inverse-transform sampler for a table of chances.
 * Source: Devroye 1986, Non-Uniform Random Variate Generation, section III.2.4, method of guide tables (section from memory).
 */
export function tableSampler({ first, chances }: CountChances): CountSampler {
  const cumulative = new Float64Array(chances.length);
  let sum = 0;
  chances.forEach((chance, i) => {
    sum += chance;
    cumulative[i] = sum;
  });
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
