import type { ReadReport } from '../accounts/types.ts';
import { type Day, dayInWords } from '../days.ts';
import { count, counted } from '../verdict/words/format.ts';

/** Days without any start or end before a named data-through date that call for a word. Our choice, no source. */
const SILENT_DAYS = 7;

/** A share of unusable rows above which the answer itself should carry the warning. Our choice, no source. */
const MANY_REJECTED = 0.02;

/** A share of returned accounts above which it matters how they are counted. Our choice, no source. */
const MANY_RETURNED = 0.005;

/** What reading the file leaves the reader of the verdict to know. */
export function readCautions(report: ReadReport, asOf: Day): string[] {
  const cautions: string[] = [];
  if (report.firstStart === report.lastStart && report.accounts > 1) {
    cautions.push(
      `All accounts started on one day, ${dayInWords(report.firstStart)}: there is no order in which they started, so nothing here can tell a change over time.`,
    );
  }
  if (asOf > report.inferredAsOf + SILENT_DAYS) {
    cautions.push(
      `You said that the data is complete through ${dayInWords(asOf)}, but nothing in it happens after ${dayInWords(report.inferredAsOf)}. If that is not so, young accounts look settled and churn seems to fall.`,
    );
  }
  const rejected = report.rejected.reduce((sum, entry) => sum + entry.rows, 0);
  if (rejected > report.rows * MANY_REJECTED) {
    cautions.push(
      `${count(rejected)} of ${counted(report.rows, 'row')} could not be used; the list of reasons is with what was read.`,
    );
  }
  if (report.returned > report.accounts * MANY_RETURNED) {
    cautions.push(
      `${counted(report.returned, 'account')} left and came back later; each counts once, as lost where it first left.`,
    );
  }
  return cautions;
}
