import type { Chart } from '../charts/types.ts';
import type { SignalState } from '../verdict/types.ts';
import { EMBER, GHOST, INK, PAPER, QUIET } from './palette.ts';
import type { MarkStyle } from './scene.ts';

/** A cross on its side, in the unit square Vega scales symbols from. */
const LEANING_CROSS = 'M-.8,-.55L-.55,-.8L0,-.25L.55,-.8L.8,-.55L.25,0L.8,.55L.55,.8L0,.25L-.55,.8L-.8,.55L-.25,0Z';

export const STANDING_MARK: MarkStyle = {
  shape: 'diamond',
  area: 190,
  fill: EMBER,
  stroke: PAPER,
  strokeWidth: 1,
};
export const WATCHING_MARK: MarkStyle = {
  shape: 'diamond',
  area: 150,
  fill: PAPER,
  stroke: EMBER,
  strokeWidth: 3,
};
export const PASSED_MARK: MarkStyle = {
  shape: 'diamond',
  area: 130,
  fill: PAPER,
  stroke: QUIET,
  strokeWidth: 2.4,
};
export const EXCLUDED_MARK: MarkStyle = {
  shape: LEANING_CROSS,
  area: 190,
  fill: QUIET,
  stroke: QUIET,
  strokeWidth: 0,
};
export const GHOST_MARK: MarkStyle = {
  shape: 'circle',
  area: 130,
  fill: PAPER,
  stroke: GHOST,
  strokeWidth: 2.4,
};
/** The unfinished gap: it can only grow. */
export const OPEN_MARK: MarkStyle = {
  shape: 'triangle-up',
  area: 150,
  fill: PAPER,
  stroke: INK,
  strokeWidth: 2.4,
};
const BASELINE_MARK: MarkStyle = {
  shape: 'circle',
  area: 62,
  fill: PAPER,
  stroke: INK,
  strokeWidth: 2,
};
const JUDGED_MARK: MarkStyle = {
  shape: 'circle',
  area: 78,
  fill: INK,
  stroke: INK,
  strokeWidth: 0,
};

const BY_STATE: Record<SignalState, MarkStyle> = {
  standing: STANDING_MARK,
  watching: WATCHING_MARK,
  passed: PASSED_MARK,
};

/** The mark of every point: hollow where the usual level was set, full where judged, a diamond where flagged; smaller when crowded. */
export function pointMarks(
  chart: Chart,
  marked: ReadonlyMap<number, SignalState>,
  slotPx: number,
): (MarkStyle & { x: number; value: number })[] {
  const { baseline } = chart;
  const crowd = Math.min(1, Math.max(0.07, (slotPx / 9) ** 1.3));
  return chart.points.map((point) => {
    const flagged = marked.get(point.index);
    const within = point.index >= baseline.first && point.index <= baseline.last;
    const style = flagged
      ? BY_STATE[flagged]
      : point.open
        ? OPEN_MARK
        : baseline.excluded.includes(point.index)
          ? EXCLUDED_MARK
          : within
            ? BASELINE_MARK
            : JUDGED_MARK;
    const shrink = flagged ? Math.max(crowd, 0.22) : crowd;
    return {
      ...style,
      area: style.area * shrink,
      strokeWidth: style.strokeWidth * Math.max(0.5, Math.sqrt(shrink)),
      x: point.index,
      value: point.value,
    };
  });
}
