import type { SegmentCounts } from '../census/types.ts';
import { type Autocorrelation, autocorrelation } from '../charts/checks/autocorrelation.ts';
import { type Dispersion, dispersion } from '../charts/checks/dispersion.ts';
import { type Homogeneity, homogeneity } from '../charts/checks/homogeneity.ts';
import { type Steadiness, steadiness } from '../charts/checks/steadiness.ts';
import { smallestDetectable } from '../charts/standing/detectable.ts';
import { type BlockDesign, LEAST_BEFORE } from '../charts/standing/lastBlock.ts';
import { type Standing, type StandingSide, standingJudge } from '../charts/standing/standing.ts';
import { type StartCandidates, startCandidates } from '../charts/standing/startCandidates.ts';
import { chanceOfScore, LEAST_RATIO, standingThreshold } from '../charts/standing/threshold.ts';
import { SHIFT_TESTS } from '../charts/tests/nelsonTests.ts';
import type { Chart, ChartPoint, ShiftTest, SubgroupCount } from '../charts/types.ts';
import { type MixReading, readMix } from './mix.ts';
import { readSignals } from './signals.ts';
import { NO_TRUST, runLengthTrust } from './trust.ts';
import type { Signal, Trust } from './types.ts';

/** Fewest points on which anything is judged. Common practice, no source; below it the reply is "too early". */
export const LEAST_POINTS = 12;

/** A baseline this unlikely to come from one rate is not a level to judge by. */
const UNSTEADY = 0.01;
/** Spread this unlikely under the binomial is taken as real. */
const OVERDISPERSED = 0.01;
const WOULD_SEE_CHANCE = 0.8;

export type Finding =
  | 'too-few-points'
  | 'no-level'
  | 'unsteady-baseline'
  | 'mix-change'
  | 'mix-unclear'
  | 'risen'
  | 'fallen'
  | 'steady';

/** The last block that decides whether churn moved, on the side that stands out more. */
export interface LastBlockReading {
  readonly side: 'above' | 'below';
  /** point at which the block starts */
  readonly first: number;
  /** binomial log likelihood ratio of the block against the usual level */
  readonly ratio: number;
  /** the ratio is divided by this: how much more the points vary than the binomial allows; 1 when they do not */
  readonly dividedBy: number;
  /** what is compared: the divided ratio, or 0 when no flag lies in the block */
  readonly score: number;
  /** what the score must exceed */
  readonly threshold: number;
  /** intra-class correlation the histories behind the threshold were simulated with; absent on a p chart */
  readonly correlation?: number;
}

/** Everything the numbers say, before any words. */
export interface Judgement {
  readonly finding: Finding;
  readonly signals: readonly Signal[];
  readonly trust: Trust;
  readonly start: StartCandidates | null;
  /** first point from which a move is assumed in trust.wouldSee */
  readonly wouldSeeFrom: number;
  readonly steadiness: Steadiness | null;
  readonly dispersion: Dispersion | null;
  readonly neighbours: Autocorrelation | null;
  readonly segmentsDiffer: Homogeneity | null;
  readonly mix: MixReading | null;
  /** chance of a last stretch that stands out at least this much with nothing changed; null where no threshold was calibrated */
  readonly standingChance: number | null;
  /** null where no threshold was calibrated */
  readonly lastBlock: LastBlockReading | null;
}

export interface JudgeOptions {
  /** counts per segment value and point */
  readonly segments?: readonly SegmentCounts[];
  /** the tests whose flags count; all that speak about a shift when absent */
  readonly tests?: readonly ShiftTest[];
  /**
   * true when the points after the baseline were found to differ by a calibrated test of their own, so that any flagged block stands
   */
  readonly stepProven?: boolean;
  /** false leaves out how often flags are raised and how soon, where that is not told */
  readonly runLength?: boolean;
  /** accounts that reach the age in a week, where it is known: what turns a delay into weeks */
  readonly accountsPerWeek?: number;
}

/**
 * Judges a chart: which flags stand, whether that is a verdict, and how far it can be trusted.
 */
export function judge(chart: Chart, options: JudgeOptions = {}): Judgement {
  const { segments = [], tests = SHIFT_TESTS, stepProven = false } = options;
  const counts: SubgroupCount[] = chart.points.map(({ accounts, lost }) => ({
    accounts,
    lost,
  }));
  const lost = counts.map((count) => count.lost);
  const binomialDesign = {
    accounts: counts.map((count) => count.accounts),
    baselineLast: chart.baseline.last,
    excluded: chart.baseline.excluded,
    tests,
    ...(chart.smoothing ? { smoothing: chart.smoothing } : {}),
  };
  const newest = counts.length;
  const trial = chart.baseline.last >= newest;
  const wouldSeeFrom = trial ? Math.max(LEAST_BEFORE + 1, Math.floor((2 * newest) / 3) + 1) : chart.baseline.last + 1;
  const nothing = {
    trust: NO_TRUST,
    start: null,
    wouldSeeFrom,
    steadiness: null,
    dispersion: null,
    neighbours: null,
    segmentsDiffer: segmentTest(segments),
    mix: null,
    standingChance: null,
    lastBlock: null,
  };
  const quiet: Standing = {
    above: { block: { first: newest, ratio: 0 }, score: 0 },
    below: { block: { first: newest, ratio: 0 }, score: 0 },
  };
  if (chart.center <= 0 || chart.center >= 1) {
    return {
      ...nothing,
      finding: newest < LEAST_POINTS ? 'too-few-points' : 'no-level',
      signals: [],
    };
  }
  if (newest < LEAST_POINTS)
    return {
      ...nothing,
      finding: 'too-few-points',
      signals: readSignals(chart, quiet, null, { tests }),
    };

  const used = baselinePoints(chart);
  const step = steadiness(used);
  const spread = spreadAround(step, used);
  // A p' chart carries the spread in its limits and its threshold. On a p chart that somebody asked for, every log likelihood ratio shrinks
  // by it (quasi-likelihood; McCullagh P and Nelder JA, Generalized Linear Models, 1989, section 4.5, section from memory).
  const excess = spread && spread.pValue < OVERDISPERSED ? Math.max(1, spread.ratio) : 1;
  const prime = chart.kind === 'p-prime' || (chart.kind === 'ewma' && chart.sigmaZ !== 1);
  const shrink = prime ? 1 : excess;
  const design: BlockDesign = prime ? { ...binomialDesign, correlation: correlationOf(excess, used) } : binomialDesign;

  const standing = standingJudge(design)(lost);
  const calibrated = standingThreshold(design, chart.center);
  const threshold = stepProven ? { ...calibrated, ratio: LEAST_RATIO } : calibrated;
  const side = standing.above.score >= standing.below.score ? 'above' : 'below';
  // Where no flag lies in either block, the one that differs more is told.
  const unscored = standing.above.score === 0 && standing.below.score === 0;
  const toldSide = unscored && standing.below.block.ratio > standing.above.block.ratio ? 'below' : side;
  const moved = standing[side].score / shrink > threshold.ratio ? side : null;
  // On trial limits the moved block lies in the baseline itself; the level is what lies before it.
  const blockFirst = trial && moved ? standing[moved].block.first : newest + 1;
  const level = used.filter(({ index }) => index < blockFirst);
  // The test of the whole baseline at no excess is the one just made.
  const within = level.length === used.length && excess === 1 ? step : steadiness(level, excess);
  // Numbered as on the chart, where left-out points count too.
  const split = within && { ...within, splitAfter: level[within.splitAfter - 1]!.index };

  const base: Omit<Judgement, 'finding' | 'signals'> & {
    mix: MixReading | null;
  } = {
    ...nothing,
    trust: {
      ...(options.runLength === false
        ? NO_TRUST
        : runLengthTrust(chart, design.correlation ?? 0, tests, options.accountsPerWeek ?? 0)),
      falseVerdictChance: threshold.falseVerdictChance,
      wouldSee: smallestDetectable(
        design,
        lost,
        chart.center,
        wouldSeeFrom,
        calibrated.ratio * shrink,
        WOULD_SEE_CHANCE,
      ),
    },
    steadiness: split,
    dispersion: spread,
    neighbours: autocorrelation(level.map((count) => count.lost / count.accounts)),
    standingChance: chanceOfScore(calibrated, standing[side].score / shrink),
    lastBlock: readLastBlock(standing[toldSide], toldSide, prime ? Math.max(1, spread?.ratio ?? 1) : shrink, shrink, {
      threshold: threshold.ratio,
      ...(design.correlation === undefined ? {} : { correlation: design.correlation }),
    }),
  };
  const judged = (
    finding: Finding,
    signalSide: 'above' | 'below' | null,
    more: Partial<Judgement> = {},
  ): Judgement => ({
    ...base,
    finding,
    signals: readSignals(chart, standing, signalSide, { tests, explained: finding === 'mix-change' }),
    ...more,
  });

  if (split && split.pValue < UNSTEADY) {
    const mix = readMix(segments, split.splitAfter + 1, level.at(-1)!.index, split.splitAfter, threshold.ratio);
    if (mix?.explains !== 'all') return judged('unsteady-baseline', null);
    // Steady within the groups: the level moved with the mix, which is told, and the rest is judged as usual.
    base.mix = mix;
  }
  if (moved === null) return judged('steady', null);
  const start = startCandidates(design, lost, moved);
  const mix = readMix(
    segments,
    start.first,
    newest,
    Math.min(chart.baseline.last, start.first - 1),
    threshold.ratio * shrink,
  );
  if (mix?.explains === 'all') return judged('mix-change', null, { start, mix });
  if (mix?.explains === 'unclear') return judged('mix-unclear', null, { start, mix });
  return judged(moved === 'above' ? 'risen' : 'fallen', moved, { start, mix });
}

/** @param divided  what a p' chart divided by when the block could not be scored, because no flag lies in it */
function readLastBlock(
  { block, score }: StandingSide,
  side: 'above' | 'below',
  divided: number,
  shrink: number,
  rest: Pick<LastBlockReading, 'threshold' | 'correlation'>,
): LastBlockReading | null {
  const dividedBy = score > 0 ? (block.ratio / score) * shrink : divided;
  const reading = { side, ...block, dividedBy, score: score / shrink, ...rest };
  // With next to nobody lost, or next to nobody kept, the figures leave the range of numbers.
  return [reading.ratio, dividedBy, reading.threshold].every(Number.isFinite) ? reading : null;
}

/** The points that set the usual level. */
function baselinePoints({ points, baseline }: Chart): readonly ChartPoint[] {
  return points.filter(({ index }) => index <= baseline.last && !baseline.excluded.includes(index));
}

/** True when enough points clearly vary more than the binomial allows, so that a p' chart fits and a p chart does not. */
export function isOverdispersed(chart: Chart): boolean {
  if (chart.points.length < LEAST_POINTS) return false;
  const used = baselinePoints(chart);
  const spread = spreadAround(steadiness(used), used);
  return spread !== null && spread.pValue < OVERDISPERSED;
}

/**
 * How much the baseline's points vary beyond the binomial. One step inside the baseline must not be taken for spread: when the points are
 * clearly not of one rate, each side of the largest split is compared with its own.
 */
function spreadAround(step: Steadiness | null, used: readonly SubgroupCount[]): Dispersion | null {
  return step && step.pValue < UNSTEADY
    ? dispersion(used.slice(0, step.splitAfter), used.slice(step.splitAfter))
    : dispersion(used);
}

/** Intra-class correlation that gives this dispersion at the mean size of the points. */
function correlationOf(excess: number, used: readonly SubgroupCount[]): number {
  const size = used.reduce((sum, { accounts }) => sum + accounts, 0) / used.length;
  return size > 1 ? Math.min(0.9, (excess - 1) / (size - 1)) : 0;
}

function segmentTest(segments: readonly SegmentCounts[]): Homogeneity | null {
  const total = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0);
  return homogeneity(
    segments.map(({ accounts, lost }) => ({
      accounts: total(accounts),
      lost: total(lost),
    })),
  );
}
