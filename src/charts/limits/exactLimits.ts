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

/** The largest k with P(X < k) <= tail. */
function fewest(accounts: number, rate: number, tail: number): number {
  if (rate <= 0) return 0;
  if (rate >= 1) return accounts;
  let [holds, fails] = [0, accounts + 1];
  // The mean less twelve sigma and thirteen holds for sure, and one count above the mean fails.
  const mean = accounts * rate;
  const guess = Math.floor(mean - 12 * Math.sqrt(mean) - 13);
  if (guess > 0) holds = guess;
  fails = Math.min(fails, Math.ceil(mean) + 2);
  while (fails - holds > 1) {
    const middle = Math.floor((holds + fails) / 2);
    if (binomialCdf(middle - 1, accounts, rate) <= tail) holds = middle;
    else fails = middle;
  }
  return holds;
}
