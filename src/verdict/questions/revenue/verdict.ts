import type { Chart } from '../../../charts/types.ts';
import { dayInWords } from '../../../days.ts';
import type { VerdictContext } from '../../context.ts';
import { LEAST_POINTS } from '../../judgement.ts';
import type { Outcome, Verdict } from '../../types.ts';
import { countSentence, stretch } from '../../words/evidence.ts';
import { capitalised, percent, percentagePoints } from '../../words/format.ts';
import { type RevenueCautionFacts, revenueCautions } from './cautions.ts';
import { besideSentences, flagSentences, rateWords, trustSentences } from './evidence.ts';
import type { RevenueFinding, RevenueJudgement, RevenuePoint } from './judgeRevenue.ts';
import { revenueNext } from './next.ts';
import { pooledRevenue, type RevenueRate } from './pooled.ts';

export interface RevenueFacts extends RevenueCautionFacts {
  readonly judgement: RevenueJudgement;
  /** as charted, in time order */
  readonly points: readonly RevenuePoint[];
  /** some account's amount changes in this export: without it, contraction and expansion cannot be seen */
  readonly amountsChange: boolean;
  /** dates are those of the charted points */
  readonly context: VerdictContext & { readonly tenure: string };
}

export interface RevenueVerdict extends Verdict {
  readonly before: RevenueRate | null;
  readonly after: RevenueRate | null;
}

const OUTCOME: Readonly<Record<RevenueFinding, Outcome>> = {
  risen: 'risen',
  fallen: 'fallen',
  steady: 'steady',
  'unsteady-baseline': 'cannot-say',
  'no-level': 'cannot-say',
  'too-few-points': 'too-early',
};

/** Puts the judgement of revenue churn into words. Money is told as shares of the revenue at the start, never in the amounts' own unit. */
export function writeRevenue(facts: RevenueFacts): RevenueVerdict {
  const { judgement, points, context } = facts;
  const { chart, series, finding } = judgement;
  const moved = finding === 'risen' || finding === 'fallen';
  const start = moved ? (series?.start ?? null) : null;
  const beforeLast = start && chart ? Math.min(chart.baseline.last, start.first - 1) : 0;
  const before = start && chart ? pooledRevenue(chart, points, 1, beforeLast) : null;
  const after = start && chart ? pooledRevenue(chart, points, start.first, points.length) : null;
  const difference = chart && before && after ? differenceOf(chart, before, after) : null;
  const since = start
    ? {
        point: start.first,
        start: context.dates[start.first - 1]?.firstStart ?? null,
        candidates: start.candidates,
      }
    : null;
  return {
    outcome: OUTCOME[finding],
    headline: headline(facts, before, after, since?.start ?? null),
    evidence: [
      ...flagSentences(judgement, context),
      ...(before && after && difference
        ? [
            `Usual level, from ${stretch(1, beforeLast, context)}: ${rateWords(before)}. Since then: ${rateWords(after)}.`,
            `The difference is about ${percentagePoints(difference.estimate)} percentage points (95 % interval ${percentagePoints(difference.low)} to ${percentagePoints(difference.high)}). It was noticed because it stood out, so the lasting change may be somewhat smaller.`,
          ]
        : []),
      ...(finding === 'unsteady-baseline' && chart && series?.checks
        ? [splitSentence(chart, points, series.checks.splitAfter, context)]
        : []),
      ...besideSentences(points, facts.amountsChange, context.tenure),
      ...trustSentences(judgement, context),
      ...(chart ? [countSentence(points.length, context)] : []),
      ...context.howChosen,
    ],
    cautions: revenueCautions(facts),
    next: revenueNext(judgement, context, since),
    since,
    before,
    after,
    difference,
  };
}

function differenceOf(chart: Chart, before: RevenueRate, after: RevenueRate): Verdict['difference'] {
  const estimate = after.rate - before.rate;
  const half = 1.959964 * (chart.points[0]?.sigma ?? 0) * Math.sqrt(1 / before.points + 1 / after.points);
  return { estimate, low: Math.max(-1, estimate - half), high: Math.min(1, estimate + half) };
}

function splitSentence(chart: Chart, points: readonly RevenuePoint[], after: number, context: VerdictContext): string {
  const last = chart.baseline.last;
  const side = (from: number, to: number): string =>
    `${stretch(from, to, context)}: ${rateWords(pooledRevenue(chart, points, from, to))}`;
  return `${capitalised(side(1, after))}. ${capitalised(side(after + 1, last))}.`;
}

function headline(
  { judgement, points, context }: RevenueFacts,
  before: RevenueRate | null,
  after: RevenueRate | null,
  start: number | null,
): string {
  const whose = context.segment === null ? '' : ` for ${context.segment}`;
  const by = `lost within ${context.tenure}`;
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      return `Revenue churn has ${judgement.finding}${whose}: about ${percent(after?.rate ?? 0)} of the revenue is ${by}${start === null ? '' : ` among accounts that started from about ${dayInWords(start)}`}, ${judgement.finding === 'risen' ? 'up' : 'down'} from the usual ${percent(before?.rate ?? 0)}.`;
    case 'steady': {
      const watching = judgement.signals.some(({ state, speaks }) => state === 'watching' && speaks === 'shift');
      return `Revenue churn is steady${whose}: the usual ${percent(judgement.chart?.center ?? 0)} of the revenue is ${by}${watching ? ', with one thing to watch' : ''}.`;
    }
    case 'unsteady-baseline':
      return `Cannot say whether revenue churn has moved${whose}: the stretch that should set the usual level was not steady itself.`;
    case 'no-level': {
      const value = judgement.chart?.center ?? 0;
      const every = value === 0 ? 'no revenue' : value === 1 ? 'all revenue' : `the very same ${percent(value)}`;
      return `Cannot say whether revenue churn has moved${whose}: ${every} was ${by} in every point that sets the usual level, so there is no usual spread to judge by.`;
    }
    case 'too-few-points':
      return points.length === 0
        ? `Too early to say whether revenue churn has moved${whose}: not one full point of ${context.subgroupSize ?? 0} accounts has had ${context.tenure} to leave or stay.`
        : `Too early to say whether revenue churn has moved${whose}: ${points.length === 1 ? 'one point' : `${points.length} points`}, and at least ${LEAST_POINTS} are needed.`;
  }
}
