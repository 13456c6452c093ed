import binomialCdf from '@stdlib/stats-base-dists-binomial-cdf';

/** Chance that a normal value lies more than three sigma above its mean. */
export const THREE_SIGMA_TAIL = 0.0013498980316300933;

export interface ExactLimits {
  /** fewest lost that are not flagged; 0 when no count is too few */
  readonly lowest: number;
  /** most lost that are not flagged; `accounts` when no count is too many */
  readonly highest: number;
}

/**
 * Probability limits of a count of lost accounts, counted out from the binomial instead of taken from its sigma.
 * @param accounts  whole number >= 1
 * @param rate      0 <= rate <= 1
 * @param tail      largest chance of a count below `lowest`, and of one above `highest`, with nothing changed
 * @returns         the narrowest such pair: one count further in would have a chance above `tail`
 * Method: where few losses are to be expected, three-sigma limits cut off far more than the normal tail above and nothing below; these never
 * cut off more than `tail` on either side. Neither limit falls when accounts or the rate grow.
 * Example: 50 accounts at 347/1500 are flagged below 4 and above 21 lost; three sigma flag them below 3 and above 20.
 */
export function exactLimits(accounts: number, rate: number, tail = THREE_SIGMA_TAIL): ExactLimits {
  return {
    lowest: fewest(accounts, rate, tail),
    // As many lost as that is as few kept as that.
    highest: accounts - fewest(accounts, 1 - rate, tail),
  };
}

/** The largest k with P(X < k) <= tail: from a guess that takes the skewness into account, a step or two at a time. */
function fewest(accounts: number, rate: number, tail: number): number {
  if (rate <= 0) return 0;
  if (rate >= 1) return accounts;
  const holds = (k: number): boolean => k <= 0 || (k <= accounts && binomialCdf(k - 1, accounts, rate) <= tail);
  // Cornish and Fisher's first term at three sigma: (3^2 - 1) / 6 of the skewness.
  const guess = accounts * rate - 3 * Math.sqrt(accounts * rate * (1 - rate)) + (4 / 3) * (1 - 2 * rate);
  let k = Math.max(0, Math.round(guess));
  while (!holds(k)) k--;
  while (holds(k + 1)) k++;
  return k;
}
