/** Log likelihood of one account under the moved rate against the usual one. */
export interface LikelihoodSteps {
  /** what a kept account takes away from a sum that looks for a rise: -ln((1 - p1) / (1 - p0)); negative when p1 < p0 */
  readonly r1: number;
  /** what parts a lost account from a kept one: ln(p1 (1 - p0) / (p0 (1 - p1))); negative when p1 < p0 */
  readonly r2: number;
  /** r1 / r2: the rate between p0 and p1 at which the sum drifts neither way */
  readonly gamma: number;
}

/**
 * The steps of a Bernoulli CUSUM.
 * @param usual  p0, strictly between 0 and 1
 * @param moved  p1, strictly between 0 and 1, not p0
 * Source: Reynolds MR and Stoumbos ZG, Journal of Quality Technology 31(1):87-108, 1999 (formulas read in secondary sources).
 * Example: p0 = 0.01, p1 = 0.02 have gamma = 1 / 69.27.
 */
export function likelihoodSteps(usual: number, moved: number): LikelihoodSteps {
  const r1 = Math.log1p(-usual) - Math.log1p(-moved);
  const r2 = Math.log(moved / usual) + r1;
  return { r1, r2, gamma: r1 / r2 };
}

/** A fraction in lowest terms that stands for gamma, so that a sum only ever takes whole steps. */
export interface Fraction {
  readonly numerator: number;
  readonly denominator: number;
}

/**
 * The fraction with the smallest numerator near enough to a share: 1/m for small shares.
 * Counted from the nearer end, so that 0.93 becomes 13/14 as 0.07 becomes 1/14.
 * @param share   strictly between 0 and 1
 * @param within  how far the fraction may lie from it, > 0
 */
export function nearFraction(share: number, within: number): Fraction {
  const near = Math.min(share, 1 - share);
  let numerator = 1;
  let denominator = Math.max(2, Math.round(1 / near));
  while (Math.abs(numerator / denominator - near) > within) {
    numerator++;
    denominator = Math.round(numerator / near);
  }
  return { numerator: share <= 0.5 ? numerator : denominator - numerator, denominator };
}

/**
 * The moved rate whose gamma is exactly this, on the same side of the usual one: what a sum with rounded steps really looks for.
 * @param gamma  strictly between 0 and 1, not the usual rate itself
 */
export function movedRateFor(usual: number, gamma: number): number {
  // Gamma grows with the moved rate, from the end of the range over p0 to the other end.
  let [low, high] = gamma > usual ? [usual, 1] : [0, usual];
  for (let step = 0; step < 200 && high - low > 1e-16; step++) {
    const middle = (low + high) / 2;
    if (middle <= low || middle >= high) break;
    if (likelihoodSteps(usual, middle).gamma < gamma) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
