import { takeMonths } from '../../census/calendarCensus.ts';
import { calendarCautions } from '../../verdict/words/viewCautions.ts';
import { answerCensus } from './bySubgroups.ts';
import type { AskContext, Reached } from './types.ts';

/** Calendar months, for those who must report by them: the share of a month's customers who leave in it, each month with its own limits. */
export async function byCalendar(context: AskContext): Promise<Reached> {
  const { table, scope, resolved } = context;
  const { plan } = resolved;
  const census = await takeMonths(table, {
    tenure: plan.tenure,
    subgroupSize: plan.subgroupSize,
    view: 'calendar',
    ...scope,
  });
  const { subgroups, withheld, passed } = census;
  return answerCensus(context, {
    census,
    plan,
    tenure: 'a month',
    countedAt: context.clock(),
    howChosen: [],
    waiting: withheld && { accounts: withheld.customers, of: withheld.customers, on: withheld.last },
    cautions: calendarCautions({ sizes: subgroups.map(({ accounts }) => accounts), passed }),
    withheld,
  });
}
