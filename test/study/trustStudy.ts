import { simulateHistory } from '../../fixtures/generate/history.ts';
import { historyParameters } from '../../fixtures/generate/scenarios.ts';
import { binomialSampler } from '../../src/charts/random/binomialSampler.ts';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { chartRunLength } from '../../src/charts/runLength/chartRunLength.ts';
import { estimatedRunLength } from '../../src/charts/runLength/estimatedRunLength.ts';
import { nelsonTests } from '../../src/charts/tests/nelsonTests.ts';
import type { Chart, ShiftTest, TestNumber } from '../../src/charts/types.ts';
import type { Scope } from '../../src/requests/types.ts';
import { chartAndJudge } from '../../src/verdict/chartAndJudge.ts';
import type { Finding, Judgement } from '../../src/verdict/judgement.ts';
import { answerOf } from './study.ts';

/*
 * Are the figures of trust true? Histories in which nothing changed are judged; each judgement states how often its chart raises a false
 * flag, and which rise and fall it would by now have reported in 80 of 100 cases. The first is compared with the flags that were really
 * raised after the baseline; for the second, the same history goes on from the point that was named at just the stated rate, is judged, and
 * it is seen whether the move is reported.
 */

/** One unchanged history, judged, and the means to judge what it would have been had the rate moved to `rate` where the figure says. */
export interface Judged {
  readonly chart: Chart;
  readonly judgement: Judgement;
  readonly withMove: (rate: number) => Promise<Finding>;
}

export type Source = (seed: number) => Promise<Judged>;

/** Whole exports of the invented business, handed in as files and asked about. */
export function fromExports(folder: string, tests?: readonly ShiftTest[]): Source {
  const scope: Scope = tests ? { tests } : {};
  const { rate: usual } = historyParameters('no-shift');
  return async (seed) => {
    const { chart, judgement, dates, tenure } = await answerOf(simulateHistory('no-shift', seed), seed, folder, scope);
    // The very design that the figure was stated for.
    const design: Scope = {
      ...scope,
      tenure: tenure!,
      subgroupSize: chart!.subgroupSize!,
      baseline: chart!.baseline.last,
      chart: chart!.kind,
    };
    // The day after the last point that is to stay as it was.
    const changeDate = dates[judgement!.wouldSeeFrom - 2]!.lastStart! + 1;
    return {
      chart: chart!,
      judgement: judgement!,
      async withMove(rate) {
        const history = simulateHistory({ name: 'no-shift', factor: rate / usual, changeDate }, seed);
        const moved = await answerOf(history, seed, folder, design);
        const before = ({ points }: Chart): number[] =>
          points.slice(0, judgement!.wouldSeeFrom - 1).map((point) => point.lost);
        if (before(moved.chart!).join() !== before(chart!).join()) throw new Error(`${seed}: the past has changed too`);
        return moved.judgement!.finding;
      },
    };
  };
}

/** Counts alone, charted and judged: without files, for a study that must be short. */
export function fromCounts(size: number, points: number, usual: number, tests?: readonly ShiftTest[]): Source {
  const drawn = (seed: number, rateAt: (point: number) => number) => {
    const uniform = seededUniform(seed);
    return Array.from({ length: points }, (_, i) => ({
      accounts: size,
      lost: binomialSampler(size, rateAt(i + 1)).draw(uniform),
    }));
  };
  const chosen = tests ? { tests } : {};
  return async (seed) => {
    const { chart, judgement } = chartAndJudge({ counts: drawn(seed, () => usual), ...chosen, kind: 'p' });
    return {
      chart,
      judgement,
      async withMove(rate) {
        const counts = drawn(seed, (point) => (point < judgement.wouldSeeFrom ? usual : rate));
        const moved = chartAndJudge({
          counts,
          ...chosen,
          kind: 'p',
          baselineLast: chart.baseline.last,
          runLength: false,
        });
        return moved.judgement.finding;
      },
    };
  };
}

export interface TrustCase {
  readonly seed: number;
  /** points judged after the baseline, and the first of them at which a flag was raised; null when none was */
  readonly judged: number;
  readonly flaggedAt: number | null;
  /** the figure stated for a level that is known, and the one for a level that is estimated */
  readonly statedEvery: number;
  readonly statedEstimated: number;
  /** chance of a flag within the judged points, and points expected until it or the end: with the level known, and with it estimated */
  readonly known: Expected;
  readonly estimated: Expected;
  /** whether the history with just the stated rise (fall) reads as risen (fallen); null when none was stated */
  readonly riseSeen: boolean | null;
  readonly fallSeen: boolean | null;
}

export interface Expected {
  readonly flag: number;
  readonly points: number;
}

/** Histories whose chart could not be judged, or has no points after its baseline, are left out. */
export async function runTrustStudy(
  source: Source,
  histories: number,
  firstSeed: number,
  progress: (done: number) => void = () => undefined,
): Promise<TrustCase[]> {
  const cases: TrustCase[] = [];
  for (let i = 0; i < histories; i++) {
    const seed = firstSeed + i;
    const judged = await source(seed);
    const { trust } = judged.judgement;
    // Where the level was not steady the figure is not told.
    const told = judged.judgement.finding !== 'unsteady-baseline';
    const seen = async (rate: number | null | undefined, finding: Finding): Promise<boolean | null> =>
      !told || rate === null || rate === undefined ? null : (await judged.withMove(rate)) === finding;
    if (trust.settings && judged.chart.baseline.last < judged.chart.points.length)
      cases.push({
        seed,
        ...falseFlags(judged),
        riseSeen: await seen(trust.wouldSee?.rise, 'risen'),
        fallSeen: await seen(trust.wouldSee?.fall, 'fallen'),
      });
    progress(i + 1);
  }
  return cases;
}

function falseFlags({ chart, judgement }: Judged): Omit<TrustCase, 'seed' | 'riseSeen' | 'fallSeen'> {
  const { center, baseline, sigmaZ, points } = chart;
  const { trust, dispersion } = judgement;
  const tests: readonly TestNumber[] = trust.settings!.tests;
  // From the first judged point on, as a run length counts: with no past.
  const after = points.slice(baseline.last).map(({ value, sigma }) => ({ value, center, sigma }));
  const first = nelsonTests(after).find((episode) => tests.includes(episode.test));
  const n = chart.subgroupSize!;
  const correlation = chart.kind === 'p-prime' ? Math.max(0, (dispersion!.ratio - 1) / (n - 1)) : 0;
  const design = { sizes: [n], center, sigmaZ, correlation, tests };
  const expected = (within: (m: number) => number): Expected => {
    let expectedPoints = 0;
    for (let m = 0; m < after.length; m++) expectedPoints += 1 - within(m);
    return { flag: within(after.length), points: expectedPoints };
  };
  return {
    judged: after.length,
    flaggedAt: first?.point ?? null,
    statedEvery: trust.falseAlarmEvery!,
    statedEstimated: trust.estimated!.falseAlarmEvery!,
    known: expected(chartRunLength(design, center).length!.within),
    estimated: expected(estimatedRunLength(design, center, baseline.accounts)!.within),
  };
}

const sum = (values: readonly number[]): number => values.reduce((total, value) => total + value, 0);

/** A share that was counted beside what was stated; the standard error is the counted share's, if the stated chances are right. */
export interface Share {
  readonly of: number;
  readonly counted: number;
  readonly stated: number;
  readonly standardError: number;
}

/** Points to a false flag: counted as all points looked at over all flags raised, and what the stated run lengths give, counted so. */
export interface Every {
  readonly counted: number;
  readonly stated: number;
  /** of the counted figure: it times one over the root of the flags */
  readonly standardError: number;
}

export function summariseTrust(cases: readonly TrustCase[]) {
  const flags = cases.filter(({ flaggedAt }) => flaggedAt !== null).length;
  const looked = sum(cases.map(({ flaggedAt, judged }) => flaggedAt ?? judged));
  const beside = (expected: (one: TrustCase) => Expected): { flagged: Share; every: Every } => {
    const chances = cases.map((one) => expected(one).flag);
    return {
      flagged: {
        of: cases.length,
        counted: flags / cases.length,
        stated: sum(chances) / cases.length,
        standardError: Math.sqrt(sum(chances.map((chance) => chance * (1 - chance)))) / cases.length,
      },
      every: {
        counted: looked / flags,
        stated: sum(cases.map((one) => expected(one).points)) / sum(chances),
        standardError: looked / flags ** 1.5,
      },
    };
  };
  const seen = (side: 'riseSeen' | 'fallSeen'): Share => {
    const told = cases.flatMap((one) => one[side] ?? []);
    return {
      of: told.length,
      counted: told.filter(Boolean).length / told.length,
      stated: 0.8,
      standardError: Math.sqrt((0.8 * 0.2) / told.length),
    };
  };
  return {
    histories: cases.length,
    statedEvery: sum(cases.map((one) => one.statedEvery)) / cases.length,
    statedEstimated: sum(cases.map((one) => one.statedEstimated)) / cases.length,
    known: beside((one) => one.known),
    estimated: beside((one) => one.estimated),
    rise: seen('riseSeen'),
    fall: seen('fallSeen'),
  };
}

/** The summary in lines: what was counted, what was stated, and the sampling error. */
export function trustLines(study: ReturnType<typeof summariseTrust>): string[] {
  const share = ({ counted, stated, standardError, of }: Share): string =>
    `${(100 * counted).toFixed(1)} of 100 (of ${of}), stated ${(100 * stated).toFixed(1)}, standard error ${(100 * standardError).toFixed(1)}`;
  const every = ({ counted, stated, standardError }: Every): string =>
    `one in ${counted.toFixed(1)} points, stated ${stated.toFixed(1)}, standard error ${standardError.toFixed(1)}`;
  return [
    `stated on average: one false flag in ${study.statedEvery.toFixed(1)} points with the level known, ${study.statedEstimated.toFixed(1)} with it estimated`,
    `flags counted after the baseline, against the figure for an estimated level: ${every(study.estimated.every)}`,
    `  charts with a flag: ${share(study.estimated.flagged)}`,
    `the same against the figure for a known level: ${every(study.known.every)}`,
    `  charts with a flag: ${share(study.known.flagged)}`,
    `stated rise read as risen: ${share(study.rise)}`,
    `stated fall read as fallen: ${share(study.fall)}`,
  ];
}
