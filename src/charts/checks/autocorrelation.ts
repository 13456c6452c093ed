export interface Autocorrelation {
  /** lag-1 autocorrelation of the values */
  readonly r1: number;
  /** approximate 95 % limit of |r1| when neighbours are unrelated: 1.96 / sqrt(n) */
  readonly limit: number;
}

/**
 * Lag-1 autocorrelation: do neighbouring points go together?
 * @returns null for fewer than 3 values or values that are all equal
 * Example: the 30 wafer proportions of the NIST/SEMATECH e-Handbook section 6.3.3.2 have r1 = 0.205143 (recomputed).
 */
export function autocorrelation(values: readonly number[]): Autocorrelation | null {
  const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
  const total = values.reduce((sum, x) => sum + (x - mean) ** 2, 0);
  if (values.length < 3 || total === 0) return null;
  let products = 0;
  for (let i = 0; i + 1 < values.length; i++) products += (values[i]! - mean) * (values[i + 1]! - mean);
  return { r1: products / total, limit: 1.96 / Math.sqrt(values.length) };
}
