import type { PointDates } from '../../verdict/types.ts';
import { dateAxis } from '../dateAxis.ts';
import type { Ink } from './ink.ts';
import type { Panel } from './panel.ts';

/**
 * Words under a panel whose x axis is numbered points 1, 2, …: the months in which their first accounts started, or point numbers. For a
 * panel with `x: { ticks: [] }`.
 */
export function pointDates(panel: Panel, dates: readonly PointDates[]): { readonly ink: Ink; readonly bottom: number } {
  const { texts, strokes, bottom } = dateAxis(dates.length, dates, panel.frame);
  return { ink: { texts, over: strokes }, bottom };
}
