import { logFactorial } from '../logFactorial.ts';
import { hypergeometricDraw } from '../random/hypergeometricDraw.ts';
import { seededUniform } from '../random/uniform.ts';
import { exactChance } from './exactChance.ts';
import { EQUALLY_LIKELY } from './fisherExact.ts';

export interface FreemanHalton {
  /** chance of any table at most as likely as the one seen, given all totals */
  readonly pValue: number;
  /** 'exact', or 'simulated' when the tables with these totals are too many to go through */
  readonly method: 'exact' | 'simulated';
  /** of a simulated pValue, else null */
  readonly standardError: number | null;
}

export interface Effort {
  /** steps that going through all tables may take before drawing them instead */
  readonly steps?: number;
  /** tables drawn when they are too many; fewer when they are so large that each takes long */
  readonly draws?: number;
  readonly seed?: number;
}

/** Some hundredths of a second. */
const STEPS = 200_000;
/** A p value of 0.01 is then known to 0.0014. */
const DRAWS = 5_000;
const LEAST_DRAWS = 200;
/** Steps that all draws together may take, a draw of one cell taking about its standard deviation. */
const DRAW_STEPS = 500_000;

/**
 * Fisher's exact test for a table of any size: are rows and columns unrelated?
 * @param table  rows of whole numbers >= 0, all of one length
 * @returns null when fewer than two rows or two columns hold anything: nothing to compare
 * Source: Freeman GH and Halton JH, Biometrika 38:141-149, 1951 (reference from memory). Example: the job satisfaction table of Agresti
 * (2002, p. 57) has p = 0.782685.
 */
export function freemanHalton(table: readonly (readonly number[])[], effort: Effort = {}): FreemanHalton | null {
  const rows = table.map((row) => row.reduce((sum, x) => sum + x, 0));
  const columns = (table[0] ?? []).map((_, j) => table.reduce((sum, row) => sum + row[j]!, 0));
  const [usedRows, usedColumns] = [rows.filter((n) => n > 0), columns.filter((n) => n > 0)];
  if (usedRows.length < 2 || usedColumns.length < 2) return null;
  const seen = -table.flat().reduce((sum, x) => sum + logFactorial(x), 0);
  const exact = exactChance(usedRows, usedColumns, seen, effort.steps ?? STEPS);
  if (exact !== null) return { pValue: exact, method: 'exact', standardError: null };
  const draws = Math.round(
    Math.max(LEAST_DRAWS, Math.min(effort.draws ?? DRAWS, DRAW_STEPS / stepsOf(usedRows, usedColumns))),
  );
  const pValue = simulatedChance(usedRows, usedColumns, seen, draws, effort.seed ?? 6);
  return { pValue, method: 'simulated', standardError: Math.sqrt((pValue * (1 - pValue)) / draws) };
}

/** Standard deviations of the cells that are drawn: all but the largest row and the largest column, which follow from the totals. */
function stepsOf(rows: readonly number[], columns: readonly number[]): number {
  const all = rows.reduce((sum, n) => sum + n, 0);
  const drawn = (totals: readonly number[]): number[] => totals.toSorted((a, b) => a - b).slice(0, -1);
  let steps = 0;
  for (const r of drawn(rows)) for (const c of drawn(columns)) steps += 3 + Math.sqrt((r / all) * c * (1 - r / all));
  return steps;
}

/** Tables drawn cell by cell with their totals kept; (1 + as unlikely) / (1 + draws), which is never 0. */
function simulatedChance(
  rows: readonly number[],
  columns: readonly number[],
  seen: number,
  draws: number,
  seed: number,
): number {
  const uniform = seededUniform(seed);
  const total = rows.reduce((sum, n) => sum + n, 0);
  const start = rows.toSorted((a, b) => a - b);
  const ordered = columns.toSorted((a, b) => a - b);
  let asUnlikely = 0;
  for (let draw = 0; draw < draws; draw++) {
    const left = [...start];
    let leftAll = total;
    let logChance = 0;
    for (const column of ordered) {
      let take = column;
      let among = leftAll;
      for (let i = 0; i < left.length; i++) {
        const x = hypergeometricDraw(among, left[i]!, take, uniform);
        among -= left[i]!;
        take -= x;
        left[i]! -= x;
        logChance -= logFactorial(x);
      }
      leftAll -= column;
    }
    if (logChance <= seen + EQUALLY_LIKELY) asUnlikely++;
  }
  return (1 + asUnlikely) / (1 + draws);
}
