import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';

/** Draws uniform numbers in (0, 1). */
export type Uniform = () => number;

/** Outputs thrown away after seeding: the library spreads the seed over the state so thinly that the first three tell it. */
const WARM_UP = 20;

/**
 * A seeded source of uniform numbers, so that every simulated figure can be made again.
 * @param seed  32-bit integer
 * Method: xoroshiro128+ (Blackman and Vigna 2018), a 32-bit output, centred in its cell so that neither 0 nor 1 occurs.
 */
export function seededUniform(seed: number): Uniform {
  const generator = xoroshiro128plus(seed | 0);
  for (let i = 0; i < WARM_UP; i++) generator.next();
  return () => ((generator.next() >>> 0) + 0.5) / 4294967296;
}
