import type { AccountTable } from '../../accounts/types.ts';
import { type LossPlaces, lossPlaces } from '../../census/lossPlaces.ts';
import type { Census } from '../../census/types.ts';
import { LEAST_BEFORE } from '../../charts/standing/lastBlock.ts';
import { bernoulliCusum, type SumTrace } from '../../charts/sums/bernoulliCusum.ts';
import { buildWatch, type Watch } from '../../charts/sums/watchDesign.ts';
import type { Chart } from '../../charts/types.ts';
import type { Day } from '../../days.ts';
import type { Judgement } from '../../verdict/judgement.ts';

/** Years of new accounts between two false alarms. An alarm asks somebody to look: once in two years for nothing is bearable. Our choice. */
export const FALSE_ALARM_YEARS = 2;
/** Where so few accounts come in that two years would hold fewer losses than this, the interval is longer: an alarm needs losses to rest on. */
const LEAST_LOSSES = 100;
const WEEKS_A_YEAR = 52.18;

/** The moves a watch looks for when nobody names one: a rise by half and a fall by half. */
export const USUAL_MOVES: Moves = { rise: 1.5, fall: 0.5 };

/** Factors on the rate. */
export interface Moves {
  /** above 1 */
  readonly rise: number;
  /** between 0 and 1 */
  readonly fall: number;
}

/** The accounts after those that set the usual level, watched one by one. Places are numbered from 1 at the first of them. */
export interface Watched {
  readonly watch: Watch;
  /** points that set the usual level, and their accounts */
  readonly baselinePoints: number;
  readonly baseline: { readonly accounts: number; readonly lost: number };
  readonly accounts: number;
  /** places of the lost accounts */
  readonly losses: Int32Array;
  readonly rise: SumTrace;
  readonly fall: SumTrace;
  readonly startOf: (place: number) => Day;
  /** lost among the accounts after a place */
  readonly lostAfter: (place: number) => number;
}

/**
 * Watches every matured account after the baseline, those of the unfinished subgroup included. Accounts that are not matured are not
 * counted, also when they are lost already: they would only ever add losses (the classic bias).
 * @param judgement  of the chart: where it dates a move inside its trial limits, the level is taken from before it
 * @param chart      with a center strictly between 0 and 1
 * @param movesFrom  what to look for, from the usual rate
 */
export async function watchAccounts(
  table: AccountTable,
  census: Census,
  chart: Chart,
  judgement: Judgement,
  movesFrom: (usual: number) => Moves = () => USUAL_MOVES,
): Promise<Watched> {
  const baselinePoints = levelPoints(chart, judgement);
  const points = census.subgroups
    .slice(0, baselinePoints)
    .filter(({ index }) => !chart.baseline.excluded.includes(index));
  const baseline = points.reduce(
    (sum, { accounts, lost }) => ({ accounts: sum.accounts + accounts, lost: sum.lost + lost }),
    { accounts: 0, lost: 0 },
  );
  const usual = insideOf(baseline);
  const perYear = census.inflowPerWeek * WEEKS_A_YEAR;
  const every = Math.max(FALSE_ALARM_YEARS * perYear, LEAST_LOSSES / Math.min(usual, 1 - usual));
  const watch = buildWatch(usual, movesFrom(usual), every);
  const from = baselinePoints * census.request.subgroupSize;
  const found = await lossPlaces(table, census.request, from);
  return follow(watch, found, from, { baselinePoints, baseline });
}

/** The level's rate; where nobody or everybody was lost, the nearest that is a level. */
function insideOf({ accounts, lost }: { accounts: number; lost: number }): number {
  return Math.min(Math.max(lost, 0.5), accounts - 0.5) / accounts;
}

function follow(
  watch: Watch,
  found: LossPlaces,
  from: number,
  level: Pick<Watched, 'baselinePoints' | 'baseline'>,
): Watched {
  const losses = found.places.map((place) => place - from);
  const accounts = Math.max(0, found.accounts - from);
  return {
    ...level,
    watch,
    accounts,
    losses,
    rise: bernoulliCusum(watch.rise, losses, accounts),
    fall: bernoulliCusum(watch.fall, losses, accounts),
    startOf: (place) => found.startOf(from + place),
    lostAfter: (place) => losses.length - countUpTo(losses, place),
  };
}

/** How many of these ascending numbers are at most `most`. */
function countUpTo(numbers: Int32Array, most: number): number {
  let [low, high] = [0, numbers.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (numbers[middle]! <= most) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** On trial limits, where every point sets the level, the watch takes it from the first two thirds, or from what lies before a move. */
function levelPoints({ baseline, points }: Chart, judgement: Judgement): number {
  if (baseline.last < points.length) return baseline.last;
  const before = judgement.start === null ? points.length : judgement.start.first - 1;
  return Math.min(points.length, Math.max(LEAST_BEFORE, Math.min(before, Math.floor((2 * points.length) / 3))));
}
