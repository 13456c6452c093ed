import type { Chart, ChartPoint, Side, TestNumber } from '../../src/charts/types.ts';
import { dayFromIso } from '../../src/days.ts';
import type { Outcome, PictureInput, Signal, SignalState } from '../../src/verdict/types.ts';

/*
 * Picture inputs as the verdict would hand them over, made by plain code of the test's own: counts from a seeded generator, limits from
 * the textbook formula, flags placed by hand. The business is invented.
 */

/** A small seeded generator of numbers in [0, 1). */
export function seeded(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
}

export interface Making {
  readonly seed?: number;
  readonly points: number;
  readonly size?: number | ((index: number) => number);
  readonly rate: number;
  /** rate from this point on */
  readonly moved?: {
    readonly from: number;
    readonly rate: number;
    readonly candidates: readonly [number, number];
  };
  readonly baseline?: number;
  readonly excluded?: readonly number[];
  readonly counts?: readonly number[];
  readonly outcome: Outcome;
  readonly headline: string;
  readonly signals?: readonly Signal[];
  readonly cautions?: readonly string[];
  readonly next?: readonly string[];
  readonly dated?: boolean;
  readonly firstStart?: string;
  readonly daysPerPoint?: number;
  readonly waiting?: PictureInput['waiting'];
  readonly immature?: number;
  readonly wouldSee?: PictureInput['wouldSee'];
  readonly split?: PictureInput['split'];
  readonly measure?: string;
  readonly subject?: string;
}

export function flag(
  test: TestNumber,
  members: readonly [number, number],
  side: Side,
  state: SignalState,
  words: string,
): Signal {
  const speaks = test === 4 || test === 7 || test === 8 ? 'cut' : 'shift';
  return {
    test,
    side,
    point: members[1],
    members,
    until: members[1],
    speaks,
    state,
    words,
  };
}

export function day(iso: string): number {
  const found = dayFromIso(iso);
  if (found === undefined) throw new Error(`no such day: ${iso}`);
  return found;
}

export function makeInput(making: Making): PictureInput {
  const random = seeded(making.seed ?? 7);
  const sizeAt = (i: number): number => (typeof making.size === 'function' ? making.size(i) : (making.size ?? 85));
  const counts = Array.from({ length: making.points }, (_, i) => {
    const accounts = sizeAt(i + 1);
    const rate = making.moved && i + 1 >= making.moved.from ? making.moved.rate : making.rate;
    let lost = 0;
    for (let a = 0; a < accounts; a++) if (random() < rate) lost++;
    return { accounts, lost: making.counts?.[i] ?? lost };
  });
  const excluded = making.excluded ?? [];
  const last = Math.min(making.baseline ?? 25, making.points);
  const used = counts.slice(0, last).filter((_, i) => !excluded.includes(i + 1));
  const accounts = used.reduce((sum, one) => sum + one.accounts, 0);
  const lost = used.reduce((sum, one) => sum + one.lost, 0);
  const center = accounts === 0 ? 0 : lost / accounts;
  const points = counts.map((one, i): ChartPoint => {
    const sigma = Math.sqrt((center * (1 - center)) / one.accounts);
    return {
      index: i + 1,
      ...one,
      value: one.lost / one.accounts,
      sigma,
      lower: Math.max(0, center - 3 * sigma),
      upper: Math.min(1, center + 3 * sigma),
    };
  });
  const chart: Chart | null =
    making.points === 0
      ? null
      : {
          kind: 'p',
          sigmaZ: 1,
          subgroupSize: typeof making.size === 'function' ? null : (making.size ?? 85),
          center,
          baseline: {
            first: 1,
            last,
            excluded,
            provisional: last < 25,
            accounts,
            lost,
          },
          points,
        };
  const pooled = (from: number, to: number) => {
    const part = counts.slice(from - 1, to);
    const n = part.reduce((sum, one) => sum + one.accounts, 0);
    const k = part.reduce((sum, one) => sum + one.lost, 0);
    const half = 1.96 * Math.sqrt(((k / n) * (1 - k / n)) / n);
    return {
      rate: k / n,
      low: Math.max(0, k / n - half),
      high: Math.min(1, k / n + half),
      lost: k,
      accounts: n,
    };
  };
  const start = day(making.firstStart ?? '2023-01-09');
  const every = making.daysPerPoint ?? 18;
  const dated = making.dated ?? true;
  const dates = counts.map((_, i) =>
    dated
      ? {
          firstStart: start + i * every,
          lastStart: start + (i + 1) * every - 1,
          asOf: start + (i + 1) * every + 90,
        }
      : { firstStart: null, lastStart: null, asOf: null },
  );
  const { moved } = making;
  const before = moved ? pooled(1, moved.from - 1) : null;
  const after = moved ? pooled(moved.from, making.points) : null;
  const difference = before && after ? { estimate: after.rate - before.rate, low: -0.01, high: 0.01 } : null;
  return {
    chart,
    dates,
    signals: making.signals ?? [],
    verdict: {
      outcome: making.outcome,
      headline: making.headline,
      evidence: [],
      cautions: making.cautions ?? [],
      next: making.next ?? [],
      since: moved
        ? {
            point: moved.from,
            start: dates[moved.from - 1]?.firstStart ?? null,
            candidates: moved.candidates,
          }
        : null,
      before,
      after,
      difference,
    },
    waiting: making.waiting === undefined ? { accounts: 37, of: 85, on: day('2025-12-03') } : making.waiting,
    immature: making.immature ?? 412,
    ...(making.wouldSee === undefined ? {} : { wouldSee: making.wouldSee }),
    ...(making.split === undefined ? {} : { split: making.split }),
    measure: making.measure ?? 'lost within 3 months of starting',
    subject: making.subject ?? 'Marrowby Seed Club export, all plans',
    asOf: dated ? start + making.points * every + 120 : null,
  };
}
