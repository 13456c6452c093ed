import { tenureInWords } from '../../census/tenure.ts';
import { emptyJudgement } from '../emptyJudgement.ts';
import { readRevenue } from '../revenue/readRevenue.ts';
import type { AskContext, Reached } from './types.ts';

/** The lost share of revenue in the same subgroups, on an individuals chart. */
export async function byRevenue(context: AskContext): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const reading = await readRevenue(table, question, scope, resolved, context.clock);
  const { census, plan, countedAt, verdict } = reading;
  const charted = reading.kind === 'charted' ? reading : null;
  const { chart = null, signals = [], trust = emptyJudgement().trust, series = null } = charted?.judgement ?? {};
  return {
    verdict,
    chart,
    dates: charted?.dates ?? [],
    signals,
    trust,
    judgement: null,
    census,
    plan,
    drawn: {
      wouldSee: trust.wouldSee,
      split:
        charted?.judgement.finding === 'unsteady-baseline' && series?.checks
          ? { after: series.checks.splitAfter }
          : null,
      waiting: { accounts: census.waiting, of: plan.subgroupSize, on: census.nextPointOn },
      immature: census.immature,
      measure: `revenue lost within ${tenureInWords(plan.tenure)} of starting`,
      subject: scope.segment === undefined ? context.subject : `${context.subject}, ${scope.segment}`,
      asOf: scope.asOf,
    },
    countedAt,
  };
}
