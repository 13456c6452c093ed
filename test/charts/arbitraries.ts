import * as fc from 'fast-check';
import type { SubgroupCount } from '../../src/charts/types.ts';

/** One subgroup with any count its size allows. */
export const subgroup = (most = 300): fc.Arbitrary<SubgroupCount> =>
  fc
    .integer({ min: 1, max: most })
    .chain((accounts) => fc.record({ accounts: fc.constant(accounts), lost: fc.integer({ min: 0, max: accounts }) }));

/** Subgroups in time order, frozen to the bottom: whoever changes an input fails loudly. */
export const history = (min = 1, max = 40, most = 300): fc.Arbitrary<readonly SubgroupCount[]> =>
  fc.array(subgroup(most), { minLength: min, maxLength: max }).map(frozen);

export function frozen(counts: readonly SubgroupCount[]): readonly SubgroupCount[] {
  return Object.freeze(counts.map((count) => Object.freeze({ ...count })));
}
