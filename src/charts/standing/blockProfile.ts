import { maxLogLikelihood } from '../logLikelihood.ts';
import { type BlockDesign, LEAST_BEFORE } from './lastBlock.ts';

/** One possible last block. */
export interface BlockAt {
  /** point it starts at; it ends at the newest */
  readonly first: number;
  readonly side: 'above' | 'below';
  /** log likelihood ratio of the block's own rate against the usual level */
  readonly ratio: number;
  readonly accounts: number;
  readonly lost: number;
}

/**
 * Every possible last block with its ratio, where lastBlockFinder only keeps the best on each side: for showing how the best was found.
 * @param lost  counts per point
 */
export function blockProfile(design: BlockDesign, lost: ArrayLike<number>): BlockAt[] {
  const { accounts, baselineLast, excluded } = design;
  const count = accounts.length;
  const trial = baselineLast >= count;
  const left = new Set(excluded);
  const used = (i: number): boolean => i >= baselineLast || !left.has(i + 1);
  const pool = (from: number, to: number) => {
    let [n, d] = [0, 0];
    for (let i = from; i < to; i++) {
      if (!used(i)) continue;
      n += accounts[i]!;
      d += lost[i]!;
    }
    return { n, d };
  };
  const level = pool(0, Math.min(baselineLast, count));
  const blocks: BlockAt[] = [];
  for (let start = trial ? LEAST_BEFORE : baselineLast; start < count; start++) {
    if (!used(start)) continue;
    const { n, d } = pool(start, count);
    const before = trial ? pool(0, start) : level;
    if (before.n === 0) continue;
    const p0 = level.d / level.n;
    const ratio = trial
      ? maxLogLikelihood(d, n) + maxLogLikelihood(before.d, before.n) - maxLogLikelihood(level.d, level.n)
      : maxLogLikelihood(d, n) - (d > 0 ? d * Math.log(p0) : 0) - (d < n ? (n - d) * Math.log1p(-p0) : 0);
    blocks.push({
      first: start + 1,
      side: d * before.n > before.d * n ? 'above' : 'below',
      ratio,
      accounts: n,
      lost: d,
    });
  }
  return blocks;
}
