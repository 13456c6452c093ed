import { betaBinomialSampler } from '../random/betaBinomialSampler.ts';
import { chartRunLength, isExact, type RunDesign } from './chartRunLength.ts';
import type { RunLength } from './types.ts';

/** Levels that the baseline may as well have given, equally likely ones; fewer where each must be simulated. */
const EXACT_NODES = 31;
const SIMULATED_NODES = 15;
/** Points simulated for each of them, where the chain does not answer. */
const NODE_BUDGET = 8_000;

/** What estimating the usual level from so few points does to the run length with nothing changed. */
export interface EstimatedRunLength {
  readonly method: 'exact' | 'simulated';
  /** average run length over all the levels that might have been estimated; null when some of them never flag */
  readonly mean: number | null;
  /** in 8 of 10 such charts the average run length lies between these two */
  readonly low: number;
  readonly high: number | null;
  /** chance of a false flag within the first m points after the baseline */
  readonly within: (m: number) => number;
}

/**
 * Run length with nothing changed when the centre line is not known but estimated, as it always is.
 * @param rate              the true rate, strictly between 0 and 1
 * @param baselineAccounts  accounts in the points that set the level
 * @returns null when every level that might be estimated is 0 or 1, or none of them ever flags
 * Method: the pooled baseline count is binomial (for a p' chart beta-binomial with the variance of the pooled points); its distribution is
 * stood for by 31 (simulated: 15) equally likely quantiles, and the chart with each as its centre line has its run length found at the true rate: exactly
 * where the chain answers, else simulated with common random numbers. sigmaZ of a p' chart is taken as known.
 * Background: limits from few points give run lengths that differ from chart to chart; Chakraborti S, Human SW, Parameter estimation and
 * performance of the p-chart for attributes data, IEEE Transactions on Reliability 55(3):559-566, 2006 (reference from memory).
 */
export function estimatedRunLength(
  design: Omit<RunDesign, 'center'>,
  rate: number,
  baselineAccounts: number,
): EstimatedRunLength | null {
  const { sizes, correlation } = design;
  const size = sizes.reduce((sum, n) => sum + n, 0) / sizes.length;
  const pooled = baselineAccounts > 1 ? Math.max(0, (correlation * (size - 1)) / (baselineAccounts - 1)) : 0;
  const level = betaBinomialSampler(baselineAccounts, rate, pooled);
  const known = new Map<number, ReturnType<typeof chartRunLength>>();
  const found = [];
  const nodes = isExact(design) ? EXACT_NODES : SIMULATED_NODES;
  for (let node = 0; node < nodes; node++) {
    const lost = level.quantile((node + 0.5) / nodes);
    if (lost === 0 || lost === baselineAccounts) continue;
    let length = known.get(lost);
    if (!length) {
      length = chartRunLength({ ...design, center: lost / baselineAccounts }, rate, { pointBudget: NODE_BUDGET });
      known.set(lost, length);
    }
    found.push(length);
  }
  const lengths = found.map(({ length }) => length);
  const means = lengths.map((length) => length?.mean ?? Number.POSITIVE_INFINITY).sort((a, b) => a - b);
  const at = (share: number): number => means[Math.min(means.length - 1, Math.floor(share * means.length))]!;
  if (means.length === 0 || at(0.1) === Number.POSITIVE_INFINITY) return null;
  const finite = (value: number): number | null => (value === Number.POSITIVE_INFINITY ? null : value);
  const average = (of: (length: RunLength | null) => number): number =>
    lengths.reduce((sum, length) => sum + of(length), 0) / lengths.length;
  return {
    method: found[0]!.method,
    mean: finite(means.reduce((sum, mean) => sum + mean, 0) / means.length),
    low: at(0.1),
    high: finite(at(0.9)),
    within: (m) => average((length) => length?.within(m) ?? 0),
  };
}
