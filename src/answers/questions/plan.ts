import { departuresByGroup } from '../../census/departures.ts';
import { hazardByMonth } from '../../census/hazard.ts';
import { assumedRate, riskyMonths } from '../../census/plan.ts';
import { rounded, SOON_POINTS } from '../../census/sizes.ts';
import { longestDays, tenureInWords, tenureMonthsOf } from '../../census/tenure.ts';
import { drawPlate } from '../../picture/picture.ts';
import { planAltText, planScene } from '../../picture/questions/plan.ts';
import { putIntoWords } from '../../requests/putIntoWords.ts';
import { groupPaces } from '../../verdict/questions/groupPaces.ts';
import { planFigures, planWords } from '../../verdict/questions/plan.ts';
import type { PlanFindings } from '../../verdict/questions/planFindings.ts';
import { type SizeQuestion, sizeOffers } from '../../verdict/questions/sizeOffers.ts';
import { measuredMonths, medianMonth, tenureMonths } from '../../verdict/questions/tenureMonths.ts';
import type { AnswerSide } from './types.ts';

/** Sizes are recommended for a halving, unless another move is named. */
const USUAL_MOVE = 0.5;

/** How should we count: the tenure point and the size that "has it moved?" uses, with what they rest on and what they cost in waiting. */
export const answerPlan: AnswerSide<'plan'> = async (context, request) => {
  const { table, scope, subject } = context;
  const { asOf, settleDays, segment } = scope;
  const plan = await context.plan();
  const census = await context.census();
  const counts = await hazardByMonth(table, asOf, settleDays, {
    whole: true,
    ...(segment === undefined ? {} : { segment }),
  });
  const { usual, risky } = riskyMonths(counts);
  const measured = measuredMonths(counts);
  const months = tenureMonths(measured, new Set(risky.map(({ month }) => month)));
  const groups = segment === undefined ? await departuresByGroup(table, asOf, settleDays) : [];
  const rate = assumedRate(plan.rate, census.matured);
  const move = request.move ?? USUAL_MOVE;
  const within = request.within ?? SOON_POINTS;
  const findings: PlanFindings = {
    tenure: tenureInWords(plan.tenure),
    tenureMonths: tenureMonthsOf(plan.tenure),
    tenureWhy: plan.tenureWhy,
    sizeWhy: plan.sizeWhy,
    subgroupSize: plan.subgroupSize,
    rate: plan.rate,
    assumedRate: rate,
    lost: Math.round(plan.rate * census.matured),
    matured: census.matured,
    immature: census.immature,
    inflowPerWeek: census.inflowPerWeek,
    move,
    moveAsked: request.move !== undefined || request.within !== undefined,
    within,
    ...offersFor(plan.rate, {
      rate,
      matured: census.matured,
      inflowPerWeek: census.inflowPerWeek,
      move,
      within,
      sizes: plan.sizes,
      subgroupSize: plan.subgroupSize,
      asked: request.subgroupSize !== undefined,
      usualMove: { move: USUAL_MOVE, within: SOON_POINTS },
      rounded,
    }),
    months,
    usualHazard: usual,
    medianMonth: medianMonth(measured),
    segmentColumn: table.report.columns.segment ?? null,
    ...(groups.length > 1
      ? groupPaces(groups, longestDays(plan.tenure))
      : { groups: [], logRank: null, earlyLogRank: null }),
  };
  const ask = putIntoWords({
    kind: 'ask',
    ...(request.segment ? { segment: request.segment } : {}),
    ...(request.tenure ? { tenure: request.tenure } : {}),
    ...(request.subgroupSize === undefined ? {} : { subgroupSize: request.subgroupSize }),
  });
  return {
    kind: 'plan',
    ...planWords(findings, ask),
    figures: { ...planFigures(findings), tenurePoint: plan.tenure },
    picture: context.picture ? await drawPlate(planScene(findings, subject, asOf), planAltText(findings)) : null,
  };
};

/** With nobody or everybody lost there is no rate that other sizes could be worked out for: only the one in use is told. */
function offersFor(rate: number, question: SizeQuestion): ReturnType<typeof sizeOffers> {
  const found = sizeOffers(question);
  return rate > 0 && rate < 1 ? found : { ...found, offers: found.offers.filter(({ chosen }) => chosen) };
}
