import { firstDayOfMonth, monthOf, takeMonthFlows } from '../../census/monthFlows.ts';
import { tenureInWords } from '../../census/tenure.ts';
import { tenureShares } from '../../census/tenureShares.ts';
import type { Tenure } from '../../census/types.ts';
import { isoDay } from '../../days.ts';
import { drawPlate } from '../../picture/picture.ts';
import { reconcileAlt, reconcileScene } from '../../picture/questions/reconcile.ts';
import { type Candidate, type ReconcileFindings, reconcile } from '../../verdict/questions/reconcile/findings.ts';
import { reconcileWords, reportedWords } from '../../verdict/questions/reconcile/words.ts';
import { readCautions } from '../readCautions.ts';
import type { AnswerSide } from './types.ts';

/** Ages at which a figure may have been read, beside the usual one. */
const USUAL_TENURES: readonly Tenure[] = [1, 3, 6, 12].map((count) => ({ count, unit: 'month' }));

/** Which common calculation gives a figure somebody reported, and how far each is from the equal-tenure census. */
export const answerReconcile: AnswerSide<'reconcile'> = async (context, request) => {
  const { table, scope, subject } = context;
  const { report } = table;
  const { tenure } = await context.plan();
  const words = tenureInWords(tenure);
  const tenures = [tenure, ...USUAL_TENURES.filter((other) => tenureInWords(other) !== words)];
  const shares = await tenureShares(table, tenures, scope);
  const { cells, firstMonth, lastMonth } = await takeMonthFlows(table, scope);
  const findings = reconcile({
    rate: request.rate,
    decimals: request.decimals,
    month: request.month === undefined ? null : monthOf(request.month),
    cells,
    firstMonth,
    lastMonth,
    shares: shares.map((share) => ({ ...share, tenure: tenureInWords(share.tenure) })),
  });
  const reply = reconcileWords(findings, {
    segment: scope.segment ?? null,
    asOf: scope.asOf,
    asOfInferred: request.asOf === undefined && report.asOfSource !== 'given',
    readCautions: readCautions(report, scope.asOf),
  });
  const scene = (): Parameters<typeof drawPlate>[0] =>
    reconcileScene(findings, titleOf(findings), reply.headline, subject, scope.asOf);
  return {
    kind: 'reconcile',
    ...reply,
    figures: figures(findings),
    picture: context.picture ? await drawPlate(scene(), reconcileAlt(findings, reply.headline)) : null,
  };
};

function titleOf(findings: ReconcileFindings): string {
  const { giving } = findings.matched;
  const figure = reportedWords(findings);
  if (findings.candidates.length === 0) return 'Too little data to tell';
  if (giving.length === 0) return `Nothing gives ${figure}`;
  return giving.length === 1 ? `One calculation gives ${figure}` : `${giving.length} figures come to ${figure}`;
}

function figures(findings: ReconcileFindings): Record<string, unknown> {
  const { reported, decimals, named, candidates, matched, census, months } = findings;
  const told = (one: Candidate): Record<string, unknown> => ({
    way: one.way,
    period: one.period && {
      kind: one.period.kind,
      from: isoDay(firstDayOfMonth(one.period.first)),
      to: isoDay(firstDayOfMonth(one.period.last + 1) - 1),
    },
    tenure: one.tenure,
    value: one.value,
    lost: one.lost,
    over: one.over,
    fromReported: one.value - reported.rate,
    fromCensus: census ? one.value - census.value : null,
    gives: matched.giving.includes(one),
  });
  return {
    reported: { ...reported, decimals },
    month: named && { first: isoDay(firstDayOfMonth(named.month)), covered: named.kind === 'complete' },
    months: months && {
      from: isoDay(firstDayOfMonth(months.first)),
      to: isoDay(firstDayOfMonth(months.last + 1) - 1),
    },
    tried: candidates.length,
    byChance: matched.byChance,
    giving: matched.giving.map(told),
    nearest: matched.nearest.slice(0, 5).map(told),
    census: census && told(census),
    ways: candidates.map(told),
  };
}
