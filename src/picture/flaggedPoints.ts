import { zoneOf } from '../charts/tests/zone.ts';
import { zoneBetween } from '../charts/tests/zoneEdges.ts';
import type { Chart, ChartPoint } from '../charts/types.ts';
import type { PictureInput, Signal, SignalState } from '../verdict/types.ts';

const RANK: readonly SignalState[] = ['passed', 'watching', 'standing'];

/**
 * The points that bear a flag's mark: of each flag's stretch, those that its words are about. Between two points far below the usual
 * level there may lie one above it, which belongs to the stretch but is no member. When churn moved, the marks of the flags behind that
 * begin where the bracket begins.
 */
export function flaggedPoints(
  input: Pick<PictureInput, 'chart' | 'signals' | 'verdict'>,
): ReadonlyMap<number, SignalState> {
  const marked = new Map<number, SignalState>();
  const { chart, signals, verdict } = input;
  if (!chart) return marked;
  const moved = verdict.outcome === 'risen' || verdict.outcome === 'fallen' ? verdict.since : null;
  for (const state of RANK)
    for (const signal of signals) {
      if (signal.state !== state || signal.speaks !== 'shift') continue;
      const last = Math.max(signal.members[1], signal.until);
      const reaches = moved !== null && state === 'standing' && last >= moved.point;
      const first = reaches ? Math.max(moved.point, signal.members[0]) : signal.members[0];
      for (const point of chart.points.slice(first - 1, last))
        if (isMember(signal, point, chart)) marked.set(point.index, state);
    }
  return marked;
}

/** How far from the usual level, in zones, the members of a test lie. A trend's members are all its points. Source: Nelson 1984. */
const LEAST_ZONE: Record<number, number> = { 1: 4, 2: 1, 5: 3, 6: 2 };

function isMember(signal: Signal, point: ChartPoint, chart: Chart): boolean {
  const least = LEAST_ZONE[signal.test];
  if (least === undefined) return true;
  const zone = point.edges ? zoneBetween(point.value, point.edges) : zoneOf(point.value, chart.center, point.sigma);
  return signal.side === 'below' ? zone <= -least : signal.side === 'above' ? zone >= least : Math.abs(zone) >= least;
}
