import type { CensusView } from '../../census/types.ts';
import { type Day, dayInWords } from '../../days.ts';

/** How a point is spoken of in one view of the census: what it counts, and what its first and last day stand for. */
export interface ViewWords {
  /** what a point counts: "account" */
  readonly one: string;
  /** what several points add up to; a customer counts in every month it begins */
  readonly pooledOne: string;
  /** "in order of start" */
  readonly order: string;
  /** a point by its day: "12 March 2025", or "March 2025" where it is a month */
  readonly day: (day: Day) => string;
  /** who is in a stretch of points: "accounts that started 12 March 2025 to 9 June 2025" */
  readonly span: (from: string, to: string) => string;
  /** "among accounts that started from about 12 March 2025" */
  readonly since: (day: string) => string;
  /** the same, where the day is known only to lie within a range */
  readonly sinceWithin: (first: string, last: string) => string;
  /** "among accounts starting from 12 March 2025 on" */
  readonly from: (day: string) => string;
  /** "for accounts starting around 12 March 2025" */
  readonly around: (day: string) => string;
  /** on a picture, right after "began about 12 March 2025": what that day is; empty where it speaks for itself */
  readonly began: string;
  /** the share in a sentence: "are lost within 3 months" */
  readonly areLost: (tenure: string) => string;
  readonly nobodyLost: (tenure: string) => string;
  readonly everybodyLost: (tenure: string) => string;
  /** what is counted, as a picture names it: "lost within 3 months of starting" */
  readonly measure: (tenure: string) => string;
}

const START: ViewWords = {
  one: 'account',
  pooledOne: 'account',
  order: 'in order of start',
  day: dayInWords,
  span: (from, to) => `accounts that started ${from} to ${to}`,
  since: (day) => `among accounts that started from about ${day}`,
  sinceWithin: (first, last) => `among the newest accounts, since some time between ${first} and ${last}`,
  from: (day) => `among accounts starting from ${day} on`,
  around: (day) => `for accounts starting around ${day}`,
  began: 'accounts starting then',
  areLost: (tenure) => `are lost within ${tenure}`,
  nobodyLost: (tenure) => `nobody was lost within ${tenure}`,
  everybodyLost: (tenure) => `everybody was lost within ${tenure}`,
  measure: (tenure) => `lost within ${tenure} of starting`,
};

const RENEWAL: ViewWords = {
  one: 'renewal',
  pooledOne: 'renewal',
  order: 'in order of renewal date',
  day: dayInWords,
  span: (from, to) => `renewals due ${from} to ${to}`,
  since: (day) => `since about ${day}`,
  sinceWithin: (first, last) => `since some time between ${first} and ${last}`,
  from: (day) => `at renewals from ${day} on`,
  around: (day) => `for renewals around ${day}`,
  began: 'renewals due then',
  areLost: () => 'of renewals are lost',
  nobodyLost: () => 'no renewal was lost',
  everybodyLost: () => 'every renewal was lost',
  measure: (tenure) => `lost at a renewal, one every ${tenure.replace(/^1 /, '')}`,
};

const CALENDAR: ViewWords = {
  one: 'customer',
  pooledOne: 'customer-month',
  order: 'by calendar month',
  day: (day) => dayInWords(day).replace(/^\S+ /, ''),
  span: (from, to) => (from === to ? from : `${from} to ${to}`),
  since: (day) => `since about ${day}`,
  sinceWithin: (first, last) => `since some time between ${first} and ${last}`,
  from: (day) => `from ${day} on`,
  around: (day) => `around ${day}`,
  began: '',
  areLost: () => 'of customers are lost in a month',
  nobodyLost: () => 'no customer was lost',
  everybodyLost: () => 'every customer was lost',
  measure: () => 'lost in a calendar month, of the customers it began with',
};

const WORDS: Readonly<Record<CensusView, ViewWords>> = { start: START, renewal: RENEWAL, calendar: CALENDAR };

/** The words of a view; of the start view when none is named. */
export function viewWords(view: CensusView | undefined): ViewWords {
  return WORDS[view ?? 'start'];
}
