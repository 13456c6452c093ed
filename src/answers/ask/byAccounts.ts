import { takeCensus } from '../../census/census.ts';
import { tenurePoint } from '../../census/tenure.ts';
import type { Chart } from '../../charts/types.ts';
import { drawPlate } from '../../picture/picture.ts';
import { earlyAltText, earlyScene } from '../../picture/questions/early.ts';
import type { Judgement } from '../../verdict/judgement.ts';
import { judgeSums } from '../../verdict/sums/judgeSums.ts';
import type { PointDates } from '../../verdict/types.ts';
import { writeVerdict } from '../../verdict/verdict.ts';
import { viewWords } from '../../verdict/words/viewWords.ts';
import { drawnFrom } from '../drawnFrom.ts';
import { earlyDrawing } from '../watch/earlyDrawing.ts';
import { earlyFindings } from '../watch/earlyFindings.ts';
import { watchAccounts } from '../watch/watchAccounts.ts';
import { answerCensus, inOrderOfStart, verdictContextOf, withSince } from './bySubgroups.ts';
import type { AskContext, Reached } from './types.ts';

/** Findings about the points themselves that leave no level to watch against, whatever the chart. */
const NO_LEVEL: ReadonlySet<Judgement['finding']> = new Set(['too-few-points', 'no-level', 'unsteady-baseline']);

const HOW =
  'The chart follows accounts one by one in order of start, those of the unfinished point included, and adds up what speaks for a rise by half and for a fall by half (a Bernoulli CUSUM); a point stands after every subgroup.';
const NO_SUM = 'No account-by-account sum is drawn, as it needs a usual level first; the shares are shown instead.';

/** Account by account: sums for a rise and for a fall that do not wait for a subgroup to fill (Bernoulli CUSUM). */
export async function byAccounts(context: AskContext): Promise<Reached> {
  const { table, question, scope, resolved } = context;
  const { tenure, subgroupSize } = resolved.plan;
  const census = await takeCensus(table, { tenure, subgroupSize, view: 'start', ...scope });
  const taken = inOrderOfStart(context, census);
  // The points are judged as shares first: whether there is a level at all is the same question for both.
  const shares = answerCensus({ ...context, question: { ...question, chart: 'p' } }, taken);
  const { chart: shareChart, judgement: ofShares } = shares;
  if (shareChart === null || ofShares === null || NO_LEVEL.has(ofShares.finding)) return withoutSum(shares);
  // Where a move lies inside trial limits is not looked at: what decides must not have been chosen by what it decides on.
  const watched = await watchAccounts(table, census, shareChart, { ...ofShares, start: null });
  if (watched.accounts === 0) return withoutSum(shares);

  const { chart, ends, judgement } = judgeSums({
    watched: { ...watched, subgroupSize, baseline: census.subgroups.slice(0, watched.baselinePoints) },
    ofShares,
    segments: census.segments,
    correlation: correlationOf(ofShares, subgroupSize),
    inflowPerWeek: census.inflowPerWeek,
  });
  const dates = chart.points.map(({ index }): PointDates => {
    const subgroup = census.subgroups[index - 1];
    if (index <= watched.baselinePoints && subgroup) return datesOf(subgroup.firstStart, subgroup.lastStart);
    return datesOf(watched.startOf((ends[index - 2] ?? 0) + 1), watched.startOf(ends[index - 1]!));
  });
  const words = {
    ...verdictContextOf(context, { ...taken, howChosen: [HOW, ...taken.howChosen] }, dates, []),
    // No account waits for its point to be full, and the points differ in size.
    subgroupSize: null,
    waiting: 0,
    nextPointOn: null,
  };
  // The words tell the usual share where the chart's own centre line is a sum of zero.
  const told: Chart = { ...chart, center: watched.watch.usual };
  const verdict = withSince(writeVerdict(told, judgement, words), question.since, viewWords('start'));
  const subject = shares.drawn.subject;
  return {
    ...shares,
    verdict,
    chart,
    dates,
    signals: judgement.signals,
    trust: judgement.trust,
    judgement,
    drawn: { ...shares.drawn, ...drawnFrom(judgement), waiting: null },
    draw: () => {
      const found = earlyFindings(watched, census, {
        tenure: taken.tenure,
        segment: scope.segment ?? null,
        overdispersed: false,
        mixMoved: false,
        verdict: verdict.headline,
      });
      const drawing = { ...earlyDrawing(watched, found, subject, scope.asOf), verdict };
      return drawPlate(earlyScene(drawing), earlyAltText(drawing));
    },
  };

  function datesOf(firstStart: number, lastStart: number): PointDates {
    return { firstStart, lastStart, asOf: tenurePoint(lastStart, tenure) + census.request.settleDays };
  }
}

function withoutSum(shares: Reached): Reached {
  return { ...shares, verdict: { ...shares.verdict, cautions: [NO_SUM, ...shares.verdict.cautions] } };
}

/** Intra-class correlation that gives the points' dispersion, where it is clearly more than chance; null otherwise. */
function correlationOf({ dispersion }: Judgement, subgroupSize: number): number | null {
  if (dispersion === null || dispersion.pValue >= 0.01 || dispersion.ratio <= 1 || subgroupSize < 2) return null;
  return Math.min(0.9, (dispersion.ratio - 1) / (subgroupSize - 1));
}
