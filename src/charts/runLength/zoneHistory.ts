import type { TestNumber } from '../types.ts';

/** Tests that see zones only. Tests 3 and 4 look at moves from point to point, which zones do not tell. */
export type ZoneTest = Exclude<TestNumber, 3 | 4>;

export function isZoneTest(test: TestNumber): test is ZoneTest {
  return test !== 3 && test !== 4;
}

/** What the tests of a chain are. */
export interface ZoneRules {
  readonly tests: readonly ZoneTest[];
  /** points in a row on one side that test 2 wants: nine by Nelson, eight by Western Electric */
  readonly run: number;
}

/**
 * All that the past still means to the tests, as a whole number: parts of the tests that were not chosen stay zero, so that histories that
 * no chosen test can tell apart have one number.
 * run       points in a row on one side, signed
 * within    points in a row within 1 sigma
 * outside   points in a row beyond 1 sigma, the side of the newest, and how far back the newest on the other side lies (0: not among them)
 * bits      which of the last points were beyond 2 sigma, 1 sigma, on each side; the newest in the lowest bit
 */
interface Past {
  run: number;
  within: number;
  outside: number;
  outsideSide: number;
  otherSide: number;
  beyond2Above: number;
  beyond2Below: number;
  beyond1Above: number;
  beyond1Below: number;
}

const LONGEST_RUN = 15;
const WITHIN_SPAN = 15;
const OUTSIDE_SPAN = 8;

export const NO_PAST = pack({
  run: 0,
  within: 0,
  outside: 0,
  outsideSide: 0,
  otherSide: 0,
  beyond2Above: 0,
  beyond2Below: 0,
  beyond1Above: 0,
  beyond1Below: 0,
});

/** The past after one more point, or null when a chosen test raises its flag at it. `zone` is signed, see zoneOf. */
export function afterZone(rules: ZoneRules, packed: number, zone: number): number | null {
  const past = unpack(packed);
  const side = Math.sign(zone);
  const far = Math.abs(zone);
  let flagged = false;
  for (const test of rules.tests) {
    switch (test) {
      case 1:
        flagged ||= far === 4;
        break;
      case 2:
        past.run = side !== 0 && Math.sign(past.run) === side ? past.run + side : side;
        flagged ||= Math.abs(past.run) >= rules.run;
        break;
      case 5: {
        const above = (past.beyond2Above << 1) | (zone >= 3 ? 1 : 0);
        const below = (past.beyond2Below << 1) | (zone <= -3 ? 1 : 0);
        flagged ||= ones(above) >= 2 || ones(below) >= 2;
        past.beyond2Above = above & 0b11;
        past.beyond2Below = below & 0b11;
        break;
      }
      case 6: {
        const above = (past.beyond1Above << 1) | (zone >= 2 ? 1 : 0);
        const below = (past.beyond1Below << 1) | (zone <= -2 ? 1 : 0);
        flagged ||= ones(above) >= 4 || ones(below) >= 4;
        past.beyond1Above = stillOfUse(above & 0b1111);
        past.beyond1Below = stillOfUse(below & 0b1111);
        break;
      }
      case 7:
        past.within = far <= 1 ? past.within + 1 : 0;
        flagged ||= past.within >= WITHIN_SPAN;
        break;
      case 8:
        flagged ||= pushOutside(past, far >= 2 ? side : 0);
        break;
    }
  }
  return flagged ? null : pack(past);
}

function pushOutside(past: Past, side: number): boolean {
  if (side === 0) {
    past.outside = 0;
    past.outsideSide = 0;
    past.otherSide = 0;
    return false;
  }
  const other = past.outside === 0 ? 0 : past.outsideSide !== side ? 1 : past.otherSide === 0 ? 0 : past.otherSide + 1;
  const length = past.outside + 1;
  past.outside = Math.min(OUTSIDE_SPAN - 1, length);
  past.outsideSide = side;
  // One that the next window no longer reaches means nothing any more.
  past.otherSide = other < OUTSIDE_SPAN - 1 ? other : 0;
  return length >= OUTSIDE_SPAN && other > 0;
}

/** The last four points of test 6 without those that can no longer be one of four of five, whatever comes. */
function stillOfUse(lastFour: number): number {
  const kept = ones(lastFour) < 3 ? lastFour & 0b0111 : lastFour;
  return ones(kept & 0b0111) < 2 ? kept & 0b1011 : kept;
}

function ones(bits: number): number {
  let count = 0;
  for (let rest = bits; rest > 0; rest >>= 1) count += rest & 1;
  return count;
}

function pack(past: Past): number {
  let packed = past.run + LONGEST_RUN;
  packed = packed * 16 + past.within;
  packed = packed * 8 + past.outside;
  packed = packed * 3 + past.outsideSide + 1;
  packed = packed * 8 + past.otherSide;
  packed = packed * 4 + past.beyond2Above;
  packed = packed * 4 + past.beyond2Below;
  packed = packed * 16 + past.beyond1Above;
  return packed * 16 + past.beyond1Below;
}

function unpack(packed: number): Past {
  let rest = packed;
  const take = (range: number): number => {
    const part = rest % range;
    rest = Math.floor(rest / range);
    return part;
  };
  const beyond1Below = take(16);
  const beyond1Above = take(16);
  const beyond2Below = take(4);
  const beyond2Above = take(4);
  const otherSide = take(8);
  const outsideSide = take(3) - 1;
  const outside = take(8);
  const within = take(16);
  return {
    run: rest - LONGEST_RUN,
    within,
    outside,
    outsideSide,
    otherSide,
    beyond2Above,
    beyond2Below,
    beyond1Above,
    beyond1Below,
  };
}
