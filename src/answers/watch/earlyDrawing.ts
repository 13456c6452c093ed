import type { Day } from '../../days.ts';
import type { EarlyDrawing } from '../../picture/questions/early.ts';
import { sumPath } from './sumPath.ts';
import type { Watched } from './watchAccounts.ts';

/** Dates below the picture: one more than this. */
const DATES = 4;
/** Losses that can be told apart in the picture: of a long watch only the newest stretch is drawn, and all of a climb that goes on. */
const LOSSES_DRAWN = 400;

/** What the picture of both sums is drawn from. */
export function earlyDrawing(
  { watch, losses, accounts, startOf, rise, fall }: Watched,
  found: EarlyDrawing['found'],
  subject: string,
  asOf: Day,
): EarlyDrawing {
  const climbs = [rise, fall].filter((trace, i) => trace.value >= 0.5 * [watch.rise, watch.fall][i]!.limit);
  const from = Math.min(losses.at(-LOSSES_DRAWN - 1) ?? 0, ...climbs.map(({ zeroAfter }) => zeroAfter));
  const places = Array.from({ length: DATES + 1 }, (_, i) =>
    Math.max(1, Math.round(from + ((accounts - from) * i) / DATES)),
  );
  return {
    found,
    from,
    rise: sumPath(watch.rise, losses, { from, to: accounts }, rise),
    fall: sumPath(watch.fall, losses, { from, to: accounts }, fall),
    starts: [...new Set(places)].map((place) => ({ place, start: startOf(place) })),
    subject,
    asOf,
  };
}
