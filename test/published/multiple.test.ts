import { describe, expect, test } from 'vitest';
import { bonferroni, holm } from '../../src/charts/multiple/stepDown.ts';
import { benjaminiHochberg, benjaminiYekutieli, hochberg } from '../../src/charts/multiple/stepUp.ts';
import type { Adjusted } from '../../src/charts/multiple/types.ts';
import { checkValue } from './checkValues.ts';

interface Family {
  readonly p: readonly number[];
  readonly alpha: number;
}

const PROCEDURES: Readonly<Record<string, (p: readonly number[], level: number) => Adjusted>> = {
  'multitest-fdr_bh': benjaminiHochberg,
  'multitest-fdr_by': benjaminiYekutieli,
  'multitest-simes-hochberg': hochberg,
  'multitest-holm': holm,
  'multitest-bonferroni': bonferroni,
};

describe('adjusted p values', () => {
  for (const [id, procedure] of Object.entries(PROCEDURES)) {
    const { inputs, expected, tolerance, cited } = checkValue<Family, { nrej: number; adj: number[] }>(id);
    test(`${id}: ${cited}`, () => {
      const found = procedure(Object.freeze(inputs.p), inputs.alpha);
      expect(found.rejected.filter(Boolean)).toHaveLength(expected.nrej);
      for (const [i, value] of expected.adj.entries())
        expect(Math.abs(found.adjusted[i]! - value)).toBeLessThanOrEqual(tolerance);
    });
  }

  const small = checkValue<Family, { adj: number[]; rejected: boolean[] }>('holm-constructed');
  test(`holm-constructed, p values out of order: ${small.cited}`, () => {
    const found = holm(small.inputs.p, small.inputs.alpha);
    for (const [i, value] of small.expected.adj.entries())
      expect(Math.abs(found.adjusted[i]! - value)).toBeLessThanOrEqual(small.tolerance);
    expect(found.rejected).toEqual(small.expected.rejected);
  });
});
