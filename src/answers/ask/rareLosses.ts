import { lastMaturedStart } from '../../census/tenure.ts';
import { yearlyInflow } from '../../census/yearlyInflow.ts';
import { count } from '../../verdict/words/format.ts';
import type { AskContext } from './types.ts';

/**
 * Why losses are too rare to be counted per group of accounts: five expected losses a point (common practice, no source) take more accounts
 * than a year brings.
 * @returns the beginning of a sentence, or null when a p chart fits
 */
export async function rareLosses({ table, question, scope, resolved }: AskContext): Promise<string | null> {
  const { plan } = resolved;
  // Whoever fixes how many accounts make a point wants them counted per point; and where nobody was lost there is no gap either.
  // Where most are lost it is those who stay that are rare, and gaps between losses say nothing.
  if (question.subgroupSize !== undefined || plan.rate <= 0 || plan.rate > 0.5) return null;
  const wanted = plan.sizes.fiveLosses;
  const until = lastMaturedStart(scope.asOf, plan.tenure, scope.settleDays);
  const year = await yearlyInflow(table, until, scope.segment);
  if (wanted <= year) return null;
  return `Losses are rare here: a point with five of them would take about ${count(wanted)} accounts, and a year brings about ${count(year)}. So`;
}
