import { dayInWords } from '../../days.ts';
import { LEAST_POINTS } from '../judgement.ts';
import { counted, percent } from '../words/format.ts';
import type { GapFacts } from './facts.ts';
import { lostBy, pace, whose } from './phrases.ts';

/** The verdict in one sentence, for someone who has never seen a control chart. */
export function gapHeadline(facts: GapFacts): string {
  const { judgement, context, since } = facts;
  const { finding, usual, before, after } = judgement;
  const { kind } = context;
  switch (finding) {
    case 'risen':
    case 'fallen': {
      const up = finding === 'risen' ? 'up' : 'down';
      if (kind === 't') {
        const when =
          since?.start == null ? ` since about gap ${since!.point}` : ` since about ${dayInWords(since.start)}`;
        return `Churn has ${finding}${whose(context)}: about ${pace(after!.rate)}${when}, ${up} from the usual ${pace(before!.rate)}.`;
      }
      const when =
        since?.start == null
          ? ` since about gap ${since!.point}`
          : ` among accounts that started from about ${dayInWords(since.start)}`;
      return `Churn has ${finding}${whose(context)}: about ${percent(after!.rate)} are ${lostBy(context)}${when}, ${up} from the usual ${percent(before!.rate)}.`;
    }
    case 'steady': {
      const watching = judgement.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift');
      const usually =
        kind === 'g'
          ? `the usual ${percent(usual!.rate)} are ${lostBy(context)}`
          : `the usual pace is ${pace(usual!.rate)}`;
      return `Churn is steady${whose(context)}: ${usually}${watching ? ', with one thing to watch' : ''}.`;
    }
    case 'unsteady-baseline':
      return `Cannot say whether churn has moved${whose(context)}: the stretch that should set the usual level was not steady itself.`;
    case 'no-level':
      return kind === 'g'
        ? `Cannot say whether churn has moved${whose(context)}: every account was ${lostBy(context)} in the gaps that set the usual level.`
        : `Cannot say whether churn has moved${whose(context)}: the losses that set the usual level all fall on one day.`;
    case 'too-few':
      return `Too early to say whether churn has moved${whose(context)}: ${lossesSoFar(facts)}; at least ${LEAST_POINTS} losses are needed.`;
  }
}

/** "only 7 of 1,204 accounts were lost within 3 months", "only 7 losses in 420 days". */
function lossesSoFar({ context }: GapFacts): string {
  const { losses, accounts, watched } = context;
  const only = losses === 0 ? 'none' : `only ${losses}`;
  if (accounts !== null)
    return accounts === 0
      ? `no account has had ${context.tenure} to leave or stay`
      : `${only} of ${counted(accounts, 'account')} ${losses === 1 ? 'was' : 'were'} ${lostBy(context)}`;
  if (watched)
    return `${losses === 0 ? 'nobody was' : `${only} ${losses === 1 ? 'account was' : 'accounts were'}`} ${lostBy(context)} in ${counted(watched.to - watched.from, 'day')}`;
  return `there are ${losses === 1 ? '1 gap' : `${losses} gaps`} between losses`;
}
