import type { Standing } from '../charts/standing/standing.ts';
import { isShiftTest, nelsonTests, SHIFT_TESTS } from '../charts/tests/nelsonTests.ts';
import { TEST_SPAN } from '../charts/tests/patterns.ts';
import { smoothedFlags } from '../charts/tests/smoothedFlags.ts';
import type { Chart, ShiftTest } from '../charts/types.ts';
import type { Signal, SignalState } from './types.ts';
import { smoothedWords, testWords, withinLimits } from './words/testWords.ts';

/** A flag is new while it was completed within the longest shift pattern's span of the newest point. */
const NEW_WITHIN = TEST_SPAN[2];

/**
 * All flags of a chart, each told apart: standing, watching (new, not standing yet) or passed.
 * @param moved      side on which the verdict found a standing shift, or null
 * @param tests      shift tests that were chosen to decide; flags of the others are not raised
 * @param explained  true when a move was found and something else explains it: its flags are passed, not watched
 */
export function readSignals(
  chart: Chart,
  standing: Standing,
  moved: 'above' | 'below' | null,
  { tests = SHIFT_TESTS, explained = false }: { tests?: readonly ShiftTest[]; explained?: boolean } = {},
): Signal[] {
  const newest = chart.points.length;
  const judgedFrom = chart.baseline.last >= newest ? 1 : chart.baseline.last + 1;
  const values = chart.points.map(({ value, sigma, edges }) => ({
    value,
    center: chart.center,
    sigma,
    ...(edges ? { edges } : {}),
  }));
  const raised = chart.smoothing
    ? smoothedFlags(chart.points, chart.center, chart.smoothing.width)
    : nelsonTests(values).filter(({ test }) => !isShiftTest(test) || tests.includes(test));
  return raised.map((episode) => {
    let state: SignalState;
    const recent = newest - episode.until < NEW_WITHIN;
    if (episode.speaks === 'cut' || episode.side === 'both') {
      state = recent ? 'watching' : 'passed';
    } else {
      const inBlock = episode.until >= Math.max(judgedFrom, standing[episode.side].block.first);
      if (moved === episode.side && inBlock) state = 'standing';
      else if (moved === null && !explained && inBlock && recent) state = 'watching';
      else state = 'passed';
    }
    const words = chart.smoothing ? smoothedWords(episode) : testWords(episode, withinLimits(chart.kind));
    return { ...episode, state, words };
  });
}
