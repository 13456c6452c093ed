import type { AmountReport } from '../../../accounts/types.ts';
import { dayInWords } from '../../../days.ts';
import type { VerdictContext } from '../../context.ts';
import { counted, listed, percent } from '../../words/format.ts';
import { cutAdvice } from '../../words/testWords.ts';
import type { CurrencyCount } from './currencies.ts';
import type { RevenueJudgement, RevenuePoint } from './judgeRevenue.ts';

/** One account carrying more than this of a point's revenue calls for a word. Common practice, no source. */
export const CONCENTRATED = 0.1;

export interface RevenueCautionFacts {
  readonly judgement: RevenueJudgement;
  readonly points: readonly RevenuePoint[];
  readonly context: VerdictContext;
  /** full subgroups without any revenue, which have no ratio and no point */
  readonly withoutRevenue: number;
  /** accounts of the full subgroups that are in no sum */
  readonly withoutAmount: number;
  readonly negative: number;
  /** absent in datasets stored by an earlier version */
  readonly amounts: AmountReport | null;
  readonly currencies: readonly CurrencyCount[];
}

/** The limits of the answer, most particular first, the usual caution last. */
export function revenueCautions(facts: RevenueCautionFacts): string[] {
  const { judgement, points, context } = facts;
  const { chart, series, finding } = judgement;
  const list: string[] = [...context.readCautions, ...amountCautions(facts)];
  const concentrated = concentration(points);
  if (concentrated) list.push(concentrated);
  if (chart && finding !== 'too-few-points') {
    if (chart.baseline.provisional)
      list.push(
        `The usual level is provisional: it rests on ${counted(chart.baseline.last - chart.baseline.excluded.length, 'point')}, and 25 make it firm.`,
      );
    else if (chart.baseline.last >= chart.points.length)
      list.push('Every point helped to set the usual level, so a move had to stand out from its own effect on it.');
  }
  const neighbours = series?.neighbours;
  if (neighbours && Math.abs(neighbours.r1) > neighbours.limit && finding !== 'unsteady-baseline')
    list.push(
      `Neighbouring points ${neighbours.r1 > 0 ? 'go together' : 'pull apart'} more than chance would have them (autocorrelation ${neighbours.r1.toFixed(2)}), so flags mean a little less than stated.`,
    );
  const floor = chart?.points[0]?.lower;
  if (series && floor === 0)
    list.push('Points can reach zero by chance, so one low point alone can never flag a fall, only several together.');
  for (const signal of judgement.signals) {
    if (signal.speaks !== 'cut' || signal.state !== 'watching') continue;
    list.push(`About how the data is cut: ${signal.words}; ${cutAdvice(signal.test as 4 | 7 | 8)}.`);
  }
  if (context.asOf !== null && context.asOfInferred)
    list.push(
      `The data is taken to be complete through ${dayInWords(context.asOf)}, worked out from the file; correct it if it is not, since a wrong date makes young accounts look settled.`,
    );
  if (finding === 'risen' || finding === 'fallen')
    list.push('This says that something changed, not why; a before and after is no proof that any one action did it.');
  list.push(
    'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.',
  );
  return list;
}

function amountCautions({
  withoutAmount,
  negative,
  withoutRevenue,
  amounts,
  currencies,
  ...facts
}: RevenueCautionFacts): string[] {
  const list: string[] = [];
  const of = counted(
    facts.points.reduce((sum, { accounts }) => sum + accounts, 0),
    'account',
  );
  if (withoutAmount > 0) {
    const first = amounts?.firstUnreadable;
    list.push(
      `${counted(withoutAmount, 'account')} of ${of} ${withoutAmount === 1 ? 'has' : 'have'} no amount that can be read${first ? ` (line ${first.line} says “${first.value}”)` : ''} and ${withoutAmount === 1 ? 'is' : 'are'} in no sum of revenue.`,
    );
  }
  if (negative > 0)
    list.push(
      `${counted(negative, 'account')} of ${of} ${negative === 1 ? 'starts' : 'start'} with a negative amount and ${negative === 1 ? 'is' : 'are'} in no sum of revenue.`,
    );
  if (withoutRevenue > 0)
    list.push(
      `${counted(withoutRevenue, 'group')} of accounts had no revenue at the start, so there is no share to draw and ${withoutRevenue === 1 ? 'its point is' : 'their points are'} left out.`,
    );
  const unstated = currencies.find(({ currency }) => currency === null);
  const stated = currencies.flatMap(({ currency }) => (currency === null ? [] : [currency]));
  if (stated.length > 0 && unstated)
    list.push(
      `${counted(unstated.accounts, 'account')} ${unstated.accounts === 1 ? 'states' : 'state'} no currency and ${unstated.accounts === 1 ? 'is' : 'are'} taken to pay in ${listed(stated)} as the others.`,
    );
  else if (stated.length > 1) list.push(`${listed(stated)} are taken for the same currency.`);
  if (amounts && amounts.severalAtOnce > 0)
    list.push(
      `In ${counted(amounts.severalAtOnce, 'account')} a row begins while an earlier one still runs, at another amount; the later one is taken to replace the earlier, the two are not added up.`,
    );
  return list;
}

/** Points that hang on one account. */
function concentration(points: readonly RevenuePoint[]): string | null {
  const carried = points.map(({ largest, revenue }, i) => ({ point: i + 1, share: largest / revenue }));
  const heavy = carried.filter(({ share }) => share > CONCENTRATED).toSorted((a, b) => b.share - a.share);
  const most = heavy[0];
  if (!most) return null;
  const lost = heavy.filter(({ point }) => {
    const { largestLost, revenue } = points[point - 1] ?? { largestLost: 0, revenue: 1 };
    return largestLost / revenue > CONCENTRATED;
  });
  const left =
    lost.length === 0
      ? ''
      : ` In ${listed(lost.slice(0, 4).map(({ point }) => `point ${point}`))}${lost.length > 4 ? ' and others' : ''} such an account left.`;
  return `In ${heavy.length === points.length ? 'every point' : `${heavy.length} of ${counted(points.length, 'point')}`} one account carries more than a tenth of the revenue (${percent(most.share)} in point ${most.point}), so that a single departure moves it (a tenth: common practice, no source).${left}`;
}
