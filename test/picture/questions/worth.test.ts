import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { dayFromIso } from '../../../src/days.ts';
import { drawPlate } from '../../../src/picture/picture.ts';
import { worthAltText, worthScene } from '../../../src/picture/questions/worth.ts';
import { commonMonths, eraOf } from '../../../src/verdict/questions/eraOf.ts';
import { worthWords } from '../../../src/verdict/questions/worth.ts';
import type { WorthFindings } from '../../../src/verdict/questions/worthFindings.ts';
import { faults } from '../faults.ts';
import { normalised } from '../normalised.ts';

const asOf = dayFromIso('2026-06-30')!;

const hazards = (accounts: number, months: number, early: number, late: number) => ({
  months: Array.from({ length: months }, (_, i) => {
    const atRisk = Math.round(accounts * 0.93 ** i);
    return { month: i + 1, atRisk, lost: Math.round(atRisk * (i < 3 ? early : late)) };
  }),
  byTenure: [],
});

/** Findings of a business whose young accounts leave at one pace and whose older ones leave at another. */
function worthExample(about: {
  accounts: number;
  months: number;
  early: number;
  late: number;
  moved: boolean;
  amount: number | null;
}): WorthFindings {
  const { accounts, months, early, late, moved, amount } = about;
  const counts = (share: number) => ({ lost: Math.round(accounts * share), accounts });
  const monthly = amount === null ? null : { mean: amount, standardError: amount / 50, accounts };
  const all = hazards(accounts, months, early, late);
  const young = hazards(Math.round(accounts / 2), Math.max(1, Math.round(months / 3)), early / 2, late);
  return {
    tenure: '3 months',
    tenureMonths: 3,
    outcome: moved ? 'fallen' : 'steady',
    since: moved ? dayFromIso('2025-02-01')! : null,
    now: moved ? eraOf(counts(early), 3, young, monthly, all) : eraOf(counts(early * 2), 3, all, monthly),
    before: moved ? eraOf(counts(early * 2), 3, all, monthly) : null,
    common: moved ? commonMonths(young, all) : null,
    amount:
      amount === null
        ? { kind: 'no-column' }
        : {
            kind: 'amounts',
            column: 'fee',
            currency: 'EUR',
            months: 1,
            periodStated: false,
            negative: 0,
            missing: 3,
            changed: 0,
          },
  };
}

describe('the picture of worth', () => {
  it('draws as it did when somebody last looked at it', async () => {
    const findings = worthExample({ accounts: 4_000, months: 36, early: 0.03, late: 0.012, moved: true, amount: 12.5 });
    const picture = await drawPlate(worthScene(findings, 'Marrowby Seed Club export', asOf), worthAltText(findings));
    expect(picture.altText).toMatch(
      /still there, measured over 12 months: .* How long an account stays: now, measured, then as before/,
    );
    await expect(normalised(picture.svg)).toMatchFileSnapshot('../../pictures/worth.svg');
  });

  it('no two texts touch, all is legible and every sentence is sound, whatever was found', () => {
    fc.assert(
      fc.property(
        fc.record({
          accounts: fc.integer({ min: 0, max: 2_000_000 }),
          months: fc.integer({ min: 1, max: 48 }),
          early: fc.double({ min: 0, max: 0.5, noNaN: true }),
          late: fc.double({ min: 0, max: 1, noNaN: true }),
          moved: fc.boolean(),
          amount: fc.oneof(fc.constant(null), fc.double({ min: 0.01, max: 1e9, noNaN: true })),
        }),
        (about) => {
          const findings = worthExample(about);
          expect(
            faults(worthScene(findings, 'a file with a rather long name, as they tend to have.csv', asOf)),
          ).toEqual([]);
          const { headline, evidence, cautions, next } = worthWords(findings);
          for (const sentence of [headline, ...evidence, ...cautions, ...next, worthAltText(findings)]) {
            expect(sentence).not.toMatch(/NaN|Infinity|undefined|null|,[.;,]| [,;.]| {2}/);
            expect(sentence).toMatch(/\.$/);
          }
        },
      ),
      { numRuns: 60 },
    );
  });
});
