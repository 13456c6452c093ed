import { flag, type Making, makeInput } from './inputs.ts';

const STEADY = 'Churn is steady: the usual 6.1 % are lost within 3 months.';
const WOULD_SEE = { rise: 0.089, fall: 0.036, chance: 0.8 };

/** Every state a reader can meet, by name. */
export const makings: Record<string, Making> = {
  risen: {
    points: 57,
    rate: 0.06,
    moved: { from: 40, rate: 0.1, candidates: [37, 43] },
    outcome: 'risen',
    headline:
      'Churn has risen: about 10.5 % are lost within 3 months among accounts that started from about 11 December 2024, up from 6.2 % before.',
    signals: [
      flag(2, [41, 52], 'above', 'standing', 'nine points in a row above the usual level'),
      flag(5, [44, 48], 'above', 'standing', 'two of three points far above the usual level'),
      flag(1, [12, 12], 'above', 'passed', 'one point above what chance alone allows'),
    ],
  },
  fallen: {
    points: 48,
    size: 180,
    rate: 0.085,
    moved: { from: 33, rate: 0.04, candidates: [33, 34] },
    outcome: 'fallen',
    headline:
      'Churn has fallen for Orchard: about 3.8 % are lost within 3 months among accounts that started from about 7 August 2024, down from 8.8 % before.',
    signals: [
      flag(1, [34, 38], 'below', 'standing', 'one point below what chance alone allows'),
      flag(2, [33, 48], 'below', 'standing', 'sixteen points in a row below the usual level'),
    ],
    waiting: { accounts: 122, of: 180, on: 20245 },
    immature: 1240,
  },
  steady: { points: 44, rate: 0.061, outcome: 'steady', headline: STEADY, wouldSee: WOULD_SEE },
  watching: {
    points: 41,
    rate: 0.061,
    seed: 11,
    outcome: 'steady',
    headline: 'Churn is steady: the usual 6.3 % are lost within 3 months, with one thing to watch.',
    signals: [flag(1, [41, 41], 'above', 'watching', 'one point above what chance alone allows')],
    counts: Array.from({ length: 41 }, (_, i) => (i === 40 ? 14 : [5, 4, 7, 6, 3, 5, 8, 5][i % 8]!)),
  },
  passed: {
    points: 52,
    rate: 0.06,
    seed: 21,
    moved: undefined as never,
    outcome: 'steady',
    headline: STEADY,
    wouldSee: WOULD_SEE,
    signals: [flag(2, [29, 38], 'below', 'passed', 'nine points in a row below the usual level')],
  },
  'too-early-none': {
    points: 0,
    rate: 0,
    outcome: 'too-early',
    headline:
      'Too early to say whether churn has moved: only 37 accounts have had 3 months to leave or stay; about 640 more are needed.',
    next: ['Ask again after 3 July 2025, when the first point can be drawn; a usual level needs about 25 points.'],
  },
  'too-early-few': {
    points: 5,
    rate: 0.07,
    outcome: 'too-early',
    headline:
      'Too early to say whether churn has moved: only 425 accounts have had 3 months to leave or stay; about 255 more are needed.',
    next: ['Ask again in November 2025.'],
  },
  'cannot-say': {
    points: 36,
    rate: 0.07,
    moved: undefined as never,
    outcome: 'cannot-say',
    headline: 'Cannot say whether churn has moved: the stretch that should set the usual level was not steady itself.',
    cautions: [
      'The first 25 points fall apart into two levels, about 5 % before 12 June 2023 and about 9 % after it.',
      'The Orchard plan and the Windowsill plan differ clearly (11 % against 4 %) and are pooled here.',
      'Two sources seem to take turns.',
    ],
    split: { after: 9 },
    signals: [flag(4, [8, 24], 'both', 'standing', 'fourteen points alternating up and down')],
  },
  'mix-change': {
    points: 46,
    rate: 0.07,
    seed: 5,
    outcome: 'steady',
    headline:
      'Churn is steady within each group; the overall figure went from 6.1 % to 8.4 % because the mix moved: Windowsill grew from 30 % to 62 % of the accounts.',
    wouldSee: { rise: null, fall: null, chance: 0.8 },
  },
  counts: {
    points: 30,
    size: 50,
    rate: 0.23,
    dated: false,
    outcome: 'steady',
    headline: 'No sign that the rate has moved: 23 % over 30 points.',
    waiting: null,
    immature: 0,
    measure: 'share counted',
    subject: 'counts given on the command line',
  },
  eight: {
    points: 8,
    rate: 0.07,
    outcome: 'too-early',
    headline: 'Too early to tell: 8 points so far.',
  },
  'four-hundred': {
    points: 400,
    rate: 0.06,
    moved: { from: 310, rate: 0.082, candidates: [288, 331] },
    daysPerPoint: 3,
    outcome: 'risen',
    headline: 'Yes, churn has risen: about 8 % of accounts are lost within 3 months, against 6 % before.',
    signals: [
      flag(2, [318, 333], 'above', 'standing', 'sixteen points in a row above the usual level'),
      flag(6, [350, 371], 'above', 'standing', 'four of five points clearly above the usual level'),
      ...[40, 77, 101, 133, 160, 188, 202, 240, 266].map((at, i) =>
        flag(
          i % 2 === 0 ? 1 : 5,
          [at, at + (i % 4) * 3],
          i % 3 === 0 ? 'below' : 'above',
          'passed',
          i % 2 === 0 ? 'one point beyond what chance alone allows' : 'two of three points far from the usual level',
        ),
      ),
    ],
  },
  rare: {
    points: 40,
    size: 1600,
    rate: 0.003,
    outcome: 'steady',
    headline: 'Churn is steady: the usual 0.39 % are lost within 1 month.',
    wouldSee: { rise: 0.0071, fall: null, chance: 0.8 },
    measure: 'lost within 1 month of starting',
    waiting: { accounts: 900, of: 1600, on: null },
  },
  frequent: {
    points: 40,
    size: 120,
    rate: 0.6,
    moved: { from: 30, rate: 0.72, candidates: [28, 31] },
    outcome: 'risen',
    headline: 'Yes, churn has risen: about 72 % are lost within 12 months, against 60 % before.',
    measure: 'lost within 12 months of starting',
    signals: [flag(6, [30, 40], 'above', 'standing', 'four of five points clearly above the usual level')],
  },
  unequal: {
    points: 36,
    size: (i) => 60 + ((i * 37) % 90),
    rate: 0.09,
    outcome: 'steady',
    headline: STEADY,
    wouldSee: WOULD_SEE,
    cautions: ['The months differ in size by more than 25 %; the limits therefore change from point to point.'],
    waiting: null,
  },
  excluded: {
    points: 40,
    rate: 0.062,
    excluded: [9, 10],
    outcome: 'steady',
    headline: STEADY,
    wouldSee: WOULD_SEE,
    counts: Array.from({ length: 40 }, (_, i) => (i === 8 ? 15 : i === 9 ? 13 : [5, 4, 7, 6, 3, 5, 8, 5, 6][i % 9]!)),
  },
  provisional: {
    points: 18,
    rate: 0.062,
    outcome: 'steady',
    headline: STEADY,
    wouldSee: WOULD_SEE,
    cautions: ['Fewer than 25 points: a later answer may differ.'],
    daysPerPoint: 6,
  },
  busy: {
    points: 70,
    rate: 0.06,
    moved: { from: 66, rate: 0.13, candidates: [64, 67] },
    outcome: 'risen',
    headline: 'Yes, churn has risen: about 13 % of accounts are lost within 3 months, against 6 % before.',
    signals: [
      flag(1, [67, 69], 'above', 'standing', 'three points above what chance alone allows'),
      flag(5, [66, 70], 'above', 'standing', 'two of three points far above the usual level'),
      flag(2, [50, 60], 'below', 'passed', 'eleven points in a row below the usual level'),
      flag(1, [3, 3], 'above', 'passed', 'one point above what chance alone allows'),
      flag(5, [14, 16], 'below', 'passed', 'two of three points far below the usual level'),
      flag(3, [30, 36], 'both', 'passed', 'six points in a row steadily rising'),
      flag(1, [44, 44], 'above', 'passed', 'one point above what chance alone allows'),
    ],
    cautions: ['41 accounts returned after a gap; they are counted lost at the end of their first stay.'],
  },
  'all-zero': {
    points: 12,
    rate: 0,
    outcome: 'steady',
    headline: 'No account was lost in any of the 12 points.',
  },
  'all-one': {
    points: 12,
    rate: 1,
    outcome: 'steady',
    headline: 'Every account was lost in each of the 12 points.',
  },
  single: {
    points: 1,
    rate: 0.07,
    outcome: 'too-early',
    headline: 'Too early to tell: there is one point so far.',
  },
  'early-move': {
    points: 34,
    rate: 0.06,
    baseline: 25,
    moved: { from: 28, rate: 0.13, candidates: [27, 28] },
    outcome: 'risen',
    headline: 'Yes, churn has risen: about 13 % of accounts are lost within 3 months, against 6 % before.',
    signals: [
      flag(1, [28, 34], 'above', 'standing', 'one point above what chance alone allows'),
      flag(1, [2, 2], 'above', 'passed', 'one point above what chance alone allows'),
    ],
    subject:
      'marrowby_seed_club_subscriptions_full_history_2021_to_2025_corrected_final_v3_with_returns.csv, plan “Allotment” & “Orchard” <gardeners>, 種 club',
  },
};

export function state(name: keyof typeof makings): ReturnType<typeof makeInput> {
  const making = makings[name];
  if (!making) throw new Error(`no such state: ${name}`);
  return makeInput(making);
}
