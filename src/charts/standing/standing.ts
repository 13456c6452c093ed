import { sigmaOfZ } from '../checks/sigmaOfZ.ts';
import { SHIFT_TESTS } from '../tests/nelsonTests.ts';
import { FLAG_ABOVE, FLAG_BELOW, patternFlags, smoothFlags } from './flagMaker.ts';
import { type BlockDesign, type LastBlock, lastBlockFinder } from './lastBlock.ts';

/** One direction's part of the question "does a flag stand?". */
export interface StandingSide {
  readonly block: LastBlock;
  /** the block's ratio when a shift test on this side holds at some point inside the block, else 0: what is compared with the threshold */
  readonly score: number;
}

export interface Standing {
  readonly above: StandingSide;
  readonly below: StandingSide;
}

const BINOMIAL = { sigmaZ: 1, dispersion: 1 } as const;

/**
 * Prepares the judge of one design: the same function looks at the real counts and at every simulated history, so that the threshold is
 * calibrated for exactly what is done.
 *
 * A flag stands when one of the design's tests on one side holds inside the last block on that side, and the block's log likelihood ratio exceeds the
 * threshold. Flags inside a baseline that is followed by judged points do not count: they were used to set the level.
 *
 * On a p' chart the flags are raised at the widened limits, and every ratio is divided by the dispersion of the baseline (quasi-likelihood).
 * Source: McCullagh P and Nelder JA, Generalized Linear Models, 1989, section 4.5 (section from memory).
 */
export function standingJudge(design: BlockDesign): (lost: ArrayLike<number>) => Standing {
  const { accounts, baselineLast, excluded } = design;
  const findBlocks = lastBlockFinder(design);
  const maker = design.smoothing ? smoothFlags(design.smoothing) : patternFlags(design.tests ?? SHIFT_TESTS);
  const left = new Set(excluded);
  const count = accounts.length;
  const judgedFrom = baselineLast >= count ? 0 : baselineLast;
  const firstSeen = Math.max(0, judgedFrom - maker.span + 1);
  const z = new Float64Array(baselineLast);

  return (lost) => {
    let n = 0;
    let d = 0;
    for (let i = 0; i < baselineLast; i++) {
      if (left.has(i + 1)) continue;
      n += accounts[i]!;
      d += lost[i]!;
    }
    const center = d / n;
    const binomialSpread = Math.sqrt(center * (1 - center));
    const { sigmaZ, dispersion } =
      design.correlation === undefined ? BINOMIAL : excessSpread(lost, center, binomialSpread);
    const spread = binomialSpread * sigmaZ;
    maker.begin(center, spread);
    let lastAbove = 0;
    let lastBelow = 0;
    for (let i = firstSeen; i < count; i++) {
      const size = accounts[i]!;
      const flags = maker.push(lost[i]! / size, size);
      if (i < judgedFrom) continue;
      if ((flags & FLAG_ABOVE) !== 0) lastAbove = i + 1;
      if ((flags & FLAG_BELOW) !== 0) lastBelow = i + 1;
    }
    const { above, below } = findBlocks(lost);
    return {
      above: { block: above, score: lastAbove >= above.first ? above.ratio / dispersion : 0 },
      below: { block: below, score: lastBelow >= below.first ? below.ratio / dispersion : 0 },
    };
  };

  /** How much more the baseline's points vary than the binomial allows, from neighbours (sigmaZ) and altogether (dispersion). */
  function excessSpread(lost: ArrayLike<number>, center: number, binomialSpread: number) {
    if (binomialSpread === 0) return BINOMIAL;
    let used = 0;
    let squares = 0;
    for (let i = 0; i < baselineLast; i++) {
      if (left.has(i + 1)) continue;
      const value = ((lost[i]! / accounts[i]! - center) * Math.sqrt(accounts[i]!)) / binomialSpread;
      z[used++] = value;
      squares += value * value;
    }
    return { sigmaZ: sigmaOfZ(z.subarray(0, used)), dispersion: used > 1 ? Math.max(1, squares / (used - 1)) : 1 };
  }
}
