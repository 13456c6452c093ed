import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { drawPlate } from '../../../src/picture/picture.ts';
import { earlyAltText, earlyScene, noWatchScene } from '../../../src/picture/questions/early.ts';
import { earlyFigures, earlyWords } from '../../../src/verdict/questions/early.ts';
import { faults } from '../faults.ts';
import { normalised } from '../normalised.ts';
import { earlyExample, watchedExample } from './earlyExample.ts';

describe('the picture of the early watch', () => {
  it('in alarm draws as it did when somebody last looked at it', async () => {
    const drawing = earlyExample(watchedExample(1_250, (i) => (i < 700 ? 0.06 : 0.11)));
    const picture = await drawPlate(earlyScene(drawing), earlyAltText(drawing));
    expect(picture.altText).toMatch(
      /^Early watch: alarm, a rise\. Two sums over 1,250 accounts of Marrowby Seed Club export/,
    );
    expect(picture.altText).toMatch(/towards a rise to 9\.0 % the sum stands at \d{3} % of the way to its alarm/);
    await expect(normalised(picture.svg)).toMatchFileSnapshot('../../pictures/early-alarm.svg');
  });

  it('quiet draws as it did when somebody last looked at it', async () => {
    const drawing = earlyExample(watchedExample(1_250, () => 0.06));
    const picture = await drawPlate(earlyScene(drawing), earlyAltText(drawing));
    await expect(normalised(picture.svg)).toMatchFileSnapshot('../../pictures/early-quiet.svg');
  });

  it('has no fault, whatever the accounts: one, all lost, none lost, a long alarm, a very long watch', () => {
    for (const watched of [
      watchedExample(1, () => 0),
      watchedExample(1, () => 1),
      watchedExample(400, () => 1),
      watchedExample(4_000, () => 0),
      watchedExample(2, () => 0.5),
      watchedExample(60_000, () => 0.06),
      watchedExample(30_000, () => 0.3),
      watchedExample(2_000, () => 0.02, 0.002),
      watchedExample(2_000, () => 0.99, 0.97),
    ]) {
      const drawing = earlyExample(watched);
      expect(faults(earlyScene(drawing))).toEqual([]);
      const verdict = { outcome: 'risen', headline: 'Churn has risen: about 9.0 % are lost within 3 months.' } as const;
      expect(faults(earlyScene({ ...drawing, verdict }))).toEqual([]);
    }
  });

  it('shows only the newest stretch of a long quiet watch, and all of a climb that goes on', () => {
    const quiet = earlyExample(watchedExample(60_000, () => 0.06, 0.06, 12));
    expect(quiet.from).toBeGreaterThan(45_000);
    expect(earlyAltText(quiet)).toMatch(/the newest [\d,]+ of 60,000 accounts/);
    const alarm = earlyExample(watchedExample(60_000, (i) => (i < 10_000 ? 0.06 : 0.12)));
    expect(alarm.from).toBeLessThan(10_600);
  });

  it('without a usual level gives the reason, and nothing else', () => {
    const scene = noWatchScene(
      'No early watch is possible: it needs a usual level to watch against.',
      'export',
      20_000,
    );
    expect(faults(scene)).toEqual([]);
    expect(scene.polylines ?? []).toEqual([]);
  });
});

describe('the words of the early watch', () => {
  it('hold for any history: whole sentences, no figure that is none, and the state that the sums have', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 3_000 }),
        fc.double({ min: 0, max: 1, noNaN: true }),
        fc.double({ min: 0.01, max: 0.9, noNaN: true }),
        fc.integer({ min: 0, max: 1_000 }),
        fc.constantFrom(0, 0.3, 21, 5_000),
        (accounts, rate, usual, seed, inflow) => {
          const { found } = earlyExample(
            watchedExample(accounts, () => rate, usual, seed),
            inflow,
          );
          const { headline, evidence, cautions, next } = earlyWords(found);
          for (const sentence of [headline, ...evidence, ...cautions, ...next]) {
            expect(sentence).toMatch(/^[A-Z]/);
            expect(sentence).toMatch(/[.?!]$/);
            expect(sentence).not.toMatch(/NaN|Infinity|undefined|null|\[object| ,| \.|\.\.| {2}/);
          }
          const figures = JSON.stringify(earlyFigures(found));
          expect(figures).not.toMatch(/NaN|Infinity/);
          const highest = Math.max(found.rise.share, found.fall.share);
          expect(headline).toMatch(
            highest >= 1 ? /has raised an alarm/ : highest >= 0.5 ? /is climbing: \d\d % of the way/ : /is quiet/,
          );
        },
      ),
      { numRuns: 60 },
    );
  });

  it('say how often a climb like this comes about with nothing changed', () => {
    const climbing = Array.from({ length: 60 }, (_, seed) =>
      earlyExample(watchedExample(900, () => 0.06, 0.06, seed)),
    ).find(({ found }) => found.rise.share >= 0.5 && found.rise.share < 1)!;
    const { headline, evidence, next } = earlyWords(climbing.found);
    expect(headline).toMatch(
      /^The early watch is climbing: \d\d % of the way to an alarm for a rise to 9\.0 % from the usual 6\.0 % lost/,
    );
    expect(evidence[0]).toMatch(
      /with nothing changed it gets this far about once in [\d,]+ accounts\. Since it was last at zero, /,
    );
    // One sum alone comes to its limit half as often as either of the two.
    expect(climbing.found.rise.likeThisEvery).toBeLessThan(2.2 * climbing.found.falseAlarmEvery.accounts);
    expect(next[0]).toMatch(/^Nothing to decide yet/);
  });

  it('take a moving mix, a provisional level and too much spread into the cautions', () => {
    const { found } = earlyExample(watchedExample(900, () => 0.06));
    const { cautions } = earlyWords({ ...found, mixMoved: true, provisional: true, overdispersed: true });
    expect(cautions.join(' ')).toMatch(/mix of groups has moved.*provisional.*overdispersion/);
  });
});
