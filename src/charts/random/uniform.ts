import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';

/** Draws uniform numbers in (0, 1). */
export type Uniform = () => number;

/** Outputs thrown away after seeding, until the seed is spread over the whole state. */
const WARM_UP = 20;

/**
 * A seeded source of uniform numbers, so that every simulated figure can be made again.
 * @param seed  32-bit integer
 * Method: xoroshiro128+ (Blackman and Vigna 2018), a 32-bit output, centred in its cell so that neither 0 nor 1 occurs. The generator
 * is linear and the library puts the seed into it as it is, so that neighbouring seeds would give related numbers: the seed is mixed first.
 */
export function seededUniform(seed: number): Uniform {
  const generator = xoroshiro128plus(mixed(seed));
  for (let i = 0; i < WARM_UP; i++) generator.next();
  return () => ((generator.next() >>> 0) + 0.5) / 4294967296;
}

/** Finaliser of MurmurHash3 (Appleby, public domain; constants from memory): every bit of the seed changes about half of all bits. */
function mixed(seed: number): number {
  let h = seed | 0;
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return h ^ (h >>> 16);
}
