import { type Dispersion, dispersion } from '../../../charts/checks/dispersion.ts';
import { sigmaOfZ } from '../../../charts/checks/sigmaOfZ.ts';
import { countHistogram, type SpreadHistogram } from '../../../charts/spread/countHistogram.ts';
import { type FarPoint, furthestOut } from '../../../charts/spread/furthestOut.ts';
import type { Chart } from '../../../charts/types.ts';
import type { Judgement } from '../../judgement.ts';
import { type OneLevel, usualLevel } from '../oneLevel.ts';

/** wider, alike: more or less than chance allows, clearly; maybe: a little wider, which chance does now and then. */
export type SpreadOutcome = 'chance' | 'maybe' | 'wider' | 'alike' | 'no-level' | 'one-point';

export interface Limits {
  readonly lower: number;
  readonly upper: number;
}

export interface SpreadReading {
  readonly outcome: SpreadOutcome;
  readonly stretch: OneLevel;
  /** rate of the prediction: the usual level */
  readonly rate: number;
  /** null where there is nothing to compare with */
  readonly histogram: SpreadHistogram | null;
  readonly dispersion: Dispersion | null;
  /** standard deviation of the standardised points, from neighbours: 1 when binomial */
  readonly sigmaZ: number | null;
  /** standard deviation of the rates: what the binomial makes it, and as it is; at the mean size of a point */
  readonly deviation: { readonly predicted: number; readonly seen: number } | null;
  /** 3 sigma limits at the mean size of a point, by the binomial and widened (or narrowed) by sigmaZ */
  readonly limits: { readonly binomial: Limits; readonly prime: Limits } | null;
  readonly furthest: readonly (FarPoint & {
    readonly index: number;
    readonly lost: number;
    readonly accounts: number;
  })[];
  /** mean accounts a point */
  readonly size: number;
}

const CLEAR = 0.01;
const HINT = 0.05;

/** Compares the points that hold the usual level with what the binomial predicts of them. */
export function readSpread(chart: Chart, judgement: Judgement): SpreadReading {
  const stretch = usualLevel(chart, judgement);
  const { counts } = stretch;
  const rate = chart.center;
  const size = stretch.pooled.accounts / counts.length;
  const none = {
    stretch,
    rate,
    histogram: null,
    dispersion: null,
    sigmaZ: null,
    deviation: null,
    limits: null,
    furthest: [],
    size,
  };
  if (rate <= 0 || rate >= 1) return { ...none, outcome: 'no-level' };
  const furthest = furthestOut(counts, rate).map((far) => ({ ...far, ...counts[far.at]! }));
  if (counts.length < 2) return { ...none, outcome: 'one-point', histogram: countHistogram(counts, rate), furthest };

  const spread = dispersion(counts);
  const z = counts.map(({ accounts, lost }) => (lost - accounts * rate) / Math.sqrt(accounts * rate * (1 - rate)));
  const sigmaZ = sigmaOfZ(z);
  const sigma = Math.sqrt((rate * (1 - rate)) / size);
  const limit = (wide: number): Limits => ({
    lower: Math.max(0, rate - 3 * wide),
    upper: Math.min(1, rate + 3 * wide),
  });
  return {
    outcome: outcomeOf(spread),
    stretch,
    rate,
    histogram: countHistogram(counts, rate),
    dispersion: spread,
    sigmaZ,
    deviation: spread && { predicted: sigma, seen: sigma * Math.sqrt(spread.ratio) },
    limits: { binomial: limit(sigma), prime: limit(sigma * sigmaZ) },
    furthest,
    size,
  };
}

function outcomeOf(spread: Dispersion | null): SpreadOutcome {
  if (!spread) return 'no-level';
  if (spread.pValue < CLEAR) return 'wider';
  if (spread.pValue < HINT) return 'maybe';
  return spread.pValue > 1 - CLEAR ? 'alike' : 'chance';
}
