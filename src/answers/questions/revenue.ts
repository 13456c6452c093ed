import { drawPicture, drawPlate } from '../../picture/picture.ts';
import { type BesideRevenue, revenueAlt, revenueScene } from '../../picture/questions/revenue.ts';
import { revenueTotals } from '../../verdict/questions/revenue/pooled.ts';
import type { PictureInput } from '../../verdict/types.ts';
import { reachedByRevenue } from '../ask/byRevenue.ts';
import { type RevenueReading, readRevenue } from '../revenue/readRevenue.ts';
import { revenueFigures } from '../revenue/revenueFigures.ts';
import type { AnswerSide } from './types.ts';

/** Has revenue churn moved: the lost share of revenue on its chart, beside it contraction, expansion and the churn of accounts. */
export const answerRevenue: AnswerSide<'revenue'> = async (context, request) => {
  const { table, scope } = context;
  const plan = await context.plan();
  const ofAll = scope.segment !== undefined && !request.tenure ? { tenureOfAll: plan.tenure } : {};
  const reading = await readRevenue(table, request, scope, { plan, ...ofAll }, () => 0, await context.census());
  const { verdict } = reading;
  // Asked for on the revenue chart itself, the verdict on accounts would be this very answer again.
  const accounts = request.chart === 'individuals' ? null : (await context.ask()).verdict;
  const { headline, cautions, next } = verdict;
  const evidence = [...verdict.evidence, ...(accounts ? [`For comparison, by accounts: ${accounts.headline}`] : [])];
  return {
    kind: 'revenue',
    headline,
    evidence,
    cautions: [...viewCaution(request.view), ...cautions],
    next,
    figures: { ...revenueFigures(reading), accountsOutcome: accounts?.outcome ?? null },
    picture: context.picture ? await picture(reading, context.subject, scope.asOf) : null,
  };
};

function viewCaution(view: string | undefined): string[] {
  return view === undefined || view === 'start'
    ? []
    : ['Revenue is read in order of start, whatever the view: an amount at the start belongs to accounts of one age.'];
}

async function picture(reading: RevenueReading, subject: string, asOf: number) {
  const { drawn, chart, dates, signals, verdict } = reachedByRevenue(reading, subject, asOf);
  const input: PictureInput = { ...drawn, chart, dates, signals, verdict };
  const beside = besideOf(reading);
  return beside ? drawPlate(revenueScene(input, beside), revenueAlt(input, beside)) : drawPicture(input);
}

/** What is drawn below the chart; null where two points are not there to compare. */
function besideOf(reading: RevenueReading): BesideRevenue | null {
  if (reading.kind !== 'charted') return null;
  const { points, judgement, amountsChange } = reading;
  const totals = revenueTotals(points);
  const { chart } = judgement;
  if (!chart || !totals || points.length < 2) return null;
  return {
    movingRanges: chart.movingRanges,
    averageMovingRange: chart.averageMovingRange,
    rangeUpper: chart.rangeUpper,
    logo: points.map(({ lost, accounts }) => lost / accounts),
    contraction: amountsChange ? points.map(({ contraction, revenue }) => contraction / revenue) : null,
    expansion: amountsChange ? points.map(({ expansion, revenue }) => expansion / revenue) : null,
    totals,
  };
}
