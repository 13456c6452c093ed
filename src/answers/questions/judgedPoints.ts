import { tenureInWords } from '../../census/tenure.ts';
import type { Census, CensusPlan } from '../../census/types.ts';
import type { Chart } from '../../charts/types.ts';
import { chartAndJudge, isSubgroupKind } from '../../verdict/chartAndJudge.ts';
import type { Judgement } from '../../verdict/judgement.ts';
import type { PointDates } from '../../verdict/types.ts';
import { type ViewWords, viewWords } from '../../verdict/words/viewWords.ts';
import { readCautions } from '../readCautions.ts';
import type { SideContext } from './types.ts';

/** The points of lost shares that "has churn moved?" is judged from, and its judgement. */
export interface JudgedPoints {
  readonly chart: Chart;
  readonly judgement: Judgement;
  readonly dates: readonly PointDates[];
  readonly census: Census;
  readonly plan: CensusPlan;
  /** "3 months" */
  readonly tenure: string;
  /** " for Orchard" or nothing */
  readonly whose: string;
  readonly readCautions: readonly string[];
  /** how the census is spoken of: accounts by start, renewals, or calendar months */
  readonly view: ViewWords;
}

/**
 * The chart of lost shares behind the verdict; where the verdict rests on another kind of chart (gaps between losses, say), the shares are
 * charted beside it.
 * @returns the census alone when there is not one full point
 */
export async function judgedPoints(
  context: SideContext,
): Promise<
  JudgedPoints | { readonly chart: null; readonly census: Census; readonly tenure: string; readonly whose: string }
> {
  const answer = await context.ask();
  const plan = await context.plan();
  const { scope, table } = context;
  const whose = scope.segment === undefined ? '' : ` for ${scope.segment}`;
  const tenure = tenureInWords(answer.tenure ?? plan.tenure);
  const cautions = readCautions(table.report, scope.asOf);
  if (answer.chart && answer.judgement && answer.census && isSubgroupKind(answer.chart.kind)) {
    const { chart, judgement, dates, census } = answer;
    return {
      chart,
      judgement,
      dates,
      census,
      plan,
      tenure,
      whose,
      readCautions: cautions,
      view: viewWords(census.request.view),
    };
  }
  const census = await context.census();
  if (census.subgroups.length === 0) return { chart: null, census, tenure: tenureInWords(plan.tenure), whose };
  return {
    ...chartAndJudge({ counts: census.subgroups, segments: census.segments }),
    dates: census.subgroups.map(({ firstStart, lastStart, asOf }) => ({ firstStart, lastStart, asOf })),
    census,
    plan,
    tenure: tenureInWords(plan.tenure),
    whose,
    readCautions: cautions,
    view: viewWords(census.request.view),
  };
}
