import type { Chart } from '../../../charts/types.ts';
import { count, counted, listed, percent } from '../../words/format.ts';
import { inCases } from '../chanceWords.ts';
import type { Explained, Step } from './types.ts';

/** A value of the chart in its own unit. */
export function valueWords(chart: Chart, value: number): string {
  switch (chart.scale ?? 'rate') {
    case 'rate':
      return value < 0 ? `−${percent(-value)}` : percent(value);
    case 'accounts':
      return counted(value, 'account');
    case 'days':
      return counted(value, 'day');
    case 'score':
      return value.toFixed(2).replace('-', '−');
  }
}

/** Usual level, sigma and limits, and whether the points are fit to be judged so. */
export function chartSteps(from: Explained): Step[] {
  const { chart, bySubgroups } = from;
  if (!chart) return [];
  const shares =
    bySubgroups && (chart.kind === 'p' || chart.kind === 'p-prime') && chart.center > 0 && chart.center < 1;
  return [
    usualLevel(chart, bySubgroups),
    ...(shares ? [spreadOfPoints(from), sigmaAndLimits(chart)] : [limitsInGeneral(chart)]),
  ].filter((step) => step !== null);
}

function usualLevel(chart: Chart, bySubgroups: boolean): Step {
  const { baseline, center } = chart;
  const left =
    baseline.excluded.length > 0 ? `, leaving out point ${listed(baseline.excluded.map(String))} by decision` : '';
  const which =
    baseline.last >= chart.points.length
      ? `all ${counted(baseline.last, 'point')}`
      : `points ${baseline.first} to ${baseline.last}, the first ones, and later points are judged against it`;
  const sum =
    bySubgroups || chart.kind === 'cusum'
      ? `lost / accounts = ${count(baseline.lost)} / ${count(baseline.accounts)} = ${percent(chart.kind === 'cusum' ? baseline.lost / baseline.accounts : center)}`
      : `${valueWords(chart, center)}${chart.mean === undefined ? '' : ` (the median; mean ${valueWords(chart, chart.mean)})`}`;
  return {
    title: 'Usual level',
    sentences: [
      `Usual level (centre line) = ${sum}, from ${which}${left}.${baseline.provisional ? ' With fewer than 25 points it is provisional.' : ''}`,
    ],
    figures: { center, lost: baseline.lost, accounts: baseline.accounts, first: baseline.first, last: baseline.last },
  };
}

function spreadOfPoints({ chart, judgement }: Explained): Step | null {
  const spread = judgement?.dispersion;
  if (!chart || !spread) return null;
  const steady = judgement.steadiness;
  const limits =
    chart.kind === 'p-prime'
      ? `The chart takes its limits from how much the points really vary from one to the next (p-prime, sigma z = ${chart.sigmaZ.toFixed(2)}).`
      : spread.pValue < 0.01
        ? 'The limits are those of chance all the same (a p chart was asked for), and the verdict asks for that much more evidence.'
        : 'So the limits are those of chance (a p chart).';
  const sentences = [
    `Do the points vary more than chance? Dispersion test: sum of (rate − level)² / (level (1 − level) / n) = ${spread.chiSquare.toFixed(1)} on ${count(spread.degreesOfFreedom)} degrees of freedom, ${spread.ratio.toFixed(2)} times what chance makes; chance alone reaches that ${inCases(spread.pValue)} charts. ${limits}`,
  ];
  if (steady)
    sentences.push(
      `Is the usual level one level? Its largest split, after point ${steady.splitAfter}, has a log likelihood ratio of ${steady.ratio.toFixed(2)}; with one level throughout, simulated charts reach that ${inCases(steady.pValue)} cases.`,
    );
  return {
    title: 'Fit to be judged',
    sentences,
    figures: { dispersion: spread, sigmaZ: chart.sigmaZ, steadiness: steady },
  };
}

function sigmaAndLimits(chart: Chart): Step {
  const { center: p, sigmaZ, points, subgroupSize } = chart;
  const last = points.at(-1)!;
  const [low, high] = [p - 3 * last.sigma, p + 3 * last.sigma];
  const wide = chart.kind === 'p-prime' ? ` × ${sigmaZ.toFixed(2)}` : '';
  const cut =
    low < 0 || high > 1 ? `, cut at what a share can be: ${percent(last.lower)} to ${percent(last.upper)}` : '';
  const where =
    subgroupSize === null ? ` at the newest point, of n = ${count(last.accounts)}; other sizes have their own` : '';
  return {
    title: 'Sigma and limits',
    sentences: [
      `Sigma = sqrt(p (1 − p) / n)${wide} = sqrt(${p.toFixed(4)} × ${(1 - p).toFixed(4)} / ${count(last.accounts)})${wide} = ${last.sigma.toFixed(4)}, that is ${percent(last.sigma)}${where}. Limits = ${percent(p)} ± 3 × ${percent(last.sigma)} = ${valueWords(chart, low)} to ${percent(high)}${cut}.`,
    ],
    figures: { sigma: last.sigma, lower: last.lower, upper: last.upper, accounts: last.accounts },
  };
}

/** For the kinds whose limits have no formula of one line. */
function limitsInGeneral(chart: Chart): Step | null {
  const last = chart.points.at(-1);
  if (!last || !(last.upper > last.lower)) return null;
  const how: Record<Chart['kind'], string> = {
    p: 'from the usual level and the accounts of a point',
    'p-prime': 'from the usual level and how much the points really vary',
    g: 'from the geometric distribution, at the tail areas of three sigma',
    t: 'from the exponential distribution, at the tail areas of three sigma',
    individuals: 'from how much neighbouring points differ (mean moving range): level ± 2.66 times it',
    ewma: `from the sigma of a smoothed share${chart.smoothing ? `, each share weighing ${chart.smoothing.lambda} and what came before ${(1 - chart.smoothing.lambda).toFixed(2)}` : ''}`,
    cusum:
      'from what the sum of the evidence reaches by chance: each lost account adds to it, each kept one takes a little away',
  };
  return {
    title: 'Limits',
    sentences: [
      `The limits come ${how[chart.kind]}; at the newest point they are ${valueWords(chart, last.lower)} and ${valueWords(chart, last.upper)}.`,
    ],
    figures: { lower: last.lower, upper: last.upper },
  };
}
