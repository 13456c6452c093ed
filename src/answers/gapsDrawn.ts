import type { GapContext, GapJudgement } from '../verdict/gaps/types.ts';
import type { PictureInput, PooledRate } from '../verdict/types.ts';

/** All the picture of gaps needs beside the chart, its dates, its signals and the verdict. */
export function gapsDrawn(
  judgement: GapJudgement,
  context: GapContext,
  names: { readonly measure: string; readonly subject: string },
): Omit<PictureInput, 'chart' | 'dates' | 'signals' | 'verdict'> {
  const { series, finding, before, after, trust } = judgement;
  const split = finding === 'unsteady-baseline' && series?.kind === 'judged' ? series.checks : null;
  return {
    ...names,
    waiting: null,
    // Days are watched, not accounts: there is none too young for them.
    immature: context.kind === 't' ? 0 : context.immature,
    asOf: context.asOf,
    wouldSee: trust.wouldSee,
    split: split ? { after: split.splitAfter } : null,
    ...(before && after ? { levels: { before: gapAt(context.kind, before), after: gapAt(context.kind, after) } } : {}),
  };
}

/** The median gap of a level, as the centre line is a median: half of the gaps are longer. */
function gapAt(kind: 'g' | 't', { rate, lost }: PooledRate): number | null {
  // Without a loss there is no gap to draw a level at.
  if (lost === 0) return null;
  return kind === 'g' ? Math.log(0.5) / Math.log1p(-Math.min(rate, 1 - 1e-9)) : Math.LN2 / rate;
}
