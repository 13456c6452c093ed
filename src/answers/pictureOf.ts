import type { Chart } from '../charts/types.ts';
import { drawPicture, type Picture } from '../picture/picture.ts';
import type { Judgement } from '../verdict/judgement.ts';
import type { PictureInput, PointDates, Verdict } from '../verdict/types.ts';

/** What was judged, and the words it was put into. */
export interface Judged {
  readonly chart: Chart | null;
  readonly dates: readonly PointDates[];
  readonly judgement: Judgement;
  readonly verdict: Verdict;
}

/** Draws a verdict: hands the picture the finished numbers, and what it must say about them. */
export function pictureOf(
  { chart, dates, judgement, verdict }: Judged,
  about: Pick<PictureInput, 'waiting' | 'immature' | 'measure' | 'subject' | 'asOf'>,
): Promise<Picture> {
  const byMix = judgement.finding === 'mix-change';
  return drawPicture({
    ...about,
    chart,
    dates,
    signals: judgement.signals,
    verdict,
    // Of a move that the mix explains the chart of all accounts says nothing; the words give what it could hide within the groups.
    wouldSee: byMix ? null : judgement.trust.wouldSee,
    split: judgement.finding === 'unsteady-baseline' ? { after: judgement.steadiness!.splitAfter } : null,
    ...(byMix ? { flagsExplained: 'explained by the moving mix' } : {}),
  });
}
