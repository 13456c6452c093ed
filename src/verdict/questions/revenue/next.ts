import { dayInWords } from '../../../days.ts';
import type { VerdictContext } from '../../context.ts';
import type { Since } from '../../types.ts';
import { nextPoint } from '../../words/next.ts';
import type { RevenueJudgement } from './judgeRevenue.ts';

/** What to do with the answer. */
export function revenueNext(
  { finding, signals, series }: RevenueJudgement,
  context: VerdictContext,
  since: Since | null,
): string[] {
  const due = nextPoint(context);
  const steps: string[] = [];
  switch (finding) {
    case 'risen':
    case 'fallen':
      steps.push(
        since?.start == null
          ? 'Look for what changed around the first point of the stretch, and whether a few large accounts are behind it.'
          : `Look for what changed for accounts starting around ${dayInWords(since.start)}, and whether a few large accounts are behind it.`,
        'Ask “has churn moved?” too: when accounts leave as before and revenue does not, it is the size of those who leave that changed.',
      );
      break;
    case 'steady':
      steps.push(
        signals.some(({ state, speaks }) => state === 'watching' && speaks === 'shift')
          ? 'Do nothing yet: the next points will settle whether the flag lasts.'
          : 'Nothing calls for action on this figure; a single high or low point is what the usual spread looks like.',
      );
      break;
    case 'unsteady-baseline': {
      const after = series?.checks?.splitAfter ?? 0;
      const day = context.dates[after]?.firstStart ?? null;
      steps.push(
        `Something changed within the stretch that sets the usual level, most likely after point ${after}${day === null ? '' : ` (accounts starting from about ${dayInWords(day)})`}. Ask with a shorter baseline that ends before it.`,
      );
      break;
    }
    case 'no-level':
      steps.push('Ask with more accounts a point, or at a later tenure point, so that the points can differ.');
      break;
    case 'too-few-points':
      steps.push(
        'Ask with fewer accounts a point or at an earlier tenure point, or wait until more accounts have got that far.',
      );
      break;
  }
  if (due) steps.push(due);
  return steps;
}
