import { historyCount } from '../standing/histories.ts';
import type { SeriesLevel } from './family.ts';
import { type SeriesHistory, simulateSeries } from './histories.ts';
import { type SeriesDesign, seriesJudge } from './standing.ts';
import { longestLike, stretchesLike } from './stretches.ts';

export interface DetectableMoves {
  /** the nearest higher level of the line that would by now have read as moved with the wanted chance; null when none would */
  readonly above: SeriesLevel | null;
  /** the nearest lower level */
  readonly below: SeriesLevel | null;
  readonly chance: number;
}

const STEPS = 5;
const MOST_HISTORIES = 200;
const LEAST_HISTORIES = 60;
/** A move of this many sigma that is not seen never will be: for gaps a factor of about 400. */
const LARGEST = 6;

/**
 * The smallest moves of the level that this series would by now have read as moved, had it moved at `from` and stayed there. What came
 * after `from` is kept as it was used up: of rarer losses there would be fewer gaps by now, of more frequent ones more.
 * @param threshold  ratio from seriesThreshold
 */
export function detectableMoves(
  design: SeriesDesign,
  history: SeriesHistory,
  level: SeriesLevel,
  from: number,
  threshold: number,
  chance: number,
  seed = 12,
): DetectableMoves {
  const { family } = design;
  const most = longestLike(history);
  const judge = seriesJudge(design, most);
  const histories = historyCount(history.count, MOST_HISTORIES, LEAST_HISTORIES);
  const guess = 3 / Math.sqrt(Math.max(1, history.count - from + 1));
  return { above: smallest('above', 1), below: smallest('below', -1), chance };

  function smallest(side: 'above' | 'below', sign: 1 | -1): SeriesLevel | null {
    const seen = (size: number): boolean => {
      let hits = 0;
      const stretches = stretchesLike(design, history, from, level, family.moved(level, sign * size));
      simulateSeries(family, stretches, most, histories, seed, (simulated) => {
        if (judge(simulated)[side].score > threshold) hits++;
      });
      return hits / histories >= chance;
    };
    let enough = Math.min(LARGEST, guess);
    let short = 0;
    while (!seen(enough)) {
      if (enough >= LARGEST) return null;
      short = enough;
      enough = Math.min(LARGEST, 1.6 * enough);
    }
    if (short === 0) {
      const lower = 0.5 * enough;
      if (seen(lower)) enough = lower;
      else short = lower;
    }
    for (let step = 0; step < STEPS; step++) {
      const middle = (short + enough) / 2;
      if (seen(middle)) enough = middle;
      else short = middle;
    }
    return family.moved(level, sign * enough);
  }
}
