import * as fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { fisherExact } from '../../src/charts/checks/fisherExact.ts';
import { freemanHalton } from '../../src/charts/checks/freemanHalton.ts';
import { logFactorial } from '../../src/charts/logFactorial.ts';
import { hypergeometricDraw } from '../../src/charts/random/hypergeometricDraw.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';

const cell = fc.integer({ min: 0, max: 7 });
const close = (a: number, b: number): void => expect(Math.abs(a - b)).toBeLessThan(1e-9);

/** All tables with the totals of this one, by brute force: the chance of one at most as likely. */
function byBruteForce(table: readonly (readonly number[])[]): number {
  const rows = table.map((row) => row.reduce((sum, x) => sum + x, 0));
  const columns = table[0]!.map((_, j) => table.reduce((sum, row) => sum + row[j]!, 0));
  const weight = (cells: readonly number[]): number => Math.exp(-cells.reduce((sum, x) => sum + logFactorial(x), 0));
  const seen = weight(table.flat());
  let [all, unlikely] = [0, 0];
  const fill = (i: number, j: number, left: readonly number[], room: number, cells: readonly number[]): void => {
    if (i === rows.length) {
      if (left.some((n) => n > 0)) return;
      const here = weight(cells);
      all += here;
      if (here <= seen * (1 + 1e-7)) unlikely += here;
      return;
    }
    if (j === columns.length) {
      if (room === 0) fill(i + 1, 0, left, rows[i + 1] ?? 0, cells);
      return;
    }
    for (let x = 0; x <= Math.min(room, left[j]!); x++)
      fill(i, j + 1, left.with(j, left[j]! - x), room - x, [...cells, x]);
  };
  fill(0, 0, columns, rows[0]!, []);
  return unlikely / all;
}

describe('Fisher’s exact test', () => {
  test('one-sided chances share the table seen, and turn round with the columns', () => {
    fc.assert(
      fc.property(cell, cell, cell, cell, (a, b, c, d) => {
        if (a + b + c + d === 0) return;
        const found = fisherExact([
          [a, b],
          [c, d],
        ]);
        const turned = fisherExact([
          [b, a],
          [d, c],
        ]);
        close(found.less, turned.greater);
        close(found.twoSided, turned.twoSided);
        expect(found.less + found.greater).toBeGreaterThan(1);
        for (const value of Object.values(found)) expect(value).toBeLessThanOrEqual(1);
      }),
    );
  });

  test('two by two is the smallest case of rows by columns', () => {
    fc.assert(
      fc.property(cell, cell, cell, cell, (a, b, c, d) => {
        const table = [
          [a, b],
          [c, d],
        ] as const;
        const larger = freemanHalton(table);
        if (larger) close(larger.pValue, fisherExact([table[0], table[1]]).twoSided);
        else expect(Math.min(a + b, c + d, a + c, b + d)).toBe(0);
      }),
    );
  });

  test('rows by columns agrees with going through every table, and does not depend on how the table is turned', () => {
    const small = fc.integer({ min: 0, max: 3 });
    fc.assert(
      fc.property(
        fc
          .constantFrom([2, 4], [3, 3], [3, 2])
          .chain(([r, c]) =>
            fc.array(fc.array(small, { minLength: c!, maxLength: c! }), { minLength: r!, maxLength: r! }),
          ),
        (table) => {
          const found = freemanHalton(Object.freeze(table));
          if (!found) return;
          expect(found.method).toBe('exact');
          close(found.pValue, byBruteForce(table));
          const turned = table[0]!.map((_, j) => table.map((row) => row[j]!).toReversed());
          close(freemanHalton(turned)!.pValue, found.pValue);
        },
      ),
      { numRuns: 40 },
    );
  });

  test('chances of very many accounts are finite and right in their order', () => {
    const found = fisherExact([
      [5_000, 95_000],
      [100, 800],
    ]);
    expect(found.less).toBeGreaterThan(0);
    expect(found.less).toBeLessThan(1e-10);
    expect(found.greater).toBeGreaterThan(0.999);
    expect(found.twoSided).toBeGreaterThanOrEqual(found.less);
  });

  test('too many tables to go through are drawn, with their error told, the same each time', () => {
    const lost = [3, 2, 0, 1, 5, 4, 7, 1, 9, 4, 2, 3];
    const kept = [40, 30, 22, 12, 60, 50, 80, 40, 90, 35, 15, 60];
    const found = freemanHalton([lost, kept])!;
    expect(found.method).toBe('simulated');
    expect(found.standardError).toBeGreaterThan(0);
    expect(freemanHalton([lost, kept])).toEqual(found);
    const other = freemanHalton([lost, kept], { seed: 99 })!;
    expect(Math.abs(other.pValue - found.pValue)).toBeLessThan(5 * found.standardError!);
  });
});

test('hypergeometric draws have the mean and the variance of the distribution, and stay inside it', () => {
  const uniform = seededUniform(3);
  for (const [all, marked, taken] of [
    [20, 7, 12],
    [1_000, 40, 300],
    [50, 50, 9],
    [2_000_000, 700, 900_000],
  ] as const) {
    const draws = 4_000;
    let [sum, squares] = [0, 0];
    for (let i = 0; i < draws; i++) {
      const x = hypergeometricDraw(all, marked, taken, uniform);
      expect(x).toBeGreaterThanOrEqual(Math.max(0, marked + taken - all));
      expect(x).toBeLessThanOrEqual(Math.min(marked, taken));
      sum += x;
      squares += x * x;
    }
    const mean = (taken * marked) / all;
    const variance = (mean * (1 - marked / all) * (all - taken)) / (all - 1);
    expect(Math.abs(sum / draws - mean)).toBeLessThanOrEqual(4 * Math.sqrt(variance / draws));
    expect(Math.abs(squares / draws - (sum / draws) ** 2 - variance)).toBeLessThanOrEqual(0.1 * variance);
  }
});
