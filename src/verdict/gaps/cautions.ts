import { capitalised, counted } from '../words/format.ts';
import { cutAdvice } from '../words/testWords.ts';
import { asOfInferredWords, NOT_WHY, OWN_DEFINITIONS } from '../words/usual.ts';
import type { GapFacts } from './facts.ts';

/** The limits of the answer, most particular first, the usual caution last. */
export function gapCautions({ judgement, context }: GapFacts): string[] {
  const { finding, chart, series, byPower, signals } = judgement;
  const list: string[] = [...context.readCautions];
  const judged = series?.kind === 'judged' ? series : null;
  if (context.kind === 't')
    list.push(
      'Days between losses say something about churn only while the number of customers stays about the same: with twice as many customers, losses come twice as often.',
    );
  if (judged && chart) {
    if (chart.baseline.provisional)
      list.push(
        `The usual level is provisional: it rests on ${counted(chart.baseline.lost, 'gap')}, and 25 make it firm.`,
      );
    else if (chart.baseline.last >= context.losses)
      list.push('Every gap helped to set the usual level, so a move had to stand out from its own effect on it.');
    if (byPower)
      list.push(
        'The gaps vary clearly more than chance alone would make them (overdispersion), so the limits are set by how much they really vary from one to the next; what came since the last loss is not judged.',
      );
    const { neighbours } = judged;
    if (neighbours && Math.abs(neighbours.r1) > neighbours.limit && finding !== 'unsteady-baseline')
      list.push(
        `Neighbouring gaps ${neighbours.r1 > 0 ? 'go together' : 'pull apart'} more than chance would have them (autocorrelation ${neighbours.r1.toFixed(2)}), so flags mean a little less than stated.`,
      );
    const edges = judged.frame.edges.below;
    const deaf = [edges[2], edges[1], edges[0]].filter((edge) => edge <= 0).length;
    if (deaf > 0 && !byPower) list.push(`${capitalised(DEAF[deaf - 1]!)}.`);
  }
  for (const signal of signals) {
    if (signal.speaks !== 'cut' || signal.state !== 'watching') continue;
    list.push(`About how the data is cut: ${signal.words}; ${cutAdvice(signal.test as 4 | 7 | 8)}.`);
  }
  if (context.asOf !== null && context.asOfInferred) list.push(asOfInferredWords(context.asOf));
  if (finding === 'risen' || finding === 'fallen') list.push(NOT_WHY);
  list.push(OWN_DEFINITIONS);
  return list;
}

/** By how many of the lower zone ends nothing can be below. */
const DEAF = [
  'even two losses in immediate succession happen by chance, so one short gap alone can never flag a rise, only several together',
  'even two losses in immediate succession are nothing unusual, so a rise shows only in runs of short gaps, never in one or two of them',
  'losses are not rare enough here for a short gap to say anything: only nine short ones in a row, or six each shorter than the last, can flag a rise',
];
