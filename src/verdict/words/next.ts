import { addMonths, type Day, dayInWords } from '../../days.ts';
import type { VerdictContext } from '../context.ts';
import { type Judgement, LEAST_POINTS } from '../judgement.ts';
import type { Since } from '../types.ts';
import { count, counted } from './format.ts';
import { stillNeeded } from './headline.ts';
import { viewWords } from './viewWords.ts';

/** When the next point will be there, as a sentence; null when there is no telling. */
export function nextPoint(context: VerdictContext): string | null {
  const { subgroupSize, waiting, nextPointOn, view } = context;
  if (view === 'calendar') {
    const last = context.dates.at(-1)?.lastStart ?? null;
    const month = context.withheld?.first ?? (last === null ? null : last + 1);
    return nextPointOn === null || month === null
      ? null
      : `The next point is ${viewWords(view).day(month)}, and can be read when the data is complete through ${dayInWords(nextPointOn)}.`;
  }
  if (subgroupSize === null || context.tenure === null) return null;
  const held = `The next point holds ${count(waiting)} of ${counted(subgroupSize, viewWords(view).one)} so far`;
  if (nextPointOn !== null) return `${held} and can be read after ${dayInWords(nextPointOn)}.`;
  const week = context.inflowPerWeek;
  if (week > 0)
    return `${held}; at the recent pace it fills in about ${counted(Math.max(1, (subgroupSize - waiting) / week), 'week')}.`;
  return `${held}.`;
}

/** What to do with the answer. */
export function nextSteps(judgement: Judgement, context: VerdictContext, since: Since | null): string[] {
  const steps: string[] = [];
  const words = viewWords(context.view);
  const due = nextPoint(context);
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      steps.push(
        since?.start != null
          ? `Look for what changed ${words.around(words.day(since.start))}${candidateDates(since, context)}: price, offer, channel, product, or how the export is made.`
          : 'Look for what changed around the first point of the stretch: price, offer, channel, product, or how the counts are made.',
      );
      steps.push(
        'Before a forecast, a bonus or a rollback rests on it, wait for the next point or check it on one group at a time.',
      );
      break;
    case 'steady':
      steps.push(
        judgement.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift')
          ? 'Do nothing yet: the next points will settle whether the flag lasts.'
          : 'Nothing calls for action on this figure; a single high or low point is what chance looks like.',
      );
      break;
    case 'mix-change':
      steps.push(
        context.view === 'renewal'
          ? SAME_AGE
          : 'Ask about one group at a time; a change in who joins calls for another answer than a change in who leaves.',
      );
      break;
    case 'mix-unclear':
      steps.push(
        context.view === 'renewal'
          ? SAME_AGE
          : `Ask about one group at a time${context.segmentValues[0] ? `, for example "has churn moved for ${context.segmentValues[0]}?"` : ''}.`,
      );
      break;
    case 'unsteady-baseline':
      steps.push(
        `Something changed within the stretch that sets the usual level, most likely after point ${judgement.steadiness!.splitAfter}${splitDate(judgement, context)}. Ask with a later start, or with a shorter baseline that ends before it.`,
      );
      if (context.view === 'renewal' || context.view === 'calendar') steps.push(SAME_AGE);
      break;
    case 'no-level':
      steps.push(
        context.view === undefined || context.view === 'start'
          ? 'Ask with more accounts a point, or at a later tenure point, so that there is a usual level to compare with.'
          : 'Ask by start, with more accounts a point or at a later tenure point, so that there is a usual level to compare with.',
      );
      break;
    case 'too-few-points':
      steps.push(...tooEarlySteps(context));
      break;
  }
  if (due && judgement.finding !== 'too-few-points') steps.push(due);
  return steps;
}

/** What holds the age of the accounts fixed, where accounts of every age are charted together. */
const SAME_AGE =
  'Ask by start (has churn moved?): it compares accounts at the same age, where young and old ones are mixed here.';

function candidateDates(since: Since, context: VerdictContext): string {
  const { day } = viewWords(context.view);
  const from = context.dates[since.candidates[0] - 1]?.firstStart ?? null;
  const to = context.dates[since.candidates[1] - 1]?.lastStart ?? null;
  if (from === null || to === null) return '';
  return ` (anything from ${day(from)} to ${day(to)} fits, with about 90 % confidence)`;
}

function splitDate(judgement: Judgement, context: VerdictContext): string {
  const words = viewWords(context.view);
  const day: Day | null = context.dates[judgement.steadiness!.splitAfter]?.firstStart ?? null;
  return day === null ? '' : ` (${words.since(words.day(day))})`;
}

/** A forecast further off than this is no help to anybody. */
const FARTHEST_DAYS = 5 * 365;

function tooEarlySteps(context: VerdictContext): string[] {
  if (context.view === 'calendar') return tooFewMonths(context);
  const needed = stillNeeded(context);
  if (context.tenure === null || needed === null) return ['Add more points, in time order.'];
  if (context.view === 'renewal') return [enoughRenewalsOn(needed, context)];
  const when = enoughOn(needed, context);
  return [
    when,
    `Until then any percentage of these accounts mostly says how young they are.${
      context.tenure === '1 month' ? '' : ' An earlier tenure point, such as 1 month, can be answered sooner.'
    }`,
  ];
}

/** When enough accounts will have matured: known where they have started already, else from the recent pace. */
function enoughOn(needed: number, context: VerdictContext): string {
  const day = context.maturedOn(context.matured + needed);
  if (day !== null) return `The accounts that have started already will be enough on ${dayInWords(day)}.`;
  if (context.inflowPerWeek <= 0 || context.asOf === null) return 'More accounts must start before it can be answered.';
  const days = (needed / context.inflowPerWeek) * 7;
  if (days > FARTHEST_DAYS)
    return 'At the recent pace of new accounts it cannot be answered within five years: ask with fewer accounts a point, or at an earlier tenure point.';
  return `At the recent pace of about ${counted(Math.max(1, context.inflowPerWeek), 'account')} a week reaching ${context.tenure}, that is around ${dayInWords(Math.round(context.asOf + days))}.`;
}

function tooFewMonths(context: VerdictContext): string[] {
  const steps = ['Ask by start (has churn moved?): points need not be months, so that there can be more of them.'];
  if (context.nextPointOn === null) return steps;
  const months = LEAST_POINTS - context.dates.length - 1;
  const enough = addMonths(context.nextPointOn + 1, months) - 1;
  return [`There will be ${LEAST_POINTS} months after ${dayInWords(enough)}.`, ...steps];
}

function enoughRenewalsOn(needed: number, context: VerdictContext): string {
  const day = context.maturedOn(context.matured + needed);
  if (day !== null) return `The renewals that are due already will be enough on ${dayInWords(day)}.`;
  if (context.inflowPerWeek <= 0 || context.asOf === null)
    return 'More renewals must come up before it can be answered.';
  const days = (needed / context.inflowPerWeek) * 7;
  if (days > FARTHEST_DAYS)
    return 'At the recent pace of renewals it cannot be answered within five years: ask with fewer renewals a point.';
  return `At the recent pace of about ${counted(Math.max(1, context.inflowPerWeek), 'renewal')} a week, that is around ${dayInWords(Math.round(context.asOf + days))}.`;
}
