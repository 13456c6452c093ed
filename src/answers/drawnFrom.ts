import type { Judgement } from '../verdict/judgement.ts';
import type { PictureInput } from '../verdict/types.ts';

/** What a picture must say about a judgement, beside the verdict's own numbers. */
export function drawnFrom(judgement: Judgement): Pick<PictureInput, 'wouldSee' | 'split' | 'flagsExplained'> {
  const byMix = judgement.finding === 'mix-change';
  return {
    // Of a move that the mix explains the chart of all accounts says nothing; the words give what it could hide within the groups.
    wouldSee: byMix ? null : judgement.trust.wouldSee,
    split: judgement.finding === 'unsteady-baseline' ? { after: judgement.steadiness!.splitAfter } : null,
    ...(byMix ? { flagsExplained: 'explained by the moving mix' } : {}),
  };
}
