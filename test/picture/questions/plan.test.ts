import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../../src/days.ts';
import { drawPlate } from '../../../src/picture/picture.ts';
import { planAltText, planScene } from '../../../src/picture/questions/plan.ts';
import { faults } from '../faults.ts';
import { normalised } from '../normalised.ts';
import { planExample } from './planExample.ts';

const asOf = dayFromIso('2026-06-30')!;

describe('the picture of plan', () => {
  it('draws as it did when somebody last looked at it', async () => {
    const findings = planExample();
    const picture = await drawPlate(planScene(findings, 'Marrowby Seed Club export', asOf), planAltText(findings));
    expect(picture.altText).toMatch(
      /month 3 \(5\.0 %\) and month 12 \(8\.0 %\) stand out; churn is read at 3 months\. Below, .*\(in use\)/,
    );
    await expect(normalised(picture.svg)).toMatchFileSnapshot('../../pictures/plan.svg');
  });

  it('no two texts touch and all is legible, whatever was found', () => {
    fc.assert(
      fc.property(
        fc.record({
          rate: fc.double({ min: 0.0005, max: 0.97, noNaN: true }),
          matured: fc.integer({ min: 0, max: 2_000_000 }),
          inflowPerWeek: fc.oneof(fc.constant(0), fc.double({ min: 0.05, max: 20_000, noNaN: true })),
          move: fc.oneof(fc.constantFrom(0.5, 1, 2), fc.double({ min: 0.1, max: 4, noNaN: true })),
          within: fc.integer({ min: 1, max: 12 }),
          months: fc.integer({ min: 0, max: 48 }),
        }),
        (about) => {
          const findings = planExample({ ...about, months: about.matured < 2_000 ? 0 : about.months });
          expect(faults(planScene(findings, 'a file with a rather long name, as they tend to have.csv', asOf))).toEqual(
            [],
          );
          expect(planAltText(findings)).not.toMatch(/NaN|Infinity|undefined/);
        },
      ),
      { numRuns: 25 },
    );
  });
});
