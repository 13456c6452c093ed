import type { Chart } from '../charts/types.ts';
import { percent } from './figures.ts';
import { QUIET } from './palette.ts';
import { type Frame, type Stroke, xAt, yAt } from './scene.ts';

/** Fewer losses, or kept accounts, to be expected a point than this: three sigma limits are rough there. Common practice, no source. */
const FEW = 5;

/**
 * The exact binomial limits worth a line on the picture: those of a p chart with few losses a point, which limit anything at all.
 * With points of different size they would go up and down with every point; the words tell them then.
 */
export function shownExactLimits(chart: Chart): readonly number[] {
  const { center, subgroupSize, points } = chart;
  const last = points.at(-1);
  if (subgroupSize === null || last === undefined) return [];
  const expected = Math.min(center, 1 - center) * subgroupSize;
  if (expected <= 0 || expected >= FEW) return [];
  return [last.exactUpper, last.exactLower].filter(
    (edge): edge is number => edge !== undefined && edge > 0 && edge < 1,
  );
}

/** Dotted lines over the drawn limits. */
export function exactLimitStrokes(chart: Chart, frame: Frame): Stroke[] {
  return shownExactLimits(chart).map((edge) => {
    const y = yAt(frame, edge);
    return {
      x: xAt(frame, 0.5),
      x2: xAt(frame, chart.points.length + 0.5),
      y,
      y2: y,
      color: QUIET,
      width: 1.6,
      dash: [1.6, 5],
    };
  });
}

/** What the dotted lines are; empty when there are none. */
export function exactLimitsNote(chart: Chart): string {
  const edges = shownExactLimits(chart).map(percent).join(' and ');
  return edges === '' ? '' : `dotted: what chance allows when it is counted out exactly, ${edges}`;
}
