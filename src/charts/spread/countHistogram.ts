import { binomialChances } from '../random/binomialChances.ts';
import type { SubgroupCount } from '../types.ts';

/** One bar: counts (or z scores) from `from` to `to`, both counted for counts, `to` left out for scores. */
export interface SpreadBin {
  readonly from: number;
  readonly to: number;
  /** points seen in it */
  readonly seen: number;
  /** points expected in it, a fraction of a point too */
  readonly expected: number;
}

export interface SpreadHistogram {
  /** 'lost': accounts lost, all points of one size; 'score': distance from the rate in sigma, where sizes differ */
  readonly of: 'lost' | 'score';
  readonly bins: readonly SpreadBin[];
}

const MOST_BARS = 24;
const SCORE_WIDTH = 0.5;

/**
 * How often the points lost how many accounts, beside how often the binomial at one rate would have them do so.
 * @param counts  one or more subgroups
 * @param rate    strictly between 0 and 1
 * @returns       expected numbers from exact binomial probabilities, each point at its own size; they add up to the points but for counts
 *                left and right of all bars, which are less likely than 1 in 10,000 together with nothing seen there
 */
export function countHistogram(counts: readonly SubgroupCount[], rate: number): SpreadHistogram {
  const sizes = new Map<number, number>();
  for (const { accounts } of counts) sizes.set(accounts, (sizes.get(accounts) ?? 0) + 1);
  const only = sizes.size === 1 ? counts[0]!.accounts : null;
  const place = (lost: number, accounts: number): number =>
    only === null ? (lost - accounts * rate) / Math.sqrt(accounts * rate * (1 - rate)) : lost;

  const masses: { readonly at: number; readonly mass: number }[] = [];
  for (const [accounts, points] of sizes) {
    const { first, chances } = binomialChances(accounts, rate);
    for (const [i, chance] of chances.entries()) masses.push({ at: place(first + i, accounts), mass: chance * points });
  }
  masses.sort((x, y) => x.at - y.at);
  const seen = counts.map(({ lost, accounts }) => place(lost, accounts));
  const low = Math.min(...seen, quantile(masses, counts.length, 0.00005));
  const high = Math.max(...seen, quantile(masses, counts.length, 0.99995));

  const width =
    only === null
      ? SCORE_WIDTH * Math.ceil((high - low) / SCORE_WIDTH / MOST_BARS)
      : Math.ceil((high - low + 1) / MOST_BARS);
  // Whole bars from zero, so that one of them begins or stands at the rate for scores and at round counts for accounts.
  const first = Math.floor(low / width);
  const last = Math.floor(high / width);
  const bins = Array.from({ length: last - first + 1 }, (_, i) => ({ seen: 0, expected: 0, k: first + i }));
  const binOf = (at: number) => bins[Math.floor(at / width + 1e-9) - first];
  for (const at of seen) binOf(at)!.seen++;
  for (const { at, mass } of masses) {
    const bin = binOf(at);
    if (bin) bin.expected += mass;
  }
  return {
    of: only === null ? 'score' : 'lost',
    bins: bins.map(({ k, ...bin }) => ({
      from: k * width,
      to: only === null ? (k + 1) * width : (k + 1) * width - 1,
      ...bin,
    })),
  };
}

function quantile(sorted: readonly { at: number; mass: number }[], total: number, share: number): number {
  let sum = 0;
  for (const { at, mass } of sorted) {
    sum += mass;
    if (sum >= share * total) return at;
  }
  return sorted.at(-1)?.at ?? 0;
}
