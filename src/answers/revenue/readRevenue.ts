import type { AccountTable } from '../../accounts/types.ts';
import { takeCensus } from '../../census/census.ts';
import { type RevenueCensus, type RevenueSubgroup, takeRevenue } from '../../census/revenue.ts';
import { tenureInWords } from '../../census/tenure.ts';
import type { Census, CensusPlan } from '../../census/types.ts';
import type { Scope } from '../../requests/types.ts';
import type { VerdictContext } from '../../verdict/context.ts';
import { oneCurrency } from '../../verdict/questions/revenue/currencies.ts';
import { judgeRevenue, type RevenueJudgement } from '../../verdict/questions/revenue/judgeRevenue.ts';
import { type RevenueRefusal, refuseRevenue } from '../../verdict/questions/revenue/refusal.ts';
import { type RevenueVerdict, writeRevenue } from '../../verdict/questions/revenue/verdict.ts';
import type { PointDates, Verdict } from '../../verdict/types.ts';
import { chooseBaseline, maturedOn } from '../ask/bySubgroups.ts';
import { howChosen } from '../ask/howChosen.ts';
import type { ResolvedPlan, ResolvedScope } from '../ask/scope.ts';
import { readCautions } from '../readCautions.ts';

interface Counted {
  readonly census: Census;
  readonly plan: CensusPlan;
  /** clock reading when the counting was done */
  readonly countedAt: number;
  readonly revenue: RevenueCensus;
}

/** Revenue churn of the export: charted and judged, or why it cannot be. */
export type RevenueReading = Counted &
  (
    | { readonly kind: 'refused'; readonly refusal: RevenueRefusal; readonly verdict: Verdict }
    | {
        readonly kind: 'charted';
        /** subgroups with revenue, in time order: the points */
        readonly points: readonly RevenueSubgroup[];
        readonly dates: readonly PointDates[];
        readonly judgement: RevenueJudgement;
        readonly verdict: RevenueVerdict;
        readonly currency: string | null;
        readonly amountsChange: boolean;
      }
  );

/**
 * Counts, charts and judges revenue churn in the subgroups that "has churn moved?" would use.
 * @param known  that census, when it has been taken already
 */
export async function readRevenue(
  table: AccountTable,
  asked: Scope,
  scope: ResolvedScope,
  resolved: ResolvedPlan,
  clock: () => number,
  known?: Census,
): Promise<RevenueReading> {
  const { report } = table;
  const { plan } = resolved;
  const request = { tenure: plan.tenure, subgroupSize: plan.subgroupSize, view: 'start' as const, ...scope };
  const census = known ?? (await takeCensus(table, request));
  const revenue = await takeRevenue(table, request);
  const done: Counted = { census, plan, revenue, countedAt: clock() };
  const cautions = readCautions(report, scope.asOf);
  const currency = oneCurrency(revenue.currencies);
  const refusal = whyNot(table, revenue, currency.kind === 'several');
  if (refusal) return { ...done, kind: 'refused', refusal, verdict: refuseRevenue(refusal, cautions) };

  const points = revenue.subgroups.filter((subgroup) => subgroup.revenue > 0);
  const dates = points.map(({ firstStart, lastStart, asOf }) => ({ firstStart, lastStart, asOf }));
  const { baseline, caution } = chooseBaseline(asked, { ...census, subgroups: points });
  const judgement = judgeRevenue(points, revenue.amounts, baseline.baselineLast);
  const amountsChange = points.some(({ contraction, expansion }) => contraction > 0 || expansion > 0);
  const context: VerdictContext & { tenure: string } = {
    tenure: tenureInWords(plan.tenure),
    dates,
    subgroupSize: plan.subgroupSize,
    accounts: report.accounts,
    matured: census.matured,
    waiting: census.waiting,
    immature: census.immature,
    nextPointOn: census.nextPointOn,
    maturedOn: (accounts) => maturedOn(census, accounts),
    inflowPerWeek: census.inflowPerWeek,
    asOf: scope.asOf,
    asOfInferred: asked.asOf === undefined && report.asOfSource !== 'given',
    segmentColumn: report.columns.segment ?? null,
    segment: scope.segment ?? null,
    segmentValues: [],
    howChosen: howChosen(asked, resolved),
    readCautions: [...caution, ...cautions],
  };
  const total = (of: (subgroup: RevenueSubgroup) => number): number =>
    revenue.subgroups.reduce((sum, subgroup) => sum + of(subgroup), 0);
  const verdict = writeRevenue({
    judgement,
    points,
    amountsChange,
    context,
    withoutRevenue: revenue.subgroups.length - points.length,
    withoutAmount: total(({ withoutAmount }) => withoutAmount),
    negative: total(({ negative }) => negative),
    amounts: report.amounts ?? null,
    currencies: revenue.currencies,
  });
  return {
    ...done,
    kind: 'charted',
    points,
    dates,
    judgement,
    verdict,
    currency: currency.kind === 'one' ? currency.currency : null,
    amountsChange,
  };
}

function whyNot({ report }: AccountTable, revenue: RevenueCensus, several: boolean): RevenueRefusal | null {
  const column = report.columns.amount;
  if (column === undefined) return { kind: 'no-column' };
  if (several)
    return {
      kind: 'currencies',
      currencies: revenue.currencies,
      segmentColumn: report.columns.segment ?? null,
    };
  if (revenue.subgroups.length === 0 || revenue.subgroups.some((subgroup) => subgroup.revenue > 0)) return null;
  const all = revenue.subgroups.reduce((sum, { accounts }) => sum + accounts, 0);
  const without = revenue.subgroups.reduce((sum, { withoutAmount }) => sum + withoutAmount, 0);
  const negative = revenue.subgroups.reduce((sum, one) => sum + one.negative, 0);
  if (without === all)
    return { kind: 'nothing-readable', column, example: report.amounts?.firstUnreadable?.value ?? null };
  return { kind: negative > 0 ? 'all-negative' : 'all-zero', column };
}
