import { dayInWords } from '../../days.ts';
import type { VerdictContext } from '../context.ts';
import type { Judgement } from '../judgement.ts';
import { LEAST_POINTS } from '../judgement.ts';
import type { PooledRate, Since } from '../types.ts';
import { count, counted, percent } from './format.ts';

/** "among Orchard accounts" or nothing. */
function whose(context: VerdictContext): string {
  return context.segment === null ? '' : ` for ${context.segment}`;
}

/** "lost within 3 months" or, for ready counts, just "lost". */
export function lostBy(context: VerdictContext): string {
  return context.tenure === null ? 'lost' : `lost within ${context.tenure}`;
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
  const since =
    facts.since === null
      ? ''
      : facts.since.start === null
        ? ` since about point ${facts.since.point}`
        : ` among accounts that started from about ${dayInWords(facts.since.start)}`;
  switch (judgement.finding) {
    case 'risen':
    case 'fallen':
      return `Churn has ${judgement.finding}${whose(context)}: about ${percent(facts.after!.rate)} are ${lostBy(context)}${since}, ${judgement.finding === 'risen' ? 'up' : 'down'} from the usual ${percent(facts.before!.rate)}.`;
    case 'steady': {
      const watching = judgement.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift');
      return `Churn is steady${whose(context)}: the usual ${percent(facts.center!)} are ${lostBy(context)}${watching ? ', with one thing to watch' : ''}.`;
    }
    case 'mix-change': {
      const mix = judgement.mix!;
      const grown = mix.largest.after > mix.largest.before;
      return `Churn is steady within each group${whose(context)}; the overall figure went from ${percent(facts.before!.rate)} to ${percent(facts.after!.rate)} because the mix moved: ${mix.largest.segment} ${grown ? 'grew' : 'shrank'} from ${percent(mix.largest.before)} to ${percent(mix.largest.after)} of the accounts.`;
    }
    case 'mix-unclear':
      return `Cannot say whether churn has moved${whose(context)}: the overall figure did, but the mix of groups moved with it, and they cannot be told apart in one chart.`;
    case 'unsteady-baseline':
      return `Cannot say whether churn has moved${whose(context)}: the stretch that should set the usual level was not steady itself.`;
    case 'no-level':
      return facts.center === 0
        ? `Cannot say whether churn has moved${whose(context)}: nobody was ${lostBy(context)} in the points that set the usual level.`
        : `Cannot say whether churn has moved${whose(context)}: everybody was ${lostBy(context)} in the points that set the usual level.`;
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
  const needed = stillNeeded(context);
  const have =
    context.matured === 0
      ? `no account has had ${context.tenure} to leave or stay`
      : `only ${counted(context.matured, 'account')} ${context.matured === 1 ? 'has' : 'have'} had ${context.tenure} to leave or stay`;
  return `Too early to say whether churn has moved${whose(context)}: ${have}; about ${count(needed ?? 0)} more are needed.`;
}
