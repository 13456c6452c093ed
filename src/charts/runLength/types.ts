/**
 * How many points it takes until the first flag, that point counted, on a chart that starts without a past.
 * Figures are null where a flag can never come.
 */
export interface RunLength {
  /** average run length, in points */
  readonly mean: number | null;
  /** standard error of the mean when it was simulated; null when it is exact */
  readonly standardError: number | null;
  /** smallest number of points within which half (10 %, 90 %) of such charts have raised a flag */
  readonly median: number | null;
  readonly p10: number | null;
  readonly p90: number | null;
  /** chance of a flag within the first m points, m >= 0 */
  readonly within: (m: number) => number;
}
