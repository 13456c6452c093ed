import { describe, expect, test } from 'vitest';
import { exactRunLength } from '../../src/charts/runLength/exactRunLength.ts';
import { FLAGGED, zoneChain } from '../../src/charts/runLength/zoneChain.ts';
import { countZones, normalZones } from '../../src/charts/runLength/zoneChances.ts';
import type { ZoneTest } from '../../src/charts/runLength/zoneHistory.ts';
import { PatternMachine, patternMask } from '../../src/charts/tests/patterns.ts';
import { checkValue, checkValues } from './checkValues.ts';

/** Western Electric's four rules, and Champ and Woodall's, in Nelson's numbers; the run of rule 4 is given apart. */
const AS_NELSON: Readonly<Record<number, ZoneTest>> = { 1: 1, 2: 5, 3: 6, 4: 2 };

const near = (found: number | null, expected: number, tolerance: number): void =>
  expect(Math.abs(found! - expected), `${found} against ${expected}`).toBeLessThanOrEqual(tolerance);

interface Ruled {
  rules: number[];
  run: number;
  shifts: number[];
}

describe('mean run lengths on normal points, exact', () => {
  test.each([...checkValues<Ruled, number[]>('arl-cw-'), ...checkValues<Ruled, number[]>('arl-run9-')])(
    '$id, at every shift: $cited',
    ({ inputs, expected, tolerance }) => {
      const tests = inputs.rules.map((rule) => AS_NELSON[rule]!);
      inputs.shifts.forEach((shift, i) => {
        near(exactRunLength(normalZones(shift), tests, inputs.run).mean, expected[i]!, tolerance);
      });
    },
  );

  test.each(checkValues<{ tests: string; shifts: number[] }, number[]>('arl-nelson_'))(
    'tests $inputs.tests, at every shift: $cited',
    ({ inputs, expected, tolerance }) => {
      const tests = inputs.tests.match(/\d/g)!.map(Number) as ZoneTest[];
      inputs.shifts.forEach((shift, i) => {
        near(exactRunLength(normalZones(shift), tests).mean, expected[i]!, tolerance);
        // A shift down is a shift up in a mirror.
        near(exactRunLength(normalZones(-shift), tests).mean, expected[i]!, tolerance);
      });
    },
  );

  test.each<[string, ZoneTest, number]>([
    ['1-beyond-3-sigma', 1, 9],
    ['2-of-3-beyond-2-sigma', 5, 9],
    ['4-of-5-beyond-1-sigma', 6, 9],
    ['8-in-a-row-one-side', 2, 8],
    ['9-in-a-row-one-side', 2, 9],
    ['15-within-1-sigma', 7, 9],
    ['8-beyond-1-sigma,-both-sides-needed', 8, 9],
  ])('%s alone', (id, number, run) => {
    const { expected, tolerance } = checkValue<unknown, number>(`arl-alone-${id}`);
    near(exactRunLength(normalZones(0), [number], run).mean, expected, tolerance);
  });
});

describe('chance of a false flag within the first m normal points, exact', () => {
  const sets: Readonly<Record<string, [ZoneTest[], number]>> = {
    '1': [[1], 9],
    '14_8': [[1, 2], 8],
    '14_9': [[1, 2], 9],
    '1234_8': [[1, 2, 5, 6], 8],
    '1256_9': [[1, 2, 5, 6], 9],
  };
  const entries = checkValues<{ rules: string; m: number[] }, number[]>('false-signal-within-');
  test('of every published set of rules', () => {
    expect(entries.map(({ inputs }) => inputs.rules).sort()).toEqual(Object.keys(sets).sort());
  });
  test.each(entries)('$id: $cited', ({ inputs, expected, tolerance }) => {
    const [tests, run] = sets[inputs.rules]!;
    const { within } = exactRunLength(normalZones(0), tests, run);
    inputs.m.forEach((m, i) => void near(within(m), expected[i]!, tolerance));
  });
});

/** Every sequence of zones of this length with its chance on normal points. */
function forEachSequence(length: number, visit: (zones: readonly number[], chance: number) => void): void {
  const chances = normalZones(0);
  const zones: number[] = [];
  const extend = (chance: number): void => {
    if (zones.length === length) {
      visit(zones, chance);
      return;
    }
    for (let zone = -4; zone <= 4; zone++) {
      if (zone === 0) continue;
      zones.push(zone);
      extend(chance * chances[zone + 4]!);
      zones.pop();
    }
  };
  extend(1);
}

/** Chance that a test holds at the last of so many normal points, by going through all sequences of zones. */
function chanceHeld(
  number: ZoneTest,
  length: number,
  also: (zones: readonly number[]) => boolean = () => true,
): number {
  const mask = patternMask([number]);
  const machine = new PatternMachine();
  let sum = 0;
  forEachSequence(length, (zones, chance) => {
    machine.reset();
    let held = 0;
    for (const zone of zones) held = machine.push(zone, 0);
    if ((held & mask) !== 0 && also(zones)) sum += chance;
  });
  return sum;
}

describe('chance that a pattern holds at a given normal point, exact', () => {
  const value = (id: string) => checkValue<unknown, number>(`nelson-prob-${id}`);
  const nearValue = (found: number, id: string): void => near(found, value(id).expected, value(id).tolerance);

  test('one point beyond three sigma, two of three, four of five: by all sequences of zones', () => {
    nearValue(chanceHeld(1, 1), 't1');
    nearValue(chanceHeld(5, 3), 't5_window');
    nearValue(chanceHeld(6, 5), 't6_window');
  });

  test('the narrower reading, in which the newest point is one of those far out', () => {
    nearValue(
      chanceHeld(5, 3, (zones) => {
        const side = Math.sign(zones[2]!);
        return zones.filter((zone) => zone * side >= 3).length >= 2 && zones[2]! * side >= 3;
      }),
      't5_last',
    );
    nearValue(
      chanceHeld(6, 5, (zones) => {
        const side = Math.sign(zones[4]!);
        return zones.filter((zone) => zone * side >= 2).length >= 4 && zones[4]! * side >= 2;
      }),
      't6_last',
    );
  });

  // These patterns need their whole span, so that within just that span they come up only at its last point.
  test('nine (eight) on one side, fifteen within one sigma, eight outside it', () => {
    nearValue(exactRunLength(normalZones(0), [2]).within(9), 't2');
    nearValue(exactRunLength(normalZones(0), [2], 8).within(8), 't2_eight');
    nearValue(exactRunLength(normalZones(0), [7]).within(15), 't7');
    nearValue(exactRunLength(normalZones(0), [8]).within(8), 't8_both');
  });

  test('eight outside one sigma on any side is what test 8 would be without wanting both', () => {
    // The two ways that are all on one side come on top of the test's own.
    const outside = normalZones(0)
      .slice(5 + 1)
      .reduce((sum, chance) => sum + chance, 0);
    nearValue(exactRunLength(normalZones(0), [8]).within(8) + 2 * outside ** 8, 't8_any');
  });

  test('six rising or falling, by all 720 orders of six values', () => {
    const mask = patternMask([3]);
    const machine = new PatternMachine();
    let held = 0;
    let orders = 0;
    const place = (order: number[]): void => {
      if (order.length === 6) {
        machine.reset();
        let holds = 0;
        order.forEach((rank, i) => {
          holds = machine.push(1, i === 0 ? 0 : Math.sign(rank - order[i - 1]!));
        });
        orders++;
        if ((holds & mask) !== 0) held++;
        return;
      }
      for (let rank = 0; rank < 6; rank++) if (!order.includes(rank)) place([...order, rank]);
    };
    place([]);
    expect(orders).toBe(720);
    nearValue(held / orders, 't3');
  });
});

describe('Western Electric’s rules through the same chain', () => {
  const { expected, cited } = checkValue<unknown, Record<string, string>>('we-definitions');

  /** Number of the point at which the chain raises its first flag; null when it raises none. */
  function firstFlag(tests: readonly ZoneTest[], zones: readonly number[], run = 8): number | null {
    const { next } = zoneChain({ tests, run });
    let state = 0;
    for (const [i, zone] of zones.entries()) {
      state = next[state * 9 + zone + 4]!;
      if (state === FLAGGED) return i + 1;
    }
    return null;
  }
  const mirrored = (zones: readonly number[]): number[] => zones.map((zone) => -zone);

  // Zones: 1 within one sigma, 2 from one to two, 3 from two to three, 4 beyond three; 0 on the line.
  test.each<[string, string, ZoneTest, number[], number[]]>([
    ['1', '1 point > 3 sigma', 1, [1, -3, 4], [1, -3, 3]],
    ['2', '2 of 3 > 2 sigma same side', 5, [1, 3, -1, 3], [3, -3, 1, 3, -3]],
    ['3', '4 of 5 > 1 sigma same side', 6, [2, 3, -1, 2, 2], [2, 2, 1, 1, 2, 2]],
    ['4', '8 in a row same side', 2, [1, 2, 1, 1, 3, 1, 1, 1], [1, 1, 1, 1, 1, 1, 1, 0, 1]],
  ])(`rule %s, %s: ${cited}`, (rule, words, number, flagged, quiet) => {
    expect(expected[rule]).toBe(words);
    for (const turned of [(zones: number[]) => zones, mirrored]) {
      expect(firstFlag([number], turned(flagged))).toBe(flagged.length);
      expect(firstFlag([number], turned(quiet))).toBeNull();
    }
  });

  test('together they are the four that Nelson’s tests 1, 5, 6 and 2 are, but for eight in a row instead of nine', () => {
    const eight = Array.from({ length: 8 }, () => 1);
    expect(firstFlag([1, 2, 5, 6], eight)).toBe(8);
    expect(firstFlag([1, 2, 5, 6], eight, 9)).toBeNull();
  });
});

describe('operating characteristic: the chance of no signal at each true rate', () => {
  const { inputs, expected, tolerance, cited } = checkValue<
    { n: number; d_low: number; d_high: number },
    Record<string, number>
  >('p-oc-curve');
  test(`of a p chart of 50 with its centre line at 0.2: ${cited}`, () => {
    const design = { size: inputs.n, center: 0.2, sigmaZ: 1, correlation: 0 };
    // The counts that lie within these limits are those of the example.
    const sigma = Math.sqrt((0.2 * 0.8) / inputs.n);
    expect(Math.ceil(inputs.n * (0.2 - 3 * sigma))).toBe(inputs.d_low);
    expect(Math.floor(inputs.n * (0.2 + 3 * sigma))).toBe(inputs.d_high);
    for (const [rate, chance] of Object.entries(expected)) {
      const { within } = exactRunLength(countZones({ ...design, rate: Number(rate) }), [1]);
      near(1 - within(1), chance, tolerance);
    }
  });
});
