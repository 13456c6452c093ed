import { describe, expect, it } from 'vitest';
import type { FlowCell } from '../../../src/charts/reconcile/flows.ts';
import { reconcileAlt, reconcileScene } from '../../../src/picture/questions/reconcile.ts';
import { reconcile } from '../../../src/verdict/questions/reconcile/findings.ts';
import { faults } from '../faults.ts';

const JANUARY = 12 * 2023;
const cells: readonly FlowCell[] = Array.from({ length: 30 }, (_, month) => [
  { started: JANUARY + month, lost: null, accounts: 60 },
  { started: JANUARY + month, lost: JANUARY + month + (month % 4), accounts: 5 + (month % 3) },
]).flat();

const findings = (rate: number, decimals = 1, some: readonly FlowCell[] = cells) =>
  reconcile({
    rate,
    decimals,
    month: null,
    cells: some,
    firstMonth: JANUARY,
    lastMonth: JANUARY + 29,
    shares: some.length === 0 ? [] : [{ tenure: '3 months', accounts: 1800, lost: 150 }],
  });

describe('the strip of calculations', () => {
  it.each([
    ['a figure none gives', findings(0.5)],
    ['a figure many give', findings(0.01, 0)],
    ['nothing', findings(0)],
    ['everything', findings(1)],
    ['more than everything', findings(2.5)],
    ['no data', findings(0.05, 1, [])],
  ])('%s: no two texts touch, none leaves the drawing', (_, found) => {
    const headline =
      'None of 98 figures gives it; the nearest is 3.11 %, lost in April 2025, over the customers at its start.';
    const scene = reconcileScene(found, 'Nothing gives it', headline, 'Marrowby Seed Club, June export', 20_300);
    expect(faults(scene)).toEqual([]);
    expect(reconcileAlt(found, headline)).not.toMatch(/NaN|Infinity|undefined/);
  });

  it('what rounds to the figure stands out, each figure once', () => {
    const found = findings(0.083, 1);
    expect(found.matched.giving.map(({ way }) => way)).toContain('census');
    const scene = reconcileScene(found, 'x', 'y', 'z', 20_300);
    // Once in the strip for each, once in the key.
    const diamonds = scene.marks.filter(({ shape }) => shape === 'diamond');
    expect(diamonds).toHaveLength(found.matched.giving.length + 1);
  });
});
