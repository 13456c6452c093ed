import { gammaln } from 'simple-statistics';

const SUMMED = 4_096;

let table: Float64Array | undefined;

/**
 * ln(n!) for a whole number n >= 0: summed logarithms up to 4,095, beyond them the log gamma function.
 */
export function logFactorial(n: number): number {
  table ??= summed();
  return n < SUMMED ? table[n]! : gammaln(n + 1);
}

function summed(): Float64Array {
  const sums = new Float64Array(SUMMED);
  for (let n = 2; n < SUMMED; n++) sums[n] = sums[n - 1]! + Math.log(n);
  return sums;
}
