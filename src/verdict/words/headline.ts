import type { VerdictContext } from '../context.ts';
import type { Judgement } from '../judgement.ts';
import { LEAST_POINTS } from '../judgement.ts';
import type { PooledRate, Since } from '../types.ts';
import { count, counted, percent } from './format.ts';
import { vagueStart } from './vagueStart.ts';
import { viewWords } from './viewWords.ts';

/** "among Orchard accounts" or nothing. */
function whose(context: VerdictContext): string {
  return context.segment === null ? '' : ` for ${context.segment}`;
}

/** "are lost within 3 months" or, for ready counts, just "are lost". */
function areLost({ tenure, view }: VerdictContext): string {
  return tenure === null ? 'are lost' : viewWords(view).areLost(tenure);
}

function nobodyLost({ tenure, view }: VerdictContext): string {
  return tenure === null ? 'nobody was lost' : viewWords(view).nobodyLost(tenure);
}

function everybodyLost({ tenure, view }: VerdictContext): string {
  return tenure === null ? 'everybody was lost' : viewWords(view).everybodyLost(tenure);
}

/** From when on: one date where it is known well, else the dates between which it lies. */
function sinceWords(since: Since | null, context: VerdictContext): string {
  if (since === null) return '';
  if (since.start === null) return ` since about point ${since.point}`;
  const words = viewWords(context.view);
  const range = vagueStart(since, context.dates);
  return range
    ? ` ${words.sinceWithin(words.day(range[0]), words.day(range[1]))}`
    : ` ${words.since(words.day(since.start))}`;
}

/** The verdict in one sentence, for someone who has never seen a control chart. */
export function headline(
  judgement: Judgement,
  context: VerdictContext,
  facts: {
    readonly since: Since | null;
    readonly before: PooledRate | null;
    readonly after: PooledRate | null;
    readonly center: number | null;
  },
): string {
  const words = viewWords(context.view);
  const since = sinceWords(facts.since, context);
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      return `Churn has ${judgement.finding}${whose(context)}: about ${percent(facts.after!.rate)} ${areLost(context)}${since}, ${judgement.finding === 'risen' ? 'up' : 'down'} from the usual ${percent(facts.before!.rate)}.`;
    case 'steady': {
      const watching = judgement.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift');
      return `Churn is steady${whose(context)}: the usual ${percent(facts.center!)} ${areLost(context)}${watching ? ', with one thing to watch' : ''}.`;
    }
    case 'mix-change': {
      const mix = judgement.mix!;
      const grown = mix.largest.after > mix.largest.before;
      return `Churn is steady within each group${whose(context)}; the overall figure went from ${percent(facts.before!.rate)} to ${percent(facts.after!.rate)} because the mix moved: ${mix.largest.segment} ${grown ? 'grew' : 'shrank'} from ${percent(mix.largest.before)} to ${percent(mix.largest.after)} of the ${words.one}s.`;
    }
    case 'mix-unclear':
      return `Cannot say whether churn has moved${whose(context)}: the overall figure did, but the mix of groups moved with it, and they cannot be told apart in one chart.`;
    case 'unsteady-baseline':
      return `Cannot say whether churn has moved${whose(context)}: the stretch that should set the usual level was not steady itself.`;
    case 'no-level':
      return `Cannot say whether churn has moved${whose(context)}: ${facts.center === 0 ? nobodyLost(context) : everybodyLost(context)} in the points that set the usual level.`;
    case 'too-few-points':
      return tooEarly(context);
  }
}

/** Accounts still missing until anything is judged; null for ready counts of unequal size. */
export function stillNeeded(context: VerdictContext): number | null {
  if (context.subgroupSize === null) return null;
  return Math.max(1, LEAST_POINTS * context.subgroupSize - context.matured);
}

function tooEarly(context: VerdictContext): string {
  if (context.tenure === null) {
    const have = context.dates.length;
    return `Too early to say whether churn has moved: ${counted(have, 'point')}, and at least ${LEAST_POINTS} are needed.`;
  }
  if (context.view === 'calendar') {
    const have = context.dates.length;
    const months =
      have === 0 ? 'there is no full month with customers yet' : `only ${counted(have, 'full month')} so far`;
    return `Too early to say whether churn has moved${whose(context)}: ${months}, and at least ${LEAST_POINTS} are needed.`;
  }
  const needed = stillNeeded(context);
  if (context.view === 'renewal') {
    const come =
      context.matured === 0
        ? 'no account has come up for a renewal'
        : `only ${counted(context.matured, 'renewal')} so far`;
    return `Too early to say whether churn has moved${whose(context)}: ${come}; about ${count(needed ?? 0)} more are needed.`;
  }
  const have =
    context.matured === 0
      ? `no account has had ${context.tenure} to leave or stay`
      : `only ${counted(context.matured, 'account')} ${context.matured === 1 ? 'has' : 'have'} had ${context.tenure} to leave or stay`;
  return `Too early to say whether churn has moved${whose(context)}: ${have}; about ${count(needed ?? 0)} more are needed.`;
}
