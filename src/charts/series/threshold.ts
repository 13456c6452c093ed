import { historyCount } from '../standing/histories.ts';
import { calibrated, type Threshold } from '../standing/threshold.ts';
import type { SeriesLevel } from './family.ts';
import { type SeriesHistory, simulateSeries } from './histories.ts';
import { type SeriesDesign, seriesJudge } from './standing.ts';
import { judgedFrom, longestLike, stretchesLike } from './stretches.ts';

/**
 * Calibrates, by seeded simulation, the ratio at which a flag on such a series stands, with the level estimated in every history as it is
 * on the real chart, and as many gaps after the baseline as happen to fit.
 * @param level  the baseline's level, taken as the truth of the simulated histories
 */
export function seriesThreshold(
  design: SeriesDesign,
  history: SeriesHistory,
  level: SeriesLevel,
  seed = 11,
): Threshold {
  const most = longestLike(history);
  const judge = seriesJudge(design, most);
  const scores: number[] = [];
  const stretches = stretchesLike(design, history, judgedFrom(design, history), level);
  simulateSeries(design.family, stretches, most, historyCount(history.count), seed, (simulated) => {
    const { above, below } = judge(simulated);
    scores.push(Math.max(above.score, below.score));
  });
  return calibrated(scores);
}
