import normalCdf from '@stdlib/stats-base-dists-normal-cdf';
import { describe, expect, test } from 'vitest';
import { seededUniform } from '../../src/charts/random/uniform.ts';
import { PatternMachine, patternMask } from '../../src/charts/tests/patterns.ts';
import type { TestNumber } from '../../src/charts/types.ts';
import { checkValue, checkValues } from './checkValues.ts';

/*
 * The pattern machine only sees zones and moves, so that normal points need not be made: a uniform number stands for the normal value
 * whose cumulative chance it is, zones are cut at the chances of the sigma lines, and order is the same.
 */
function normalZones(shift: number): (u: number) => number {
  const cuts = [-3, -2, -1, 0, 1, 2, 3].map((line) => normalCdf(line - shift, 0, 1));
  const zones = [-4, -3, -2, -1, 1, 2, 3, 4];
  return (u) => {
    let i = 0;
    while (i < cuts.length && u > cuts[i]!) i++;
    return zones[i]!;
  };
}

/** Mean and standard error of the number of points to the first flag, over as many runs as fit into the points. */
function runLength(tests: readonly TestNumber[], shift: number, points: number, seed: number) {
  const zone = normalZones(shift);
  const uniform = seededUniform(seed);
  const machine = new PatternMachine();
  const mask = patternMask(tests);
  let runs = 0;
  let sum = 0;
  let squares = 0;
  while (sum < points) {
    machine.reset();
    let length = 0;
    let previous = 0;
    let flagged = false;
    while (!flagged) {
      const u = uniform();
      flagged = (machine.push(zone(u), length === 0 ? 0 : Math.sign(u - previous)) & mask) !== 0;
      previous = u;
      length++;
    }
    runs++;
    sum += length;
    squares += length * length;
  }
  const mean = sum / runs;
  return { mean, error: Math.sqrt((squares / runs - mean * mean) / runs), runs };
}

function expectWithinFourErrors(found: { mean: number; error: number }, expected: number, referenceError = 0): void {
  const error = Math.hypot(found.error, referenceError);
  expect(Math.abs(found.mean - expected) / error, `${found.mean} against ${expected}, error ${error}`).toBeLessThan(4);
}

const POINTS = 400_000;

interface Shifted {
  shifts: number[];
}

describe('run lengths of the pattern machine on normal points are the exact ones', () => {
  // Champ and Woodall number their rules otherwise: 2 is Nelson's 5, 3 is Nelson's 6, and 4, when of nine points, is Nelson's 2.
  const asNelson: [string, TestNumber[]][] = [
    ['arl-cw-1', [1]],
    ['arl-cw-12', [1, 5]],
    ['arl-cw-13', [1, 6]],
    ['arl-run9-14', [1, 2]],
    ['arl-run9-124', [1, 2, 5]],
    ['arl-run9-134', [1, 2, 6]],
    ['arl-run9-1234', [1, 2, 5, 6]],
  ];
  for (const [id, tests] of asNelson) {
    const { inputs, expected, cited } = checkValue<Shifted, number[]>(id);
    test(`tests ${tests.join(', ')} at shifts of 0, 1 and 2 sigma: ${cited}`, () => {
      for (const shift of [0, 1, 2]) {
        const exact = expected[inputs.shifts.indexOf(shift)]!;
        expectWithinFourErrors(runLength(tests, shift, POINTS, 100 + shift), exact);
      }
    });
  }

  for (const { inputs, expected, cited } of checkValues<Shifted & { tests: string }, number[]>('arl-nelson_')) {
    test(`tests ${inputs.tests} with nothing changed and at half a sigma: ${cited}`, () => {
      const tests = inputs.tests.match(/\d/g)!.map(Number) as TestNumber[];
      expectWithinFourErrors(runLength(tests, 0, POINTS, 7), expected[0]!);
      expectWithinFourErrors(runLength(tests, 0.5, POINTS, 8), expected[inputs.shifts.indexOf(0.5)]!);
    });
  }

  const alone: [string, TestNumber][] = [
    ['1-beyond-3-sigma', 1],
    ['9-in-a-row-one-side', 2],
    ['6-rising-or-falling', 3],
    ['14-alternating', 4],
    ['2-of-3-beyond-2-sigma', 5],
    ['4-of-5-beyond-1-sigma', 6],
    ['15-within-1-sigma', 7],
    ['8-beyond-1-sigma,-both-sides-needed', 8],
  ];
  for (const [id, number] of alone) {
    const { expected, cited } = checkValue<unknown, number>(`arl-alone-${id}`);
    test(`test ${number} alone: ${cited}`, () => {
      expectWithinFourErrors(runLength([number], 0, number === 8 ? 5 * POINTS : POINTS, 9), expected);
    });
  }

  const simulated: [string, TestNumber[], number, number][] = [
    ['arl-sim-nelson-1234', [1, 2, 3, 4], 0, 0.02541],
    ['arl-sim-nelson-123456', [1, 2, 3, 4, 5, 6], 0, 0.01663],
    ['arl-sim-nelson-12345678', [1, 2, 3, 4, 5, 6, 7, 8], 0, 0.01528],
    ['arl-sim-nelson-12345678-shift1', [1, 2, 3, 4, 5, 6, 7, 8], 1, 0.0048],
  ];
  for (const [id, tests, shift, referenceError] of simulated) {
    const { expected, cited } = checkValue<unknown, number>(id);
    test(`${id}, against another program's simulation: ${cited}`, () => {
      expectWithinFourErrors(runLength(tests, shift, POINTS, 10), expected, referenceError);
    });
  }
});

describe('chance that a pattern holds at a given point', () => {
  test('of each of the eight tests on one long stream of normal points', () => {
    const BATCHES = 200;
    const LENGTH = 8_000;
    const ids: [string, TestNumber][] = [
      ['t1', 1],
      ['t2', 2],
      ['t3', 3],
      ['t4', 4],
      ['t5_window', 5],
      ['t6_window', 6],
      ['t7', 7],
      ['t8_both', 8],
    ];
    const machine = new PatternMachine();
    const zone = normalZones(0);
    const uniform = seededUniform(11);
    const means = ids.map(() => [] as number[]);
    const masks = ids.map(([, number]) => patternMask([number]));
    let previous = uniform();
    for (let batch = 0; batch < BATCHES; batch++) {
      const held = ids.map(() => 0);
      for (let i = 0; i < LENGTH; i++) {
        const u = uniform();
        const holds = machine.push(zone(u), Math.sign(u - previous));
        previous = u;
        masks.forEach((mask, k) => {
          if ((holds & mask) !== 0) held[k]!++;
        });
      }
      held.forEach((count, k) => void means[k]!.push(count / LENGTH));
    }
    ids.forEach(([id, number], k) => {
      const batches = means[k]!;
      const mean = batches.reduce((sum, x) => sum + x, 0) / BATCHES;
      const error = Math.sqrt(batches.reduce((sum, x) => sum + (x - mean) ** 2, 0) / BATCHES / (BATCHES - 1));
      const { expected } = checkValue<unknown, number>(`nelson-prob-${id}`);
      expect(Math.abs(mean - expected) / error, `test ${number}: ${mean}`).toBeLessThan(4);
    });
  });

  test('of a false flag within the first m points, of three sets of tests', () => {
    const HISTORIES = 20_000;
    const sets: [string, TestNumber[]][] = [
      ['1', [1]],
      ['14_9', [1, 2]],
      ['1256_9', [1, 2, 5, 6]],
    ];
    const masks = sets.map(([, tests]) => patternMask(tests));
    const firsts = sets.map(() => [] as number[]);
    const zone = normalZones(0);
    const uniform = seededUniform(12);
    const machine = new PatternMachine();
    for (let history = 0; history < HISTORIES; history++) {
      machine.reset();
      const first = sets.map(() => Number.POSITIVE_INFINITY);
      for (let i = 1; i <= 50; i++) {
        // The three sets do not look at moves.
        const holds = machine.push(zone(uniform()), 0);
        if (holds !== 0) {
          masks.forEach((mask, k) => {
            if ((holds & mask) !== 0) first[k] = Math.min(first[k]!, i);
          });
        }
      }
      first.forEach((point, k) => void firsts[k]!.push(point));
    }
    sets.forEach(([id], k) => {
      const { inputs, expected } = checkValue<{ m: number[] }, number[]>(`false-signal-within-${id}`);
      inputs.m.forEach((m, i) => {
        const share = firsts[k]!.filter((point) => point <= m).length / HISTORIES;
        const error = Math.sqrt((expected[i]! * (1 - expected[i]!)) / HISTORIES);
        expect(Math.abs(share - expected[i]!) / error, `set ${id} within ${m}`).toBeLessThan(4);
      });
    });
  });
});
