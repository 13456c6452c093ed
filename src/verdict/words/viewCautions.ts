import { count, counted } from './format.ts';

/** Sizes further from their mean than this call for a word. Common practice, no source. */
const UNEQUAL = 0.25;

/** What a reader of the calendar view must keep in mind. */
export function calendarCautions(facts: {
  /** customers each month began with */
  readonly sizes: readonly number[];
  /** accounts that came and went within one month */
  readonly passed: number;
}): string[] {
  const { sizes, passed } = facts;
  const cautions = [
    'Calendar months mix young and old accounts, which leave at different rates, so the figure can move by that mix alone; by start, accounts are compared at the same age.',
  ];
  const mean = sizes.reduce((sum, size) => sum + size, 0) / sizes.length;
  if (sizes.some((size) => Math.abs(size - mean) > UNEQUAL * mean)) {
    cautions.push(
      `The months begin with ${count(Math.min(...sizes))} to ${counted(Math.max(...sizes), 'customer')}, some more than 25 % from their mean (common practice, no source): compare a point with its own limits, not with its neighbours.`,
    );
  }
  if (passed > 0) {
    cautions.push(
      `${counted(passed, 'account')} came and went within one calendar month and ${passed === 1 ? 'is' : 'are'} in none of these figures.`,
    );
  }
  return cautions;
}

/**
 * What a reader of the renewal view must keep in mind.
 * @param tenure  time from one renewal to the next: "3 months"
 */
export function renewalCautions(facts: {
  readonly tenure: string;
  readonly given: boolean;
  readonly firstShare: number | null;
  readonly segmentColumn: string | null;
}): string[] {
  const { tenure, given, firstShare, segmentColumn } = facts;
  const each = tenure.replace(/^1 /, '');
  const cautions = [
    `The export holds no renewals: one is taken to come every ${each} after an account’s start, and whoever leaves in between counts at the next.${
      given
        ? ''
        : ` Name the interval if yours is another: “by renewal at ${tenure === '12 months' ? '1 month' : '12 months'}”.`
    }`,
  ];
  if (firstShare !== null) {
    cautions.push(
      `First and later renewals are charted together (${Math.round(firstShare * 100)} % are first ones), so the figure can move only because later ones become more; by start, only first ones count.`,
    );
  }
  if (segmentColumn !== null)
    cautions.push(`Groups in "${segmentColumn}" are not compared in this view; ask about one of them to be sure.`);
  return cautions;
}
