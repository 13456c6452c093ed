import { dayInWords, isoDay } from '../../../days.ts';
import { capitalised, count, counted, listed } from '../../words/format.ts';
import { viewWords } from '../../words/viewWords.ts';
import type { Explained, Step } from './types.ts';

/** From the rows of the file to the points. */
export function readSteps(from: Explained): Step[] {
  return [rowsRead(from), matured(from), points(from)].filter((step) => step !== null);
}

function rowsRead({ report }: Explained): Step | null {
  if (!report) return null;
  const { rows, accounts, mergedRows, rejected } = report;
  const left = rejected.reduce((sum, entry) => sum + entry.rows, 0);
  const reasons = rejected.map((entry) => `${count(entry.rows)} because ${entry.reason}`);
  return {
    title: 'Rows read',
    sentences: [
      `${capitalised(counted(rows, 'row'))} read, ${count(left)} left out by rule${left > 0 ? ` (${listed(reasons)})` : ''}, ${count(mergedRows)} joined to another row of the same account: ${counted(accounts, 'account')}.`,
    ],
    figures: { rows, leftOut: left, mergedRows, accounts },
  };
}

function matured({ census, tenure }: Explained): Step | null {
  // A month begins with whoever is a customer then, however young.
  if (!census || tenure === null || census.request.view === 'calendar') return null;
  const { matured: old, immature, request } = census;
  const settle = request.settleDays > 0 ? ` and ${counted(request.settleDays, 'day')} for late bookings` : '';
  if (request.view === 'renewal')
    return {
      title: 'Come due',
      sentences: [
        `${capitalised(counted(old, 'renewal'))} had come due by ${dayInWords(request.asOf)}, ${count(immature)} are still to come.`,
      ],
      figures: { asOf: isoDay(request.asOf), due: old, toCome: immature },
    };
  const whose = request.segment === undefined ? '' : ` of ${request.segment}`;
  return {
    title: 'Old enough',
    sentences: [
      `An account${whose} is counted, lost or not, once it has had ${tenure}${settle} by ${dayInWords(request.asOf)}: ${count(old)} have, ${count(immature)} are too young (${count(old)} + ${count(immature)} = ${count(old + immature)}).`,
    ],
    figures: { asOf: isoDay(request.asOf), matured: old, immature },
  };
}

function points({ census, chart, bySubgroups }: Explained): Step | null {
  if (!census || !chart || !bySubgroups) return null;
  const { matured: old, waiting, request } = census;
  const found = chart.points.length;
  const sizes = chart.points.map(({ accounts }) => accounts);
  const charted = sizes.reduce((sum, n) => sum + n, 0);
  const view = viewWords(request.view);
  const sum =
    chart.subgroupSize === null
      ? `${counted(found, 'point')} of ${count(Math.min(...sizes))} to ${counted(Math.max(...sizes), view.one)}`
      : `${counted(found, 'point')} of ${counted(chart.subgroupSize, view.one)}`;
  return {
    title: 'Points',
    sentences: [
      `${capitalised(view.order)} they are cut into ${sum}${request.view !== 'calendar' && chart.subgroupSize !== null ? `, and ${count(waiting)} wait for the next one (${count(found)} × ${count(chart.subgroupSize)} + ${count(waiting)} = ${count(charted + waiting)})` : ''}. A point’s value is its lost over its accounts.`,
    ],
    figures: { points: found, subgroupSize: chart.subgroupSize, charted, waiting, matured: old },
  };
}
