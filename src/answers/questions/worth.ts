import { amountPeriod } from '../../accounts/amountPeriod.ts';
import { hazardByMonth, type TenureCounts } from '../../census/hazard.ts';
import { type AmountScope, type MeanAmounts, meanAmounts } from '../../census/meanAmounts.ts';
import { tenureInWords, tenureMonthsOf } from '../../census/tenure.ts';
import { EbbError } from '../../errors.ts';
import { drawPlate } from '../../picture/picture.ts';
import { worthAltText, worthScene } from '../../picture/questions/worth.ts';
import { commonMonths, eraOf, type MonthlyAmount } from '../../verdict/questions/eraOf.ts';
import { oneCurrency } from '../../verdict/questions/revenue/currencies.ts';
import { worthFigures, worthWords } from '../../verdict/questions/worth.ts';
import type { AmountFindings, WorthFindings } from '../../verdict/questions/worthFindings.ts';
import type { Answer } from '../types.ts';
import type { AnswerSide, SideContext } from './types.ts';

/** What an account is worth: lifetimes at a constant hazard and from measured ones, now and before a move, with values when amounts are there. */
export const answerWorth: AnswerSide<'worth'> = async (context, request) => {
  const { table, scope, subject } = context;
  const { asOf, settleDays, segment } = scope;
  const answer = await answerOf(context);
  const verdict = answer?.verdict ?? null;
  const ofGroup = segment === undefined ? {} : { segment };
  // In another order than that of the starts, the day of a move divides renewals and not accounts.
  const byStart = request.view === undefined || request.view === 'start';
  const since = byStart && verdict?.before && verdict.after ? (verdict.since?.start ?? null) : null;
  // What the verdict has counted need not be counted again.
  const plan = (byStart ? answer?.plan : null) ?? (await context.plan());
  const census = (byStart ? answer?.census : null) ?? (await context.census());

  const { amount, monthly } = await amounts(context, ofGroup);
  const tenureMonths = tenureMonthsOf(plan.tenure);
  const hazardsOf = (started: Pick<AmountScope, 'startedFrom' | 'startedBefore'>): Promise<TenureCounts> =>
    hazardByMonth(table, asOf, settleDays, { ...ofGroup, ...started, whole: true });
  let eras: Pick<WorthFindings, 'now' | 'before' | 'common'>;
  if (since === null) {
    const counts = { lost: Math.round(plan.rate * census.matured), accounts: census.matured };
    eras = { now: eraOf(counts, tenureMonths, await hazardsOf({}), await monthly({})), before: null, common: null };
  } else {
    const [startedBefore, startedFrom] = [{ startedBefore: since }, { startedFrom: since }];
    const [before, now] = [await hazardsOf(startedBefore), await hazardsOf(startedFrom)];
    eras = {
      now: eraOf(verdict!.after!, tenureMonths, now, await monthly(startedFrom), before),
      before: eraOf(verdict!.before!, tenureMonths, before, await monthly(startedBefore)),
      common: commonMonths(now, before),
    };
  }
  const findings: WorthFindings = {
    tenure: tenureInWords(plan.tenure),
    tenureMonths,
    outcome: verdict?.outcome ?? null,
    since,
    ...eras,
    amount,
  };
  return {
    kind: 'worth',
    ...worthWords(findings),
    figures: worthFigures(findings),
    picture: context.picture ? await drawPlate(worthScene(findings, subject, asOf), worthAltText(findings)) : null,
  };
};

/** The verdict says where to split; where no chart fits, lifetimes are given all the same, for all accounts together. */
async function answerOf({ ask }: SideContext): Promise<Answer | null> {
  try {
    return await ask();
  } catch (error) {
    if (error instanceof EbbError && error.code === 'OPTION_INVALID') return null;
    throw error;
  }
}

/** What the amount column says, and the mean amount per month of the accounts of a time; null where there is none. */
async function amounts(
  { table, scope }: SideContext,
  ofGroup: AmountScope,
): Promise<{ amount: AmountFindings; monthly: (started: AmountScope) => Promise<MonthlyAmount | null> }> {
  const none = async (): Promise<null> => null;
  const column = table.report.columns.amount;
  if (column === undefined) return { amount: { kind: 'no-column' }, monthly: none };
  const until = scope.asOf - scope.settleDays;
  const all = await meanAmounts(table, until, ofGroup);
  const currency = oneCurrency(all.currencies);
  if (currency.kind === 'several')
    return {
      amount: { kind: 'currencies', currencies: all.currencies.map((one) => one.currency ?? 'none stated') },
      monthly: none,
    };
  if (all.mean === null || all.mean === 0)
    return { amount: { kind: 'unusable', column, reason: unusable(all) }, monthly: none };
  const period = amountPeriod(column);
  return {
    amount: {
      kind: 'amounts',
      column,
      currency: currency.currency,
      months: period.months,
      periodStated: period.stated,
      negative: all.negative,
      missing: all.missing,
      changed: all.changed,
    },
    monthly: async (started) => {
      const { mean, standardError, averaged } = await meanAmounts(table, until, { ...ofGroup, ...started });
      if (mean === null || mean === 0) return null;
      return { mean: mean / period.months, standardError: standardError / period.months, accounts: averaged };
    },
  };
}

function unusable({ averaged, negative }: MeanAmounts): 'unreadable' | 'negative' | 'zero' {
  if (averaged > 0) return 'zero';
  return negative > 0 ? 'negative' : 'unreadable';
}
