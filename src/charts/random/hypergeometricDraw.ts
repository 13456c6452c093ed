import { logFactorial } from '../logFactorial.ts';
import type { Uniform } from './uniform.ts';

/**
 * One draw of how many marked accounts are among those taken, without putting back.
 * @param all     accounts altogether
 * @param marked  how many of them are marked, 0 <= marked <= all
 * @param taken   how many are taken, 0 <= taken <= all
 * Method: inverse transform outwards from the most likely count, so that a draw costs about as many steps as the standard deviation.
 */
export function hypergeometricDraw(all: number, marked: number, taken: number, uniform: Uniform): number {
  const lowest = Math.max(0, marked + taken - all);
  const highest = Math.min(marked, taken);
  if (lowest === highest) return lowest;
  const mode = Math.min(highest, Math.max(lowest, Math.floor(((marked + 1) * (taken + 1)) / (all + 2))));
  const atMode = Math.exp(logChoose(marked, mode) + logChoose(all - marked, taken - mode) - logChoose(all, taken));
  let left = uniform() - atMode;
  let [down, up] = [mode, mode];
  let [massDown, massUp] = [atMode, atMode];
  while (left > 0 && (down > lowest || up < highest)) {
    if (down > lowest) {
      massDown *= (down * (all - marked - taken + down)) / ((marked - down + 1) * (taken - down + 1));
      down--;
      left -= massDown;
      if (left <= 0) return down;
    }
    if (up < highest) {
      massUp *= ((marked - up) * (taken - up)) / ((up + 1) * (all - marked - taken + up + 1));
      up++;
      left -= massUp;
      if (left <= 0) return up;
    }
    // What rounding leaves over belongs to no count in particular.
    if (massDown + massUp < 1e-18) return mode;
  }
  return mode;
}

function logChoose(n: number, k: number): number {
  return logFactorial(n) - logFactorial(k) - logFactorial(n - k);
}
