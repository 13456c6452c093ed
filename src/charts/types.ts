import type { ZoneEdges } from './tests/zoneEdges.ts';

/*
 * The nouns of the charts.
 *
 * subgroup     consecutive accounts, ordered by start, counted together; one point of the chart
 * accounts     number of accounts in a subgroup (its size n)
 * lost         how many of them were lost by the tenure point
 * centre line  the usual level: the baseline's pooled rate (JSON and code: `center`)
 * sigma        standard deviation of a point's value if only chance acts, at that point's size
 * limits       centre line -/+ 3 sigma, clipped to what is possible (`lower`, `upper`)
 * zone         C within 1 sigma of the centre line, B from 1 to 2, A from 2 to 3
 * baseline     the points the centre line and the limits are computed from
 * signal       what one of the eight tests raises: a flag, not yet a verdict
 * episode      the stretch over which one test's condition goes on holding; reported once
 */

/** One subgroup's count: `lost` of `accounts`, both whole numbers, 0 <= lost <= accounts, accounts >= 1. */
export interface SubgroupCount {
  readonly accounts: number;
  readonly lost: number;
}

/**
 * p and p-prime: lost share per subgroup; g: accounts from one loss to the next; t: days from one loss to the next; individuals: any ratio
 * that is no count; ewma: the smoothed lost share; cusum: the account-by-account sum.
 */
export type ChartKind = 'p' | 'p-prime' | 'g' | 't' | 'individuals' | 'ewma' | 'cusum';

/** What the plotted values are: fractions, whole accounts, days, or a score without a unit. */
export type ValueScale = 'rate' | 'accounts' | 'days' | 'score';

/** Points are numbered from 1 in time order. */
export interface ChartPoint {
  readonly index: number;
  readonly accounts: number;
  readonly lost: number;
  /** the plotted quantity: for a p chart lost / accounts, a fraction */
  readonly value: number;
  readonly sigma: number;
  /** 3 sigma limits, clipped to [0, 1] for a rate */
  readonly lower: number;
  readonly upper: number;
  /** p charts: smallest and largest share not flagged by the exact binomial limits, offered beside the 3 sigma ones */
  readonly exactLower?: number;
  readonly exactUpper?: number;
  /** where the zones end, when they come from tail areas and not from multiples of sigma */
  readonly edges?: ZoneEdges;
  /** the unfinished gap of a g or t chart: no loss has ended it, and it is at least this long */
  readonly open?: true;
}

export interface Baseline {
  /** first and last point it spans, both counted */
  readonly first: number;
  readonly last: number;
  /** points inside it that were left out by decision */
  readonly excluded: readonly number[];
  /** true when fewer than 25 points are used */
  readonly provisional: boolean;
  /** pooled counts of the points used */
  readonly accounts: number;
  readonly lost: number;
}

export interface Chart {
  readonly kind: ChartKind;
  /** what the values are; fractions when absent */
  readonly scale?: ValueScale;
  /** for a p' chart: how much more the points vary than the binomial allows, as a factor on sigma; else 1 */
  readonly sigmaZ: number;
  /** n when every subgroup has the same size, else null */
  readonly subgroupSize: number | null;
  readonly center: number;
  /** ewma: weight of the newest point, and the limits in sigmas of the smoothed value */
  readonly smoothing?: { readonly lambda: number; readonly width: number };
  /** g and t: mean gap of the baseline, where center is the median */
  readonly mean?: number;
  readonly baseline: Baseline;
  readonly points: readonly ChartPoint[];
}

/** Nelson (1984) numbering. */
export type TestNumber = 1 | 2 | 3 | 4 | 5 | 6 | 7 | 8;

/** The tests that may raise a shift. */
export type ShiftTest = 1 | 2 | 3 | 5 | 6;

/** Side of the centre line the members lie on; `rising`/`falling` trends report the side they move to. */
export type Side = 'above' | 'below' | 'both';

/** One episode of one test. */
export interface TestEpisode {
  readonly test: TestNumber;
  readonly side: Side;
  /** the point that completed the pattern */
  readonly point: number;
  /** first and last point of the pattern as it was completed */
  readonly members: readonly [number, number];
  /** last point at which the condition still held; the episode ends there */
  readonly until: number;
  /** `shift`: may raise a shift; `cut`: says something about how the data was cut */
  readonly speaks: 'shift' | 'cut';
}

export interface Interval {
  readonly estimate: number;
  readonly low: number;
  readonly high: number;
}
