import { FULL_BASELINE, recommendedBaseline } from '../baseline.ts';
import type { SeriesFamily } from '../series/family.ts';
import { baselineLevel, isOpenPoint, type SeriesDesign } from '../series/standing.ts';
import type { ZoneEdges } from '../tests/zoneEdges.ts';
import type { Baseline, Chart, ChartPoint } from '../types.ts';

export interface GapChartOptions {
  /** last gap of the baseline; recommended from the number of gaps when absent */
  readonly baselineLast?: number;
  /** gaps of the baseline left out by decision */
  readonly excluded?: readonly number[];
  /** accounts kept, or days gone, since the last loss; 0 when unknown */
  readonly open?: number;
  /** zone ends that somebody else worked out, from the spread the gaps really have */
  readonly edges?: ZoneEdges;
}

export interface GapKind {
  readonly kind: 'g' | 't';
  readonly scale: 'accounts' | 'days';
  readonly family: SeriesFamily;
  /** accounts a gap of this length stands for, the lost one included */
  accountsIn(gap: number): number;
}

/**
 * What g and t charts share: one point a loss, its value the gap before it; centre line, limits and zones at quantiles; and the unfinished
 * gap as a last point (`lost` 0, `open`) once it is longer than the centre line. Before that it could still end on either side.
 * @throws RangeError when there is no gap, or none is left in the baseline
 */
export function gapChart(of: GapKind, gaps: readonly number[], options: GapChartOptions): Chart {
  const { excluded = [], open = 0 } = options;
  if (gaps.length === 0) throw new RangeError('a chart of gaps needs at least one gap');
  const last = Math.min(options.baselineLast ?? recommendedBaseline(gaps.length), gaps.length);
  const trial = last >= gaps.length;
  const used = gaps.filter((_, i) => i < last && !excluded.includes(i + 1));
  if (used.length === 0) throw new RangeError('a baseline needs at least one point');
  const design: SeriesDesign = { family: of.family, baselineLast: trial ? Number.POSITIVE_INFINITY : last, excluded };
  const level = baselineLevel(design, { values: gaps, count: gaps.length, open }, new Float64Array(gaps.length));
  const mean = level?.mean ?? 0;
  const sigma = level?.sigma ?? 0;
  const edges = options.edges ?? (level ? of.family.edges(level) : FLAT);
  const pointAt = (value: number, i: number): ChartPoint => ({
    index: i + 1,
    accounts: of.accountsIn(value),
    lost: 1,
    value,
    sigma,
    lower: edges.below[2],
    upper: edges.above[2],
    edges,
  });
  const points = gaps.map(pointAt);
  if (isOpenPoint(open, edges.center)) {
    points.push({ ...pointAt(open, gaps.length), accounts: of.accountsIn(open) - 1, lost: 0, open: true });
  }
  const baseline: Baseline = {
    first: 1,
    last,
    excluded: excluded.filter((point) => point <= last),
    provisional: used.length < FULL_BASELINE,
    accounts: used.reduce((sum, gap) => sum + of.accountsIn(gap), 0),
    lost: used.length,
  };
  return {
    kind: of.kind,
    scale: of.scale,
    sigmaZ: 1,
    subgroupSize: null,
    center: edges.center,
    mean,
    baseline,
    points,
  };
}

/** Every gap is 0: nothing can be told apart. */
const FLAT: ZoneEdges = { center: 0, above: [0, 0, 0], below: [0, 0, 0] };
