import { tenureInWords } from '../../census/tenure.ts';
import { emptyJudgement } from '../emptyJudgement.ts';
import { type RevenueReading, readRevenue } from '../revenue/readRevenue.ts';
import type { AskContext, Reached } from './types.ts';

/** The lost share of revenue in the same subgroups, on an individuals chart. */
export async function byRevenue(context: AskContext): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const reading = await readRevenue(table, question, scope, resolved, context.clock);
  const subject = scope.segment === undefined ? context.subject : `${context.subject}, ${scope.segment}`;
  return reachedByRevenue(reading, subject, scope.asOf);
}

/** @param subject  what the picture calls the data, the group that was named included */
export function reachedByRevenue(reading: RevenueReading, subject: string, asOf: number): Reached {
  const { census, plan, countedAt, verdict } = reading;
  const judged = reading.kind === 'charted' ? reading.judgement : null;
  const { trust = emptyJudgement().trust, series = null, finding } = judged ?? {};
  return {
    verdict,
    chart: judged?.chart ?? null,
    dates: reading.kind === 'charted' ? reading.dates : [],
    signals: judged?.signals ?? [],
    trust,
    judgement: null,
    census,
    plan,
    drawn: {
      wouldSee: trust.wouldSee,
      split: finding === 'unsteady-baseline' && series?.checks ? { after: series.checks.splitAfter } : null,
      waiting: { accounts: census.waiting, of: plan.subgroupSize, on: census.nextPointOn },
      immature: census.immature,
      measure: `revenue lost within ${tenureInWords(plan.tenure)} of starting`,
      subject,
      asOf,
    },
    countedAt,
  };
}
