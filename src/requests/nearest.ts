import type { RequestContext } from './types.ts';

type Nearest = string | ((context: RequestContext) => string);

const set = (words: string): ReadonlySet<string> => new Set(words.split(' '));

/** Words of a stretch of the calendar; a bare year counts too. */
const WINDOWS = set(
  'last past previous recent this every ago during between before until till through window since after january february march april june july august september october november december jan feb mar apr jun jul aug sep sept oct nov dec',
);

const onePlan = (context: RequestContext): string =>
  context.segments.length > 0
    ? `I look at groups one at a time, or side by side when you ask “where has churn moved?”. Name one ${context.segmentColumn ?? 'group'} in the question: ${shortList(context.segments)}.`
    : 'This export has no column that tells groups apart, so I can only look at all accounts together.';

/** What is often asked for and not there yet, with the nearest thing that is. The first row with a word of the piece wins. */
const ROWS: readonly (readonly [ReadonlySet<string>, Nearest])[] = [
  [
    set('why because cause caused causes causing reason reasons explain explanation due driver drivers driving'),
    'A chart shows that something changed and about when, not why. I can say from which start date the change runs.',
  ],
  [
    set(
      'forecast predict prediction predicted projection project projected expect expected tomorrow future next coming',
    ),
    'I do not forecast. I can say whether churn has moved up to now, and how big a change I would have seen.',
  ],
  [
    set('who whom names name list email emails risk'),
    'I count accounts and never name them. I can say how many of a subgroup were lost.',
  ],
  [
    set('benchmark benchmarks industry average competitor competitors norm'),
    'I compare this business only with its own usual level. I can say whether churn has moved away from that.',
  ],
  [
    set('monthly weekly daily calendar mom yoy wow annual annually yearly quarterly'),
    'I read every account at one fixed age. Say the age, such as “at 1 month” or “at 12 months”, or ask for the calendar view with “by calendar month”.',
  ],
  [WINDOWS, 'I judge by when accounts started. Say the first start date you mean, such as “since 1 March 2025”.'],
  [
    set('renewal renewals renew renewed renewing'),
    'I count from the start of an account unless you say “by renewal date”; or say an age just after the renewal, such as “at 12 months”.',
  ],
  [
    set(
      'by per each every versus vs compare compared comparison split breakdown segment segments segmented where across',
    ),
    onePlan,
  ],
  [
    set('day days week weeks month months quarter quarters year years'),
    'I read churn at one age at a time. Say it as “at 6 months” or “at 90 days”.',
  ],
];

/** The nearest thing Ebbline can do for a piece of a sentence that found no use. */
export function nearestTo(words: readonly string[], context: RequestContext): string {
  for (const [known, nearest] of ROWS) {
    if (words.some((word) => known.has(word) || (known === WINDOWS && /^(19|2\d)\d\d$/.test(word))))
      return typeof nearest === 'string' ? nearest : nearest(context);
  }
  const segments =
    context.segments.length > 0 ? `, for one ${context.segmentColumn ?? 'group'} (${shortList(context.segments)})` : '';
  return `I can say whether churn has moved, at an age such as “at 6 months”${segments}, or since a start date.`;
}

/** For one month or quarter: why it has no churn of its own here. */
export const nearestPeriod =
  'The churn of a single month cannot be read: accounts are counted at one and the same age, in order of when they started, and the newest are too young to count. The last points of the chart are the newest there is to know; to judge from some start date on, say it, such as “since 1 March 2025”.';

/** The nearest thing for a group that was named and is not in the data. */
export const nearestSegment = onePlan;

function shortList(values: readonly string[]): string {
  const shown = values.slice(0, 8).map((value) => (value.length > 40 ? `${value.slice(0, 39)}…` : value));
  return values.length > shown.length
    ? `${shown.join(', ')} and ${values.length - shown.length} more`
    : shown.join(', ');
}
