import type { Chart } from '../../charts/types.ts';
import type { VerdictContext } from '../context.ts';
import type { Judgement } from '../judgement.ts';
import { exactLimitsSentence } from './exactLimits.ts';
import { counted, listed } from './format.ts';
import { cutAdvice } from './testWords.ts';
import { asOfInferredWords, NOT_WHY, OWN_DEFINITIONS } from './usual.ts';

/** The limits of the answer, most particular first, the usual caution last. */
export function cautions(chart: Chart | null, judgement: Judgement, context: VerdictContext): string[] {
  const list: string[] = [...context.readCautions];
  if (chart) {
    if (judgement.finding !== 'too-few-points' && chart.baseline.provisional) {
      list.push(
        `The usual level is provisional: it rests on ${counted(chart.baseline.last - chart.baseline.excluded.length, 'point')}, and 25 make it firm.`,
      );
    } else if (judgement.finding !== 'too-few-points' && chart.baseline.last >= chart.points.length) {
      list.push('Every point helped to set the usual level, so a move had to stand out from its own effect on it.');
    }
    if (judgement.dispersion && judgement.dispersion.pValue < 0.01 && judgement.finding !== 'unsteady-baseline') {
      const times = judgement.dispersion.ratio.toFixed(1);
      list.push(
        chart.kind === 'p-prime' || chart.sigmaZ !== 1
          ? `The points vary about ${times} times as much as chance alone would make them (overdispersion), so the limits are set by how much they really vary from one point to the next (${chart.kind === 'ewma' ? 'as on a Laney p-prime chart' : 'a Laney p-prime chart'}).`
          : `The points vary about ${times} times as much as chance alone would make them (overdispersion), so flags are raised too easily; the verdict asks for that much more evidence.`,
      );
    }
    const { neighbours } = judgement;
    if (neighbours && Math.abs(neighbours.r1) > neighbours.limit && judgement.finding !== 'unsteady-baseline') {
      list.push(
        `Neighbouring points ${neighbours.r1 > 0 ? 'go together' : 'pull apart'} more than chance would have them (autocorrelation ${neighbours.r1.toFixed(2)}), so flags mean a little less than stated.`,
      );
    }
    const deaf = deafDownward(chart);
    if (deaf && judgement.finding !== 'no-level' && judgement.finding !== 'too-few-points') list.push(deaf);
    const exact = judgement.finding === 'too-few-points' ? null : exactLimitsSentence(chart);
    if (exact) list.push(exact);
  }
  if (judgement.mix && judgement.finding === 'steady') {
    list.push(
      `While the usual level was set, the mix of groups moved: ${judgement.mix.largest.segment} changed its share. Look at one group at a time to be sure.`,
    );
  }
  if (
    judgement.segmentsDiffer &&
    judgement.segmentsDiffer.pValue < 0.01 &&
    judgement.finding !== 'mix-change' &&
    judgement.finding !== 'mix-unclear' &&
    context.segmentColumn !== null
  ) {
    list.push(
      `Groups in "${context.segmentColumn}" differ in churn (${listed(context.segmentValues.slice(0, 4))}${context.segmentValues.length > 4 ? ' …' : ''}) and are charted together here; a group can move unseen. Ask about one of them to be sure.`,
    );
  }
  for (const signal of judgement.signals) {
    if (signal.speaks !== 'cut' || signal.state !== 'watching') continue;
    list.push(`About how the data is cut: ${signal.words}; ${cutAdvice(signal.test as 4 | 7 | 8)}.`);
  }
  if (context.asOf !== null && context.asOfInferred) {
    list.push(asOfInferredWords(context.asOf));
  }
  if (judgement.finding === 'risen' || judgement.finding === 'fallen') {
    list.push(NOT_WHY);
  }
  list.push(OWN_DEFINITIONS);
  return list;
}

/** Which flags cannot be raised by a low point, because the limit would lie below zero. */
function deafDownward(chart: Chart): string | null {
  // A smoothed share goes below its limit when several points together are low, which is what it is for; a sum looks for falls by itself.
  if (chart.kind === 'ewma' || chart.kind === 'cusum') return null;
  // At the newest point's size: where sizes differ, what can be flagged from here on.
  const sigma = chart.points.at(-1)!.sigma;
  const reach = [1, 2, 3].filter((k) => chart.center - k * sigma <= 0);
  if (reach.length === 0) return null;
  const cannot =
    reach.length === 3
      ? 'only nine low points in a row, or six each lower than the last, can flag a fall'
      : reach.length === 2
        ? 'a fall shows only in runs of low points, never in one or two of them'
        : 'one low point alone can never flag a fall, only several together';
  return `Points this small can reach zero by chance, so ${cannot}.`;
}
