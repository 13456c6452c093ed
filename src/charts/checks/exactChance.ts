import { logFactorial } from '../logFactorial.ts';
import { EQUALLY_LIKELY } from './fisherExact.ts';

/** Ways to fill the columns so far that leave the same row totals: weight of all ways with one value. */
type Pasts = Map<number, { readonly value: number; ways: number }>;

interface Stage {
  readonly left: readonly number[];
  readonly pasts: Pasts;
}

/**
 * Chance of any table at most as likely as one seen, given all row and column totals, exactly.
 *
 * The columns are filled one after another. Partial tables that leave the same row totals (in any order) go on together, and those of the
 * same value as one; a bundle that can only end below or only above the value seen is settled at once; the last two columns are settled
 * from one sorted list of their fillings.
 * @param rows, columns  totals, each above 0
 * @param seen   minus the sum of ln(x!) over the cells of the table seen, its value
 * @param steps  fillings that may be looked at
 * @returns null when that is not enough
 * Source: the idea of going through totals instead of tables is that of Mehta CR and Patel NR, JASA 78:427-434, 1983 (reference from
 * memory); the bounds here are plainer than theirs.
 */
export function exactChance(
  rows: readonly number[],
  columns: readonly number[],
  seen: number,
  steps: number,
): number | null {
  // The fewer the row totals, the fewer the states.
  if (rows.length > columns.length) return exactChance(columns, rows, seen, steps);
  const ordered = columns.toSorted((a, b) => a - b);
  const level = seen + EQUALLY_LIKELY;
  const start = descending(rows);
  const all = logWays(start, ordered);
  let left = steps;
  let chance = 0;
  let stage = new Map<string, Stage>([[start.join(), { left: start, pasts: new Map([[0, { value: 0, ways: 1 }]]) }]]);
  for (let j = 0; j < ordered.length - 2; j++) {
    const column = ordered[j]!;
    const rest = ordered.slice(j + 1);
    const next = new Map<string, Stage>();
    for (const { left: totals, pasts } of stage.values()) {
      for (const { value, left: after } of fillings(totals, column)) {
        left -= pasts.size;
        if (left < 0) return null;
        const sorted = descending(after);
        const highest = mostLikely(sorted, rest);
        const lowest = leastLikely(sorted, rest);
        const node = sorted.join();
        for (const past of pasts.values()) {
          const sum = past.value + value;
          if (sum + highest <= level) chance += past.ways * Math.exp(sum + logWays(sorted, rest) - all);
          else if (sum + lowest <= level) add(next, node, sorted, sum, past.ways);
        }
      }
    }
    stage = next;
  }
  const [last, other] = ordered.slice(-2) as [number, number];
  for (const { left: totals, pasts } of stage.values()) {
    const ends: number[] = [];
    for (const { value, left: after } of fillings(totals, last)) {
      if (--left < 0) return null;
      ends.push(value - after.reduce((sum, x) => sum + logFactorial(x), 0));
    }
    ends.sort((a, b) => a - b);
    const sums = [0];
    for (const end of ends) sums.push(sums.at(-1)! + Math.exp(end - ends.at(-1)!));
    for (const { value, ways } of pasts.values()) {
      chance += ways * sums[countUpTo(ends, level - value)]! * Math.exp(value + ends.at(-1)! - all);
    }
  }
  return other === undefined ? null : Math.min(1, chance);
}

/** Equal sums of the same terms differ in their last digits when they were added in another order. */
function add(next: Map<string, Stage>, node: string, left: readonly number[], value: number, ways: number): void {
  let stage = next.get(node);
  if (!stage) {
    stage = { left, pasts: new Map() };
    next.set(node, stage);
  }
  const key = Math.round(value * 1e9);
  const past = stage.pasts.get(key);
  if (past) past.ways += ways;
  else stage.pasts.set(key, { value, ways });
}

const descending = (totals: readonly number[]): number[] => totals.toSorted((a, b) => b - a);

/** All ways to spread a column over the rows: its value, and what is left of the row totals. */
function* fillings(totals: readonly number[], column: number): Generator<{ value: number; left: number[] }> {
  const room = totals.map((_, i) => totals.slice(i + 1).reduce((sum, n) => sum + n, 0));
  const left = [...totals];
  function* from(i: number, take: number, value: number): Generator<{ value: number; left: number[] }> {
    if (i === totals.length) {
      yield { value, left };
      return;
    }
    for (let x = Math.max(0, take - room[i]!); x <= Math.min(totals[i]!, take); x++) {
      left[i] = totals[i]! - x;
      yield* from(i + 1, take - x, value - logFactorial(x));
    }
  }
  yield* from(0, column, 0);
}

/** ln of the sum of exp(value) over all tables with these totals. */
function logWays(rows: readonly number[], columns: readonly number[]): number {
  const all = rows.reduce((sum, n) => sum + n, 0);
  const totals = [...rows, ...columns];
  return logFactorial(all) - totals.reduce((sum, n) => sum + logFactorial(n), 0);
}

/** No table is more likely: every column, or every row, spread as evenly as can be. */
function mostLikely(rows: readonly number[], columns: readonly number[]): number {
  const spread = (totals: readonly number[], cells: number): number =>
    totals.reduce((sum, n) => {
      const each = Math.floor(n / cells);
      const over = n % cells;
      return sum - over * logFactorial(each + 1) - (cells - over) * logFactorial(each);
    }, 0);
  return Math.min(spread(columns, rows.length), spread(rows, columns.length));
}

/** No table is less likely: every column, or every row, in a single cell. */
function leastLikely(rows: readonly number[], columns: readonly number[]): number {
  const single = (totals: readonly number[]): number => -totals.reduce((sum, n) => sum + logFactorial(n), 0);
  return Math.max(single(columns), single(rows));
}

/** How many of the sorted values are at most the limit. */
function countUpTo(sorted: readonly number[], limit: number): number {
  let [low, high] = [0, sorted.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (sorted[middle]! <= limit) low = middle + 1;
    else high = middle;
  }
  return low;
}
