import { EbbError } from '../../errors.ts';
import { isSubgroupKind } from '../../verdict/chartAndJudge.ts';
import { bySubgroups } from './bySubgroups.ts';
import { rareLosses } from './rareLosses.ts';
import type { AskContext, Way } from './types.ts';

/**
 * The way that fits a question: the kind of chart and the view somebody insists on, else the one the data asks for.
 * @throws EbbError OPTION_INVALID for a kind or a view that does not go with the rest of the question
 */
export async function chooseWay(context: AskContext): Promise<Way> {
  const { chart, view } = context.question;
  if (view === 'renewal' || view === 'calendar') {
    if (!isSubgroupKind(chart ?? 'p')) throw unfit(view);
    return view === 'renewal'
      ? (await import('./byRenewal.ts')).byRenewal
      : (await import('./byCalendar.ts')).byCalendar;
  }
  switch (chart) {
    case 'g':
      return (await import('./byGaps.ts')).byLossesInOrder();
    case 't':
      return (await import('./byGaps.ts')).byLossesInTime;
    case 'p':
    case 'p-prime':
    case 'ewma':
      return bySubgroups;
    case 'cusum':
      return (await import('./byAccounts.ts')).byAccounts;
    case 'individuals':
      return (await import('./byRevenue.ts')).byRevenue;
    default: {
      const rare = await rareLosses(context);
      return rare === null ? bySubgroups : (await import('./byGaps.ts')).byLossesInOrder(rare);
    }
  }
}

function unfit(view: string): EbbError {
  return new EbbError(
    'OPTION_INVALID',
    `by ${view === 'renewal' ? 'renewal' : 'calendar month'} there are only shares to chart, on a p or a p-prime chart`,
    'Leave out the kind of chart, or ask by start.',
  );
}
