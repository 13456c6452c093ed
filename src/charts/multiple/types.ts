/*
 * Many tests at once.
 *
 * family          the tests looked at together
 * adjusted p      the smallest level at which a procedure would reject this test, given its whole family; compare it with the level wanted
 * step-up         starts at the largest p value, and rejects it and all smaller ones once one is small enough (Hochberg, Benjamini-Hochberg)
 * step-down       starts at the smallest p value and stops at the first that is not small enough (Holm)
 */

/** Both arrays in the order of the p values handed in. */
export interface Adjusted {
  /** adjusted p values, in [0, 1] */
  readonly adjusted: readonly number[];
  /** adjusted <= level */
  readonly rejected: readonly boolean[];
}

/** Positions of the values from the smallest to the largest; equal values keep their order. */
export function ascending(values: readonly number[]): number[] {
  return values.map((_, i) => i).sort((a, b) => values[a]! - values[b]! || a - b);
}

export function decided(adjusted: readonly number[], level: number): Adjusted {
  return { adjusted, rejected: adjusted.map((p) => p <= level) };
}
