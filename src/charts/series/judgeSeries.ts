import { recommendedBaseline } from '../baseline.ts';
import { type Autocorrelation, autocorrelation } from '../checks/autocorrelation.ts';
import { LEAST_BEFORE } from '../standing/lastBlock.ts';
import type { Standing } from '../standing/standing.ts';
import { LEAST_RATIO, type Threshold } from '../standing/threshold.ts';
import type { ZoneEdges } from '../tests/zoneEdges.ts';
import type { TestNumber } from '../types.ts';
import { type SeriesChecks, seriesChecks } from './checks.ts';
import { type DetectableMoves, detectableMoves } from './detectable.ts';
import type { SeriesFamily, SeriesLevel } from './family.ts';
import { type SeriesRunLength, seriesRunLength } from './runLength.ts';
import { baselineLevel, type SeriesDesign, seriesJudge } from './standing.ts';
import { type SeriesStart, seriesStart } from './startCandidates.ts';
import { seriesThreshold } from './threshold.ts';

export interface SeriesRequest {
  readonly family: SeriesFamily;
  /** finite values in time order, one a point */
  readonly values: readonly number[];
  /** what an unfinished last value has reached so far; 0 or absent when there is none */
  readonly open?: number;
  /** last baseline value, when the asker fixed it */
  readonly baselineLast?: number;
  readonly excluded?: readonly number[];
  /** the tests whose flags count; all that speak about a shift when absent */
  readonly tests?: readonly TestNumber[];
  /** fewest values on which anything is judged */
  readonly least: number;
}

/** The level of a series and what its zones are; known whenever there is a level at all, however few the values. */
export interface SeriesFrame {
  readonly level: SeriesLevel;
  readonly edges: ZoneEdges;
  readonly baselineLast: number;
  /** true when the unfinished value is longer than the centre line and so is a point */
  readonly hasOpenPoint: boolean;
}

/** Sides are those of the line, `above` being higher values; `family.above` says what that means for churn. */
export type SeriesJudgement =
  | { readonly kind: 'no-level' }
  | { readonly kind: 'too-few'; readonly frame: SeriesFrame }
  | {
      readonly kind: 'judged';
      readonly frame: SeriesFrame;
      readonly finding: 'above' | 'below' | 'steady' | 'unsteady-baseline';
      readonly standing: Standing;
      readonly threshold: Threshold;
      /** when a move was found */
      readonly start: SeriesStart | null;
      readonly falseAlarm: SeriesRunLength | null;
      readonly wouldSee: DetectableMoves;
      /** first point from which a move is assumed in wouldSee */
      readonly wouldSeeFrom: number;
      /** of the level the newest stretch is compared with */
      readonly checks: SeriesChecks | null;
      readonly neighbours: Autocorrelation | null;
    };

const UNSTEADY = 0.01;
const OVERDISPERSED = 0.01;
const WOULD_SEE_CHANCE = 0.8;

/**
 * Judges a series of values of one family: has its level moved? The rules are those for counts (see standing/ and DEVELOPERS.md): flags of
 * the shift tests, a last block whose threshold is calibrated for exactly this series, a baseline tested for being one level.
 *
 * A baseline nobody fixed that turns out to be two levels is shortened to the values before its split, and counts only if the values since
 * then stand out from it. Values that scatter more than their family shrink every log likelihood ratio by it (quasi-likelihood).
 */
export function judgeSeries(request: SeriesRequest): SeriesJudgement {
  const { values, family } = request;
  const usual = judgeWith(request, request.baselineLast ?? recommendedBaseline(values.length), false);
  if (request.baselineLast !== undefined || usual.kind !== 'judged' || usual.finding !== 'unsteady-baseline')
    return usual;
  const before = usual.checks?.splitAfter ?? 0;
  const trial = usual.frame.baselineLast >= values.length;
  if (before < (trial ? LEAST_BEFORE : request.least) || before >= usual.frame.baselineLast) return usual;
  const shortened = judgeWith({ ...request, family }, before, trial);
  return shortened.kind === 'judged' && (shortened.finding === 'above' || shortened.finding === 'below')
    ? shortened
    : usual;
}

function judgeWith(request: SeriesRequest, asked: number, stepProven: boolean): SeriesJudgement {
  const { family, values, open = 0, excluded = [], least, tests } = request;
  const count = values.length;
  const baselineLast = Math.min(asked, count);
  const trial = baselineLast >= count;
  const design: SeriesDesign = {
    family,
    baselineLast: trial ? Number.POSITIVE_INFINITY : baselineLast,
    excluded,
    ...(tests ? { tests } : {}),
  };
  const history = { values, count, open: family.openEnded ? open : 0 };
  const level = baselineLevel(design, history, new Float64Array(count));
  if (level === null) return { kind: 'no-level' };
  const edges = family.edges(level);
  const frame = { level, edges, baselineLast, hasOpenPoint: family.openEnded && open > edges.center };
  if (count < least) return { kind: 'too-few', frame };

  const used = usedOf(values, baselineLast, excluded);
  const whole = seriesChecks(
    family,
    used.map((one) => one.value),
  );
  const shrink = whole?.spreadPValue != null && whole.spreadPValue < OVERDISPERSED ? Math.max(1, whole.spread) : 1;

  const standing = seriesJudge(design, count)(history);
  const calibrated = seriesThreshold(design, history, level);
  const threshold = stepProven ? { ...calibrated, ratio: LEAST_RATIO } : calibrated;
  const side = standing.above.score >= standing.below.score ? 'above' : 'below';
  const moved = standing[side].score / shrink > threshold.ratio ? side : null;

  // On trial limits the moved block lies in the baseline itself; the level is what lies before it.
  const blockFirst = trial && moved ? standing[moved].block.first : count + 1;
  const before = used.filter((one) => one.point < blockFirst);
  const within =
    before.length === used.length && shrink === 1
      ? whole
      : seriesChecks(
          family,
          before.map((one) => one.value),
          shrink,
        );
  const checks = within && { ...within, splitAfter: before[within.splitAfter - 1]!.point };
  const wouldSeeFrom = trial ? Math.max(LEAST_BEFORE + 1, Math.floor((2 * count) / 3) + 1) : baselineLast + 1;
  const unsteady = checks !== null && checks.pValue < UNSTEADY;
  return {
    kind: 'judged',
    frame,
    finding: unsteady ? 'unsteady-baseline' : (moved ?? 'steady'),
    standing,
    threshold,
    start: moved && !unsteady ? seriesStart(design, history, level, moved) : null,
    falseAlarm: seriesRunLength(family, level, level, tests),
    wouldSee: detectableMoves(design, history, level, wouldSeeFrom, calibrated.ratio * shrink, WOULD_SEE_CHANCE),
    wouldSeeFrom,
    checks,
    neighbours: autocorrelation(before.map((one) => one.value)),
  };
}

function usedOf(values: readonly number[], last: number, excluded: readonly number[]) {
  return values.flatMap((value, i) => (i < last && !excluded.includes(i + 1) ? [{ point: i + 1, value }] : []));
}
