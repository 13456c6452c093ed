import { takeRenewals } from '../../census/renewalCensus.ts';
import { planRenewals } from '../../census/renewalPlan.ts';
import { tenureInWords } from '../../census/tenure.ts';
import { capitalised, counted } from '../../verdict/words/format.ts';
import { renewalCautions } from '../../verdict/words/viewCautions.ts';
import { answerCensus } from './bySubgroups.ts';
import type { AskContext, Reached } from './types.ts';

/** Renewals in order of their date, in equal subgroups: the share that is lost when a renewal comes. */
export async function byRenewal(context: AskContext): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const plan = await planRenewals(table, resolved.plan, {
    ...scope,
    ...(question.subgroupSize ? { subgroupSize: question.subgroupSize } : {}),
  });
  const { tenure, subgroupSize } = plan;
  const census = await takeRenewals(table, { tenure, subgroupSize, view: 'renewal', ...scope });
  const first = census.segments[0]?.accounts.reduce((sum, accounts) => sum + accounts, 0);
  const all = census.subgroups.length * subgroupSize;
  const words = tenureInWords(tenure);
  return answerCensus(context, {
    census,
    plan,
    tenure: words,
    countedAt: context.clock(),
    howChosen: [
      ...(census.matured > 0 && plan.rate === 0
        ? [`None of the ${counted(census.matured, 'renewal')} so far was lost.`]
        : []),
      ...(question.tenure ? [] : [`A renewal every ${words.replace(/^1 /, '')}: ${plan.tenureWhy}.`]),
      ...(question.subgroupSize ? [] : [`${capitalised(plan.sizeWhy)}.`]),
    ],
    waiting: { accounts: census.waiting, of: subgroupSize, on: census.nextPointOn },
    cautions: renewalCautions({
      tenure: words,
      given: question.tenure !== undefined,
      firstShare: first === undefined || all === 0 ? null : first / all,
      segmentColumn: table.report.segments.length > 1 && !scope.segment ? (table.report.columns.segment ?? null) : null,
    }),
  });
}
