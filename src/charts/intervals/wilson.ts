import type { Interval } from '../types.ts';

/** 97.5 % point of the standard normal distribution: two-sided 95 %. */
export const Z_95 = 1.959963984540054;

/**
 * Wilson score interval for one proportion, without continuity correction.
 * @param lost      successes, 0 <= lost <= accounts
 * @param accounts  trials, >= 1
 * @param z         normal quantile of the confidence wanted; 95 % by default
 * Source: Newcombe RG, Statistics in Medicine 17:857-872, 1998, method 3. Example: 81 of 263 gives 0.2553 to 0.3662.
 */
export function wilsonInterval(lost: number, accounts: number, z = Z_95): Interval {
  const p = lost / accounts;
  const middle = 2 * lost + z * z;
  const spread = z * Math.sqrt(z * z + 4 * lost * (1 - p));
  const scale = 2 * (accounts + z * z);
  return {
    estimate: p,
    low: lost === 0 ? 0 : (middle - spread) / scale,
    high: lost === accounts ? 1 : (middle + spread) / scale,
  };
}
