import { EbbError } from '../../errors.ts';
import { bySubgroups } from './bySubgroups.ts';
import type { AskContext, Way } from './types.ts';

/**
 * The way that fits a question: the kind of chart and the view somebody insists on, else the one the data asks for.
 * @throws EbbError OPTION_INVALID for a kind or a view that does not go with the rest of the question
 */
export async function chooseWay({ question }: AskContext): Promise<Way> {
  const { chart, view } = question;
  if (view === 'renewal' || view === 'calendar') throw notYet(`the ${view} view`);
  switch (chart) {
    case undefined:
    case 'p':
    case 'p-prime':
      return bySubgroups;
    case 'individuals':
      return (await import('./byRevenue.ts')).byRevenue;
    default:
      throw notYet(`a chart of the kind ${chart}`);
  }
}

function notYet(what: string): EbbError {
  return new EbbError('OPTION_INVALID', `${what} is not there yet`, 'Leave it out, and the chart that fits is drawn.');
}
