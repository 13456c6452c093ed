import type { ChartKind } from '../../../charts/types.ts';
import type { PointDates } from '../../types.ts';
import { capitalised, count, counted, percent } from '../../words/format.ts';
import type { ViewWords } from '../../words/viewWords.ts';
import { inCases } from '../chanceWords.ts';
import type { Words } from '../target/words.ts';
import type { SpreadReading } from './reading.ts';

export interface SpreadContext {
  readonly tenure: string;
  readonly view: ViewWords;
  readonly dates: readonly PointDates[];
  /** points on the chart */
  readonly points: number;
  /** " for Orchard" or nothing */
  readonly whose: string;
  readonly kind: ChartKind;
  readonly readCautions: readonly string[];
}

const USE =
  'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.';

/** How much the points vary, in words. */
export function spreadWords(reading: SpreadReading, context: SpreadContext): Words {
  return {
    headline: headline(reading, context),
    evidence: evidence(reading, context),
    cautions: cautions(reading, context),
    next: next(reading, context),
  };
}

function headline(
  { outcome, dispersion, rate, stretch }: SpreadReading,
  { tenure, whose, view }: SpreadContext,
): string {
  const times = (dispersion?.ratio ?? 1).toFixed(1);
  switch (outcome) {
    case 'chance':
      return `Nothing says that the points vary otherwise than by chance alone${whose}: ${times} times as much as chance makes on average${dispersion ? `, and chance itself gives ${dispersion.ratio >= 1 ? 'at least' : 'at most'} that ${inCases(dispersion.ratio >= 1 ? dispersion.pValue : 1 - dispersion.pValue)} such charts` : ''}.`;
    case 'maybe':
      return `The points vary a little more than chance alone would have them${whose}, about ${times} times as much; that much happens by chance now and then.`;
    case 'wider':
      return `The points vary about ${times} times as much as chance alone would have them${whose}: something besides chance moves them.`;
    case 'alike':
      return `The points are more alike than chance would leave them${whose}: they vary only ${times} times as much.`;
    case 'one-point':
      return `Cannot say how much the points vary${whose}: there is only one.`;
    case 'no-level':
      return `Cannot say how much the points vary${whose}: ${rate >= 1 || stretch.pooled.lost > 0 ? view.everybodyLost(tenure) : view.nobodyLost(tenure)}, so they are all the same.`;
  }
}

function evidence(reading: SpreadReading, context: SpreadContext): string[] {
  const { stretch, rate, dispersion, deviation, sigmaZ, size, histogram } = reading;
  const { pooled, counts } = stretch;
  const rows = [
    `${capitalised(whichPoints(reading, context))}: ${count(pooled.lost)} of ${counted(pooled.accounts, context.view.pooledOne)} lost; usual level ${percent(rate)}.`,
  ];
  if (histogram?.of === 'lost') rows.push(usualCounts(reading, context.view.one));
  if (dispersion && deviation) {
    rows.push(
      `From chance alone, a point${counts.every((one) => one.accounts === size) ? ` of ${counted(size, context.view.one)}` : ''} strays from the level by ${percent(deviation.predicted)} of its ${context.view.one}s (standard deviation); these stray by ${percent(deviation.seen)}.`,
      `Dispersion test: chi-square ${dispersion.chiSquare.toFixed(1)} on ${count(dispersion.degreesOfFreedom)} degrees of freedom, ratio ${dispersion.ratio.toFixed(2)}. Chance alone varies at least so much ${inCases(dispersion.pValue)} such charts.`,
    );
  }
  if (sigmaZ !== null)
    rows.push(
      `From one point to the next they vary ${sigmaZ.toFixed(2)} times as much as chance would have them (sigma z, from the mean moving range). A slow drift or a step shows in the first figure and not in this one.`,
    );
  rows.push(...widening(reading, context.kind), ...furthest(reading, context));
  return rows;
}

/** "Chance alone makes a point of 85 lose 2 to 10 (…)": what to expect of a single point. */
function usualCounts({ histogram, size, stretch }: SpreadReading, unit: string): string {
  const bins = histogram!.bins;
  const total = bins.reduce((sum, bin) => sum + bin.expected, 0);
  let left = 0;
  let low = 0;
  while (left + bins[low]!.expected <= total * 0.025) left += bins[low++]!.expected;
  let right = 0;
  let high = bins.length - 1;
  while (high > low && right + bins[high]!.expected <= total * 0.025) right += bins[high--]!.expected;
  const [from, to] = [bins[low]!.from, bins[high]!.to];
  const outside = stretch.counts.filter(({ lost }) => lost < from || lost > to).length;
  return `By chance alone about 19 of 20 points of ${counted(size, unit)} lose ${count(from)} to ${count(to)}; of these ${counted(stretch.counts.length, 'point')}, ${count(outside)} lost fewer or more (about ${(left + right).toFixed(1)} expected).`;
}

function widening({ limits, sigmaZ, outcome }: SpreadReading, kind: ChartKind): string[] {
  if (!limits || sigmaZ === null) return [];
  const range = ({ lower, upper }: { lower: number; upper: number }): string =>
    `${percent(lower)} to ${percent(upper)}`;
  const wide = range(limits.prime);
  const plain = range(limits.binomial);
  if (kind === 'p-prime')
    return [
      `The chart already allows for it: its limits are set by how much the points really vary (a Laney p-prime chart), ${wide} instead of the ${plain} of chance alone.`,
    ];
  if (outcome === 'wider' || outcome === 'maybe')
    return [
      `A chart with limits set by how much the points really vary (a Laney p-prime chart) would allow ${wide} instead of ${plain}, so fewer points would be flagged, and a move would have to be larger to be seen.`,
    ];
  return [
    `Nothing calls for other limits: set by how much the points really vary they would be ${wide}, by chance alone they are ${plain}.`,
  ];
}

function furthest({ furthest: far, stretch }: SpreadReading, { dates, view }: SpreadContext): string[] {
  const told = far.filter(({ z }) => Math.abs(z) > 0);
  if (told.length === 0) return [];
  const words = told.map(({ index, lost, accounts, z, expected }) => {
    const from = dates[index - 1]?.firstStart ?? null;
    const when = from === null ? '' : ` (from ${view.day(from)})`;
    return `point ${index}${when}, ${count(lost)} of ${count(accounts)} lost, ${Math.abs(z).toFixed(1)} standard deviations ${z > 0 ? 'above' : 'below'}, where chance makes ${expectedWords(expected)} of ${count(stretch.counts.length)} points so ${z > 0 ? 'high' : 'low'}`;
  });
  return [`Furthest out: ${words.join('; ')}.`];
}

function expectedWords(expected: number): string {
  return expected < 0.01 ? 'fewer than 0.01' : `about ${expected.toFixed(expected < 1 ? 2 : 1)}`;
}

function whichPoints({ stretch }: SpreadReading, { dates, points, view }: SpreadContext): string {
  const { from, to, reason } = stretch;
  const first = dates[from - 1]?.firstStart ?? null;
  const last = dates[to - 1]?.lastStart ?? null;
  const when = first === null || last === null ? '' : `, ${view.span(view.day(first), view.day(last))}`;
  if (reason === 'all') return points === 1 ? `the only point${when}` : `all ${count(points)} points${when}`;
  const why = reason === 'moved' ? ', those before the figure moved' : ', those that should set the usual level';
  return `${from === to ? `point ${from}` : `points ${from} to ${to}`}${when}${why}`;
}

function cautions({ stretch, outcome }: SpreadReading, { readCautions }: SpreadContext): string[] {
  const list = [...readCautions];
  if (stretch.reason === 'split')
    list.push(
      'These points hold two levels, not one (ask "has churn moved?"): a step between levels looks like spread here.',
    );
  if (outcome !== 'one-point' && outcome !== 'no-level' && stretch.counts.length < 12)
    list.push(`This rests on ${counted(stretch.counts.length, 'point')} only; a spread from so few is rough.`);
  list.push(USE);
  return list;
}

function next({ outcome }: SpreadReading, { whose }: SpreadContext): string[] {
  switch (outcome) {
    case 'wider':
      return [
        'Look for what comes and goes between points: campaigns, seasons, channels, a batch of accounts that left together.',
        ...(whose === ''
          ? ['Ask "where?": groups that differ and change their shares vary more when charted together.']
          : []),
      ];
    case 'alike':
      return [
        'Look at how the counts are made: figures that were smoothed, capped or spread over months are more alike than real ones.',
      ];
    case 'maybe':
      return ['Do nothing yet; ask again when more points are there.'];
    case 'chance':
      return ['Nothing to do: single high and low points are what chance looks like here.'];
    case 'one-point':
    case 'no-level':
      return ['Ask again with more points, or at an age at which some accounts are lost and some are kept.'];
  }
}
