import { bernoulliCusum, type SumTrace } from '../../charts/sums/bernoulliCusum.ts';
import type { WatchSum } from '../../charts/sums/watchSum.ts';
import type { SumPath } from '../../picture/questions/early.ts';

/** Columns a path is thinned to: no more can be told apart in a picture. */
const COLUMNS = 500;

/** A sum's way over a stretch of the accounts, after place `from` up to place `to`, its corners at the losses; a long one keeps the highest and the lowest value of each column. */
export function sumPath(
  sum: WatchSum,
  losses: Int32Array,
  { from, to }: { readonly from: number; readonly to: number },
  trace: SumTrace,
): SumPath {
  const at: number[] = [from];
  for (const loss of losses) {
    if (loss <= from) continue;
    if (loss - 1 > at.at(-1)!) at.push(loss - 1);
    at.push(loss);
  }
  if (at.at(-1)! < to) at.push(to);
  const { values } = bernoulliCusum(sum, losses, to, at);
  const corners = at.map((place, i) => ({ place, share: values[i]! / sum.limit }));
  return { path: thinned(corners, from, to), alarms: trace.alarms.filter((alarm) => alarm.at > from) };
}

function thinned(corners: SumPath['path'], from: number, to: number): SumPath['path'] {
  if (corners.length <= 2 * COLUMNS) return corners;
  const columns: { place: number; share: number }[][] = Array.from({ length: COLUMNS }, () => []);
  for (const corner of corners)
    columns[Math.min(COLUMNS - 1, Math.floor(((corner.place - from) / (to - from)) * COLUMNS))]!.push(corner);
  return columns.flatMap((column) => {
    if (column.length <= 2) return column;
    const highest = column.reduce((a, b) => (b.share > a.share ? b : a));
    const lowest = column.reduce((a, b) => (b.share < a.share ? b : a));
    const kept = new Set([highest, lowest, ...(column === columns.at(-1) ? [column.at(-1)!] : [])]);
    return column.filter((corner) => kept.has(corner));
  });
}
