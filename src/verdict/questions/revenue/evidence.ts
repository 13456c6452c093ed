import { dayInWords } from '../../../days.ts';
import type { VerdictContext } from '../../context.ts';
import type { Signal } from '../../types.ts';
import { signalSentence } from '../../words/evidence.ts';
import { capitalised, count, counted, percent } from '../../words/format.ts';
import type { RevenueJudgement, RevenuePoint } from './judgeRevenue.ts';
import { type RevenueRate, revenueTotals } from './pooled.ts';

/** Flags told in words before the rest are only counted. */
const FLAGS_TOLD = 3;

/** What the chart's flags say, the standing ones first; where nothing moved also those to watch and those that did not last. */
export function flagSentences({ signals, chart, finding }: RevenueJudgement, context: VerdictContext): string[] {
  if (!chart || finding === 'unsteady-baseline') return [];
  const shift = signals.filter(({ speaks }) => speaks === 'shift');
  const judgedFrom = chart.baseline.last < chart.points.length ? chart.baseline.last : 0;
  const of = (state: Signal['state']): Signal[] => shift.filter((signal) => signal.state === state);
  const watching = of('watching');
  return [
    ...told(of('standing'), '', context),
    ...told(watching, 'To watch: ', context),
    ...(watching.length > 0
      ? ['Taken together, the newest points do not yet differ enough from the usual level to call it a move.']
      : []),
    ...told(
      of('passed').filter(({ point }) => point > judgedFrom),
      'Did not last: ',
      context,
    ),
  ];
}

function told(signals: readonly Signal[], lead: string, context: VerdictContext): string[] {
  const longest = signals.toSorted((a, b) => b.until - b.members[0] - (a.until - a.members[0]));
  const rest = signals.length - FLAGS_TOLD;
  return [
    ...longest.slice(0, FLAGS_TOLD).map((signal) => `${lead}${signalSentence(signal, context)}`),
    ...(rest > 0 ? [`${lead}${counted(rest, 'further flag')} of the same kind on the chart.`] : []),
  ];
}

/** "5.2 % of the revenue (mean of 25 points; 95 % interval 4.6 % to 5.9 %; 148 of 2,500 accounts left)". */
export function rateWords(rate: RevenueRate): string {
  return `${percent(rate.rate)} of the revenue (mean of ${counted(rate.points, 'point')}; 95 % interval ${percent(rate.low)} to ${percent(rate.high)}; ${count(rate.lost)} of ${counted(rate.accounts, 'account')} left)`;
}

/** What stands beside revenue churn over the same points: contraction and expansion apart, and the churn of accounts. */
export function besideSentences(points: readonly RevenuePoint[], amountsChange: boolean, tenure: string): string[] {
  const totals = revenueTotals(points);
  if (!totals) return [];
  const where = `Over all ${counted(points.length, 'point')}`;
  return [
    `${where}, accounts lost within ${tenure} took ${percent(totals.lost)} of the revenue that was there at the start with them (revenue churn); they were ${percent(totals.logo)} of the accounts (logo churn).${compared(totals.lost, totals.logo)}`,
    amountsChange
      ? `Among those who stayed, some paid less at ${tenure} than at their start, ${percent(totals.contraction)} of the revenue in all (contraction), and some more, ${percent(totals.expansion)} (expansion). Neither is part of revenue churn.`
      : 'The export holds one amount for each account, so whether those who stay come to pay less (contraction) or more (expansion) cannot be seen in it.',
  ];
}

/** A gap of a fifth between the two shares is worth a word. Our choice, no source. */
function compared(revenue: number, logo: number): string {
  if (logo === 0 || revenue === 0) return '';
  if (revenue > 1.2 * logo) return ' Those who leave pay more than the average account.';
  if (revenue < logo / 1.2) return ' Those who leave pay less than the average account.';
  return '';
}

/** What could have been missed when nothing moved, and how often such a chart cries wolf. */
export function trustSentences({ finding, trust, series }: RevenueJudgement, context: VerdictContext): string[] {
  if (finding !== 'steady' && finding !== 'risen' && finding !== 'fallen') return [];
  const sentences: string[] = [];
  if (finding === 'steady' && trust.wouldSee && series) {
    const from = context.dates[series.wouldSeeFrom - 1]?.firstStart ?? null;
    const { rise, fall, chance } = trust.wouldSee;
    const parts = [
      rise === null ? null : `a lasting rise to ${percent(rise)} or more`,
      fall === null ? null : `a lasting fall to ${percent(fall)} or less`,
    ].filter((part) => part !== null);
    sentences.push(
      parts.length > 0
        ? `${capitalised(parts.join(', or '))}, ${from === null ? `from point ${series.wouldSeeFrom} on` : `among accounts starting from ${dayInWords(from)} on`}, would by now have been reported with ${Math.round(chance * 100)} % chance; anything smaller could have been missed.`
        : 'The points vary so much that any move could have been missed so far.',
    );
    if (rise !== null && fall === null)
      sentences.push('The points vary so much that a fall of any size could have been missed.');
  }
  if (trust.falseAlarmEvery !== null) {
    const chance =
      trust.falseVerdictChance === null
        ? ''
        : `, and a chart of this length reads as moved in about ${Math.max(1, Math.round(trust.falseVerdictChance * 100))} of 100 cases`;
    sentences.push(
      `With nothing changed, this chart raises a false flag about once in ${count(trust.falseAlarmEvery)} points${chance}. Both are worked out for amounts as uneven as these.`,
    );
  }
  return sentences;
}
