import { type Day, dayInWords } from '../days.ts';
import { EbbError } from '../errors.ts';

/**
 * A named data-through date this far after anything that happened in the file is taken for a mistake; one that is nearer is believed, with a
 * caution. Our choice, no source.
 */
export const FARTHEST_AHEAD_DAYS = 366;

/**
 * Refuses a data-through date long after the file's last sign of life: every account of those weeks would count as one that stayed, and
 * churn would seem to fall.
 * @param inferred  the date worked out from the file itself
 * @throws EbbError AS_OF_TOO_LATE
 */
export function checkAsOf(asOf: Day, inferred: Day): void {
  const ahead = asOf - inferred;
  if (ahead <= FARTHEST_AHEAD_DAYS) return;
  throw new EbbError(
    'AS_OF_TOO_LATE',
    `the data cannot be complete through ${dayInWords(asOf)}: nothing in it happens after ${dayInWords(inferred)}`,
    `Give the last day the export really covers; left out, ${dayInWords(inferred)} is taken.`,
  );
}
