import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { fromCounts, fromExports, runTrustStudy, type Share, summariseTrust } from './trustStudy.ts';

/*
 * The fast, seeded version of `npm run study -- trust`, which judges 500 fresh exports. Here counts alone are judged, since what is in
 * question is the figures, and one export goes the whole way.
 */
const withinErrors = ({ counted, stated, standardError }: Share, errors: number): void =>
  expect(Math.abs(counted - stated) / standardError, `${counted} against ${stated}`).toBeLessThan(errors);

it('over 40 unchanged histories flags come as often as stated, and the stated moves are reported in about 80 of 100', {
  timeout: 120_000,
}, async () => {
  const study = summariseTrust(await runTrustStudy(fromCounts(135, 51, 0.06, [1, 2, 5, 6]), 40, 71_000));
  expect(study.histories).toBe(40);
  withinErrors(study.estimated.flagged, 3);
  withinErrors(study.rise, 3);
  withinErrors(study.fall, 3);
  expect(Math.abs(study.estimated.every.counted - study.estimated.every.stated)).toBeLessThan(
    3 * study.estimated.every.standardError,
  );
  // Estimating the level costs something, and the reply says so.
  expect(study.statedEstimated).toBeLessThan(study.statedEvery);
});

it('an export goes the whole way, as a file', { timeout: 60_000 }, async () => {
  const folder = await mkdtemp(join(tmpdir(), 'ebbline-study-'));
  try {
    const [one] = await runTrustStudy(fromExports(folder), 1, 72_000);
    expect(one).toMatchObject({ seed: 72_000, riseSeen: expect.any(Boolean), fallSeen: expect.any(Boolean) });
    expect(one!.judged).toBeGreaterThan(10);
    for (const { flag, points } of [one!.known, one!.estimated]) {
      expect(flag).toBeGreaterThan(0);
      expect(points).toBeLessThan(one!.judged);
    }
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
});
