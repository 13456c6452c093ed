import type { Day } from '../../days.ts';
import type { EarlyDrawing } from '../../picture/questions/early.ts';
import { sumPath } from './sumPath.ts';
import type { Watched } from './watchAccounts.ts';

/** Dates below the picture: one more than this. */
const DATES = 4;

/** What the picture of both sums is drawn from. */
export function earlyDrawing(
  { watch, losses, accounts, startOf, rise, fall }: Watched,
  found: EarlyDrawing['found'],
  subject: string,
  asOf: Day,
): EarlyDrawing {
  const places = Array.from({ length: DATES + 1 }, (_, i) => Math.max(1, Math.round((accounts * i) / DATES)));
  return {
    found,
    rise: sumPath(watch.rise, losses, accounts, rise),
    fall: sumPath(watch.fall, losses, accounts, fall),
    starts: [...new Set(places)].map((place) => ({ place, start: startOf(place) })),
    subject,
    asOf,
  };
}
