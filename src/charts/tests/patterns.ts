import type { Side, TestNumber } from '../types.ts';

/*
 * The eight tests of Nelson (1984) as one small machine that is fed a point at a time: the same machine raises the flags on a real
 * chart and in every simulation, so that a stated false-alarm figure is about exactly the tests that are run.
 *
 * Source: Nelson LS, The Shewhart control chart - tests for special causes, Journal of Quality Technology 16(4):237-239, 1984.
 */

/** Window of each test: how many points its pattern spans. */
export const TEST_SPAN: Readonly<Record<TestNumber, number>> = { 1: 1, 2: 9, 3: 6, 4: 14, 5: 3, 6: 5, 7: 15, 8: 8 };

/** One bit for each test and side. Tests 4, 7 and 8 have no side and use the first. */
export function patternBit(test: TestNumber, side: Side): number {
  return 1 << ((test - 1) * 2 + (side === 'below' ? 1 : 0));
}

/** All bits of some tests. */
export function patternMask(tests: readonly TestNumber[], side?: Side): number {
  let mask = 0;
  for (const test of tests) {
    if (side !== 'below') mask |= patternBit(test, 'above');
    if (side !== 'above') mask |= patternBit(test, 'below');
  }
  return mask;
}

const ONES = Uint8Array.from({ length: 32 }, (_, bits) => {
  let ones = 0;
  for (let rest = bits; rest > 0; rest >>= 1) ones += rest & 1;
  return ones;
});

const BIT = {
  t1: [patternBit(1, 'above'), patternBit(1, 'below')],
  t2: [patternBit(2, 'above'), patternBit(2, 'below')],
  t3: [patternBit(3, 'above'), patternBit(3, 'below')],
  t4: patternBit(4, 'both'),
  t5: [patternBit(5, 'above'), patternBit(5, 'below')],
  t6: [patternBit(6, 'above'), patternBit(6, 'below')],
  t7: patternBit(7, 'both'),
  t8: patternBit(8, 'both'),
} as const;

export class PatternMachine {
  #run = 0;
  #trend = 0;
  #alternations = 0;
  #lastMove = 0;
  #within = 0;
  /** newest point in the lowest bit */
  #beyond2Above = 0;
  #beyond2Below = 0;
  #beyond1Above = 0;
  #beyond1Below = 0;

  reset(): void {
    this.#run = 0;
    this.#trend = 0;
    this.#alternations = 0;
    this.#lastMove = 0;
    this.#within = 0;
    this.#beyond2Above = 0;
    this.#beyond2Below = 0;
    this.#beyond1Above = 0;
    this.#beyond1Below = 0;
  }

  /**
   * Takes the next point.
   * @param zone  signed zone of the point (see zoneOf)
   * @param move  direction from the point before: -1, 0, 1; 0 for the first
   * @returns     bits of the patterns that hold at this point
   */
  push(zone: number, move: number): number {
    let holds = 0;
    const side = Math.sign(zone);

    // A point on the centre line breaks a run.
    this.#run = side !== 0 && Math.sign(this.#run) === side ? this.#run + side : side;
    // Equal neighbours break a trend.
    this.#trend = move !== 0 && Math.sign(this.#trend) === move ? this.#trend + move : move;
    this.#alternations = move !== 0 && move === -this.#lastMove ? this.#alternations + 1 : Math.abs(move);
    this.#lastMove = move;
    this.#within = zone >= -1 && zone <= 1 ? this.#within + 1 : 0;
    this.#beyond2Above = ((this.#beyond2Above << 1) | (zone >= 3 ? 1 : 0)) & 0b111;
    this.#beyond2Below = ((this.#beyond2Below << 1) | (zone <= -3 ? 1 : 0)) & 0b111;
    this.#beyond1Above = ((this.#beyond1Above << 1) | (zone >= 2 ? 1 : 0)) & 0xff;
    this.#beyond1Below = ((this.#beyond1Below << 1) | (zone <= -2 ? 1 : 0)) & 0xff;

    if (zone === 4) holds |= BIT.t1[0];
    else if (zone === -4) holds |= BIT.t1[1];
    if (this.#run >= 9) holds |= BIT.t2[0];
    else if (this.#run <= -9) holds |= BIT.t2[1];
    if (this.#trend >= 5) holds |= BIT.t3[0];
    else if (this.#trend <= -5) holds |= BIT.t3[1];
    if (this.#alternations >= 13) holds |= BIT.t4;
    if (ONES[this.#beyond2Above]! >= 2) holds |= BIT.t5[0];
    if (ONES[this.#beyond2Below]! >= 2) holds |= BIT.t5[1];
    if (ONES[this.#beyond1Above & 31]! >= 4) holds |= BIT.t6[0];
    if (ONES[this.#beyond1Below & 31]! >= 4) holds |= BIT.t6[1];
    if (this.#within >= 15) holds |= BIT.t7;
    if ((this.#beyond1Above | this.#beyond1Below) === 0xff && this.#beyond1Above !== 0 && this.#beyond1Below !== 0) {
      holds |= BIT.t8;
    }
    return holds;
  }
}
