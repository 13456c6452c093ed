import { bernoulliCusum, type SumTrace } from '../../charts/sums/bernoulliCusum.ts';
import type { WatchSum } from '../../charts/sums/watchSum.ts';
import type { SumPath } from '../../picture/questions/early.ts';

/** Columns a path is thinned to: no more can be told apart in a picture. */
const COLUMNS = 500;

/** A sum's way over the accounts, its corners at the losses; a long one keeps the highest and the lowest value of each column. */
export function sumPath(sum: WatchSum, losses: Int32Array, accounts: number, trace: SumTrace): SumPath {
  const at: number[] = [0];
  for (const loss of losses) {
    if (loss - 1 > at.at(-1)!) at.push(loss - 1);
    at.push(loss);
  }
  if (at.at(-1)! < accounts) at.push(accounts);
  const { values } = bernoulliCusum(sum, losses, accounts, at);
  const corners = at.map((place, i) => ({ place, share: values[i]! / sum.limit }));
  return { path: thinned(corners, accounts), alarms: trace.alarms };
}

function thinned(corners: SumPath['path'], accounts: number): SumPath['path'] {
  if (corners.length <= 2 * COLUMNS) return corners;
  const columns: { place: number; share: number }[][] = Array.from({ length: COLUMNS }, () => []);
  for (const corner of corners)
    columns[Math.min(COLUMNS - 1, Math.floor((corner.place / accounts) * COLUMNS))]!.push(corner);
  return columns.flatMap((column) => {
    if (column.length <= 2) return column;
    const highest = column.reduce((a, b) => (b.share > a.share ? b : a));
    const lowest = column.reduce((a, b) => (b.share < a.share ? b : a));
    const kept = new Set([highest, lowest, ...(column === columns.at(-1) ? [column.at(-1)!] : [])]);
    return column.filter((corner) => kept.has(corner));
  });
}
