import { binomialSampler } from '../random/binomialSampler.ts';
import { seededUniform } from '../random/uniform.ts';

/** Amounts of accounts, in groups of about equal ones: their mean amount, and how many there are. */
export interface AmountGroup {
  readonly amount: number;
  readonly accounts: number;
}

export interface LostRatioModel {
  readonly amounts: readonly AmountGroup[];
  /** accounts in a subgroup */
  readonly size: number;
  /** share of accounts lost, strictly between 0 and 1 */
  readonly rate: number;
}

const RATIOS = 4_000;
/** From this many accounts on, the sum of their amounts is as good as normal. */
const MANY = 400;

/**
 * How the lost share of revenue scatters with nothing changed: with amounts as uneven as these, and losses that do not look at the amount.
 * A few large accounts make it far more lopsided than a normal distribution, and what is calibrated with the wrong shape promises too much.
 * @returns ratios in ascending order, scaled so that their mean is 0 and sigma from moving ranges (2.66 MRbar / 3) is 1; null when the
 *          amounts give no spread
 * Method: seeded simulation; each account of a subgroup is lost with the same chance, amounts are drawn from the groups. Sums over many
 * accounts are drawn from the normal distribution.
 */
export function lostRatioShape({ amounts, size, rate }: LostRatioModel, seed = 16): Float64Array | null {
  const total = amounts.reduce((sum, group) => sum + group.accounts, 0);
  if (total === 0 || !(rate > 0 && rate < 1)) return null;
  const cumulative = new Float64Array(amounts.length);
  let [at, mean, square] = [0, 0, 0];
  amounts.forEach(({ amount, accounts }, i) => {
    at += accounts / total;
    cumulative[i] = at;
    mean += (amount * accounts) / total;
    square += (amount * amount * accounts) / total;
  });
  const deviation = Math.sqrt(Math.max(0, square - mean * mean));
  const uniform = seededUniform(seed);
  const normal = (): number => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform());
  const sumOf = (count: number): number => {
    if (count >= MANY) return Math.max(0, count * mean + Math.sqrt(count) * deviation * normal());
    let sum = 0;
    for (let i = 0; i < count; i++) sum += amounts[indexOf(cumulative, uniform())]!.amount;
    return sum;
  };
  const losses = binomialSampler(size, rate);
  const ratios = new Float64Array(RATIOS);
  for (let i = 0; i < RATIOS; i++) {
    const lost = losses.draw(uniform);
    const [gone, kept] = [sumOf(lost), sumOf(size - lost)];
    ratios[i] = gone + kept > 0 ? gone / (gone + kept) : 0;
  }
  return standardised(ratios);
}

function indexOf(cumulative: Float64Array, u: number): number {
  let [low, high] = [0, cumulative.length - 1];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (cumulative[middle]! < u) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** Ascending, mean 0, and mean distance between two independent draws 3 / 2.66, which is what makes sigma from moving ranges 1. */
function standardised(ratios: Float64Array): Float64Array | null {
  ratios.sort();
  const n = ratios.length;
  let [sum, weighted] = [0, 0];
  ratios.forEach((ratio, i) => {
    sum += ratio;
    // Gini's mean difference from the order statistics.
    weighted += (2 * i - n + 1) * ratio;
  });
  const distance = (2 * weighted) / (n * n);
  if (!(distance > 0)) return null;
  const sigma = (2.66 / 3) * distance;
  const mean = sum / n;
  return ratios.map((ratio) => (ratio - mean) / sigma);
}
