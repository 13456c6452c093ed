import type { ChartKind, ShiftTest, TestEpisode } from '../../charts/types.ts';
import { listed, numberWord } from './format.ts';

/** What keeps points within the limits: on a p' chart, and for ratios that are no counts, they are set by how much the points really vary. */
export function withinLimits(kind: ChartKind): string {
  return kind === 'p-prime' || kind === 'individuals' ? 'the usual spread' : 'chance alone';
}

/**
 * A flag in words; a test is never shown as a bare number. "By chance" and "usual level" are the two terms the replies lean on: the
 * usual level is the centre line, and each of the three steps away from it is one sigma.
 */
export function testWords(
  episode: Pick<TestEpisode, 'test' | 'side' | 'point' | 'until'>,
  within: string = withinLimits('p'),
): string {
  const { test, side } = episode;
  const beyond = side === 'above' ? 'above' : 'below';
  const longer = (least: number): string => numberWord(least + episode.until - episode.point);
  switch (test) {
    case 1:
      return episode.until > episode.point
        ? `${numberWord(episode.until - episode.point + 1)} points in a row ${beyond} what ${within} allows`
        : `one point ${beyond} what ${within} allows`;
    case 2:
      return `${longer(9)} points in a row ${beyond} the usual level`;
    case 3:
      return `${longer(6)} points in a row, each ${side === 'above' ? 'higher' : 'lower'} than the one before`;
    case 4:
      return `${longer(14)} points in a row going up and down in turn`;
    case 5:
      return `two of three points far ${beyond} the usual level`;
    case 6:
      return `four of five points clearly ${beyond} the usual level`;
    case 7:
      return `${longer(15)} points in a row suspiciously close to the usual level`;
    case 8:
      return `${longer(8)} points in a row clearly away from the usual level, some above and some below`;
  }
}

/** A flag of an EWMA chart in words. */
export function smoothedWords({ side, point, until }: Pick<TestEpisode, 'side' | 'point' | 'until'>): string {
  const lasted = until > point ? `for ${numberWord(until - point + 1)} points ` : '';
  return `the smoothed share ${lasted}${side === 'above' ? 'above' : 'below'} what chance allows`;
}

const SHIFT_IN_WORDS: Readonly<Record<ShiftTest, string>> = {
  1: 'one point beyond three sigma',
  2: 'nine in a row on one side',
  3: 'six in a row rising or falling',
  5: 'two of three beyond two sigma',
  6: 'four of five beyond one sigma',
};

/** Which tests decide, where somebody chose them. */
export function chosenTests(tests: readonly ShiftTest[]): string {
  return `As you asked, only these flags count (sigma is the usual spread of a point): ${listed(tests.map((test) => SHIFT_IN_WORDS[test]))}.`;
}

/** What a test about the cut of the data suggests looking at. */
export function cutAdvice(test: 4 | 7 | 8): string {
  switch (test) {
    case 4:
      return 'two sources may be taking turns in the data';
    case 7:
      return 'each point may mix groups that differ, or the usual spread was set too wide';
    case 8:
      return 'two groups with different churn may be charted together';
  }
}
