import { earlyDrawing } from '../../../src/answers/watch/earlyDrawing.ts';
import { earlyFindings } from '../../../src/answers/watch/earlyFindings.ts';
import type { Watched } from '../../../src/answers/watch/watchAccounts.ts';
import type { Census } from '../../../src/census/types.ts';
import { seededUniform } from '../../../src/charts/random/uniform.ts';
import { bernoulliCusum } from '../../../src/charts/sums/bernoulliCusum.ts';
import { buildWatch } from '../../../src/charts/sums/watchDesign.ts';
import { dayFromIso } from '../../../src/days.ts';
import type { EarlyDrawing } from '../../../src/picture/questions/early.ts';

const first = dayFromIso('2025-01-06')!;

/** A watch over accounts that start three a day; the i-th is lost with this chance. */
export function watchedExample(accounts: number, rate: (i: number) => number, usual = 0.06, seed = 8): Watched {
  const uniform = seededUniform(seed);
  const losses = Int32Array.from(
    Array.from({ length: accounts }, (_, i) => (uniform() < rate(i) ? i + 1 : 0)).filter((place) => place > 0),
  );
  const watch = buildWatch(usual, { rise: 1.5, fall: 0.5 }, Math.max(2_190, 100 / Math.min(usual, 1 - usual)));
  return {
    watch,
    baselinePoints: 25,
    baseline: { accounts: 2_500, lost: Math.round(2_500 * usual) },
    accounts,
    losses,
    rise: bernoulliCusum(watch.rise, losses, accounts),
    fall: bernoulliCusum(watch.fall, losses, accounts),
    startOf: (place) => first + Math.floor((place - 1) / 3),
    lostAfter: (place) => losses.filter((loss) => loss > place).length,
  };
}

/** What "early" says and draws about it. */
export function earlyExample(watched: Watched, inflowPerWeek = 21): EarlyDrawing {
  const census = {
    request: { tenure: { count: 3, unit: 'month' }, settleDays: 0, subgroupSize: 100 },
    waiting: watched.accounts % 100,
    inflowPerWeek,
  } as Census;
  const found = earlyFindings(watched, census, {
    tenure: '3 months',
    segment: null,
    overdispersed: false,
    mixMoved: false,
    verdict: 'Churn is steady: the usual 6.0 % are lost within 3 months.',
  });
  return earlyDrawing(watched, found, 'Marrowby Seed Club export', dayFromIso('2026-06-30')!);
}
