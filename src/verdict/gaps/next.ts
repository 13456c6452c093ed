import { dayInWords } from '../../days.ts';
import { LEAST_POINTS } from '../judgement.ts';
import { counted } from '../words/format.ts';
import type { GapFacts } from './facts.ts';
import { gapLength } from './phrases.ts';

/** A forecast further off than this is no help to anybody. */
const FARTHEST_DAYS = 5 * 365;

/** What to do with the answer. */
export function gapNext(facts: GapFacts): string[] {
  const { judgement, context, since } = facts;
  const { kind } = context;
  const steps: string[] = [];
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      steps.push(
        since?.start != null
          ? `Look for what changed ${kind === 'g' ? 'for accounts starting around' : 'around'} ${dayInWords(since.start)}${candidates(facts)}: price, offer, channel, product, or how the export is made.`
          : 'Look for what changed around the first gap of the stretch: price, offer, channel, product, or how the counts are made.',
      );
      steps.push('Before a forecast, a bonus or a rollback rests on it, wait for a few more losses.');
      break;
    case 'steady':
      steps.push(
        judgement.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift')
          ? 'Do nothing yet: the next losses will settle whether the flag lasts.'
          : 'Nothing calls for action on this figure; a single long or short gap is what chance looks like.',
      );
      steps.push(...sinceLastLoss(facts));
      break;
    case 'unsteady-baseline':
      steps.push(
        `Something changed within the stretch that sets the usual level${splitPlace(facts)}. Ask with a baseline that ends before it.`,
      );
      break;
    case 'no-level':
      steps.push('Ask with a p chart, which counts losses per group of accounts.');
      break;
    case 'too-few':
      steps.push(enoughOn(facts));
      if (context.tenure !== null && context.tenure !== '12 months')
        steps.push(
          'A later tenure point, such as 12 months, has more losses to go by, but takes longer to be reached.',
        );
      break;
  }
  return steps;
}

function candidates({ since, context }: GapFacts): string {
  const from = context.dates[since!.candidates[0] - 1]?.firstStart ?? null;
  const to = context.dates[since!.candidates[1] - 1]?.lastStart ?? null;
  if (from === null || to === null) return '';
  return ` (anything from ${dayInWords(from)} to ${dayInWords(to)} fits, with about 90 % confidence)`;
}

/** How far the unfinished gap is from standing out. */
function sinceLastLoss({ judgement, context }: GapFacts): string[] {
  const { chart, byPower } = judgement;
  const upper = chart?.points[0]?.upper;
  // Of ready gaps nobody knows how long it has been since the last loss.
  if (upper === undefined || byPower || context.open > upper || context.tenure === null) return [];
  const kept = context.kind === 'g' ? `${counted(context.open, 'account')} kept` : gapLength('t', context.open);
  return [
    `Since the last loss: ${kept}. From ${gapLength(context.kind, Math.floor(upper) + 1)} without a loss on, that alone would stand out as a fall.`,
  ];
}

function splitPlace({ judgement, context }: GapFacts): string {
  if (judgement.series?.kind !== 'judged' || !judgement.series.checks) return '';
  const after = judgement.series.checks.splitAfter;
  const day = context.dates[after]?.firstStart ?? null;
  return `, most likely after gap ${after}${day === null ? '' : ` (${context.kind === 'g' ? 'accounts starting from ' : ''}about ${dayInWords(day)})`}`;
}

/** When there will be enough losses, at the pace so far. */
function enoughOn({ judgement, context }: GapFacts): string {
  const { kind, losses, asOf, inflowPerWeek, tenure } = context;
  if (tenure === null) return `Add more gaps, in time order; ${LEAST_POINTS} at least.`;
  const perDay = judgement.usual
    ? kind === 't'
      ? judgement.usual.rate
      : (judgement.usual.rate * inflowPerWeek) / 7
    : 0;
  const needed = LEAST_POINTS - losses;
  if (perDay <= 0 || asOf === null)
    return 'Nobody can say when there will be enough: it takes losses to tell how often they come.';
  const days = needed / perDay;
  if (days > FARTHEST_DAYS)
    return 'At the pace so far it cannot be answered within five years: losses are too rare for any chart to see them move.';
  return `At the pace so far, ${counted(needed, 'more loss', 'more losses')} will take until around ${dayInWords(Math.round(asOf + days))}.`;
}
