import { newcombeInterval } from '../charts/intervals/newcombe.ts';
import { rateInterval } from '../charts/intervals/rateInterval.ts';
import type { Chart, SubgroupCount } from '../charts/types.ts';
import type { VerdictContext } from './context.ts';
import type { Finding, Judgement } from './judgement.ts';
import type { Outcome, PooledRate, Signal, Since, Verdict } from './types.ts';
import { cautions } from './words/cautions.ts';
import { countSentence, pooled, signalSentence, sizeSentences, stretch, trustSentences } from './words/evidence.ts';
import { capitalised, counted, percentagePoints } from './words/format.ts';
import { headline } from './words/headline.ts';
import { nextSteps } from './words/next.ts';
import { furtherTrustSentences } from './words/trust.ts';
import { viewWords } from './words/viewWords.ts';

const OUTCOME: Readonly<Record<Finding, Outcome>> = {
  risen: 'risen',
  fallen: 'fallen',
  steady: 'steady',
  'mix-change': 'steady',
  'mix-unclear': 'cannot-say',
  'unsteady-baseline': 'cannot-say',
  'no-level': 'cannot-say',
  'too-few-points': 'too-early',
};

/**
 * Puts a judgement into a verdict with its words.
 * @param chart  null when there is not one full subgroup
 */
export function writeVerdict(chart: Chart | null, judgement: Judgement, context: VerdictContext): Verdict {
  const start = judgement.start;
  const since: Since | null =
    start && chart
      ? {
          point: start.first,
          start: context.dates[start.first - 1]?.firstStart ?? null,
          candidates: start.candidates,
        }
      : null;
  const sides = chart && start ? sidesOf(chart, start.first) : null;
  const before = sides ? pooledRate(sides.before) : null;
  const after = sides ? pooledRate(sides.after) : null;
  const difference = sides ? newcombeInterval(sides.after, sides.before) : null;
  const moved = judgement.finding === 'risen' || judgement.finding === 'fallen';

  const shiftSignals = judgement.signals.filter((signal) => signal.speaks === 'shift');
  const standing = longestFirst(shiftSignals.filter((signal) => signal.state === 'standing'));
  const watching = longestFirst(shiftSignals.filter((signal) => signal.state === 'watching'));
  const judgedFrom = chart && chart.baseline.last < chart.points.length ? chart.baseline.last : 0;
  const passed = shiftSignals.filter((signal) => signal.state === 'passed' && signal.point > judgedFrom);

  const aboutMix = judgement.finding === 'mix-change' || judgement.finding === 'mix-unclear';
  const evidence: string[] = [
    ...flagSentences(standing, '', context),
    ...(moved ? sizeSentences({ before, after, difference }, [1, sides!.beforeLast], context) : []),
    ...(judgement.finding === 'unsteady-baseline' && chart
      ? [splitSentence(chart, judgement.steadiness!.splitAfter, context)]
      : []),
    ...(aboutMix ? mixSentences(judgement, shiftSignals) : watchSentences(watching, passed, context)),
    ...trustSentences(judgement, context, judgement.finding === 'steady'),
    ...(chart ? [countSentence(chart.points.length, context, sizesOf(chart))] : []),
    ...context.howChosen,
    ...furtherTrustSentences(judgement, context.tenure === null ? 'case' : viewWords(context.view).pooledOne),
  ];

  return {
    outcome: OUTCOME[judgement.finding],
    headline: headline(judgement, context, {
      since,
      before,
      after,
      center: chart?.center ?? null,
    }),
    evidence,
    cautions: cautions(chart, judgement, context),
    next: nextSteps(judgement, context, since),
    since: moved ? since : null,
    before,
    after,
    difference,
  };
}

const sizesOf = (chart: Chart): number[] => chart.points.map(({ accounts }) => accounts);

/** The flag that covers most of the chart says most; it is told first. */
function longestFirst(signals: readonly Signal[]): Signal[] {
  return [...signals].sort((a, b) => b.until - b.members[0] - (a.until - a.members[0]));
}

/** Flags told in words before the rest are only counted. */
const FLAGS_TOLD = 3;

function flagSentences(
  signals: readonly Signal[],
  lead: string,
  context: VerdictContext,
  of = signals.length,
): string[] {
  const told = signals.slice(0, FLAGS_TOLD);
  const rest = of - told.length;
  const sentences = told.map((signal) => `${lead}${signalSentence(signal, context)}`);
  if (rest > 0) sentences.push(`${lead}${counted(rest, 'further flag')} of the same kind on the chart.`);
  return sentences;
}

/** Counts before and after the move: the baseline, or on trial limits everything before the start; and everything from the start on. */
function sidesOf(chart: Chart, first: number): { before: SubgroupCount; after: SubgroupCount; beforeLast: number } {
  const beforeLast = Math.min(chart.baseline.last, first - 1);
  const pool = (from: number, to: number): SubgroupCount => poolPoints(chart, from, to);
  return { before: pool(1, beforeLast), after: pool(first, chart.points.length), beforeLast };
}

function poolPoints(chart: Chart, from: number, to: number): SubgroupCount {
  let accounts = 0;
  let lost = 0;
  for (const point of chart.points) {
    if (point.index < from || point.index > to || chart.baseline.excluded.includes(point.index)) continue;
    accounts += point.accounts;
    lost += point.lost;
  }
  return { accounts, lost };
}

function pooledRate(count: SubgroupCount): PooledRate {
  const { estimate, low, high, method } = rateInterval(count.lost, count.accounts);
  return {
    rate: estimate,
    low,
    high,
    lost: count.lost,
    accounts: count.accounts,
    interval: method,
  };
}

function watchSentences(watching: readonly Signal[], passed: readonly Signal[], context: VerdictContext): string[] {
  return [
    ...flagSentences(watching, 'To watch: ', context),
    ...(watching.length > 0
      ? ['Taken together, the newest points do not yet differ enough from the usual level to call it a move.']
      : []),
    ...flagSentences(passed.slice(-FLAGS_TOLD), 'Did not last: ', context, passed.length),
  ];
}

/** The two levels of a baseline that is not one: what can be said even where the question cannot be answered. */
function splitSentence(chart: Chart, after: number, context: VerdictContext): string {
  const last = chart.baseline.last;
  const pool = (from: number, to: number): PooledRate => pooledRate(poolPoints(chart, from, to));
  return `${capitalised(stretch(1, after, context))}: ${pooled(pool(1, after), context)}. ${capitalised(stretch(after + 1, last, context))}: ${pooled(pool(after + 1, last), context)}.`;
}

function mixSentences(judgement: Judgement, flags: readonly Signal[]): string[] {
  const { pooledDifference, within } = judgement.mix!;
  const sentences = [
    `The overall rate changed by ${percentagePoints(pooledDifference)} percentage points; comparing each group with itself leaves ${percentagePoints(within.difference)} (95 % interval ${percentagePoints(within.low)} to ${percentagePoints(within.high)}), so a move within the groups of up to about that size could have been missed.`,
  ];
  if (judgement.finding === 'mix-change' && flags.length > 0) {
    sentences.push(
      `${capitalised(counted(flags.length, 'flag'))} on the chart of all accounts: that is what a moving mix looks like when groups are charted together.`,
    );
  }
  return sentences;
}
