import { type Day, dayInWords } from '../../days.ts';
import type { VerdictContext } from '../context.ts';
import type { Judgement } from '../judgement.ts';
import type { Since } from '../types.ts';
import { count, counted } from './format.ts';
import { stillNeeded } from './headline.ts';

/** When the next point will be there, as a sentence; null when there is no telling. */
export function nextPoint(context: VerdictContext): string | null {
  const { subgroupSize, waiting, nextPointOn } = context;
  if (subgroupSize === null || context.tenure === null) return null;
  const held = `The next point holds ${count(waiting)} of ${counted(subgroupSize, 'account')} so far`;
  if (nextPointOn !== null) return `${held} and can be read after ${dayInWords(nextPointOn)}.`;
  const week = context.inflowPerWeek;
  if (week > 0)
    return `${held}; at the recent pace it fills in about ${counted(Math.max(1, (subgroupSize - waiting) / week), 'week')}.`;
  return `${held}.`;
}

/** What to do with the answer. */
export function nextSteps(judgement: Judgement, context: VerdictContext, since: Since | null): string[] {
  const steps: string[] = [];
  const due = nextPoint(context);
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      steps.push(
        since?.start != null
          ? `Look for what changed for accounts starting around ${dayInWords(since.start)}${candidateDates(since, context)}: price, offer, channel, product, or how the export is made.`
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
        'Ask about one group at a time; a change in who joins calls for another answer than a change in who leaves.',
      );
      break;
    case 'mix-unclear':
      steps.push(
        `Ask about one group at a time${context.segmentValues[0] ? `, for example "has churn moved for ${context.segmentValues[0]}?"` : ''}.`,
      );
      break;
    case 'unsteady-baseline':
      steps.push(
        `Something changed within the stretch that sets the usual level, most likely after point ${judgement.steadiness!.splitAfter}${splitDate(judgement, context)}. Ask with a later start, or with a shorter baseline that ends before it.`,
      );
      break;
    case 'no-level':
      steps.push(
        'Ask with more accounts a point, or at a later tenure point, so that there is a usual level to compare with.',
      );
      break;
    case 'too-few-points':
      steps.push(...tooEarlySteps(context));
      break;
  }
  if (due && judgement.finding !== 'too-few-points') steps.push(due);
  return steps;
}

function candidateDates(since: Since, context: VerdictContext): string {
  const from = context.dates[since.candidates[0] - 1]?.firstStart ?? null;
  const to = context.dates[since.candidates[1] - 1]?.lastStart ?? null;
  if (from === null || to === null) return '';
  return ` (anything from ${dayInWords(from)} to ${dayInWords(to)} fits, with about 90 % confidence)`;
}

function splitDate(judgement: Judgement, context: VerdictContext): string {
  const day: Day | null = context.dates[judgement.steadiness!.splitAfter]?.firstStart ?? null;
  return day === null ? '' : ` (accounts starting from about ${dayInWords(day)})`;
}

/** A forecast further off than this is no help to anybody. */
const FARTHEST_DAYS = 5 * 365;

function tooEarlySteps(context: VerdictContext): string[] {
  const needed = stillNeeded(context);
  if (context.tenure === null || needed === null) return ['Add more points, in time order.'];
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
