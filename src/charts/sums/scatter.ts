import type { Uniform } from '../random/uniform.ts';

/**
 * Which of `size` accounts are the `lost` ones, every choice being equally likely.
 * @returns numbers from 1 to size, ascending
 * Source: Floyd's method, Bentley J and Floyd B, Communications of the ACM 30:754-757, 1987 (reference from memory).
 */
export function scatter(lost: number, size: number, uniform: Uniform): Int32Array {
  const few = Math.min(lost, size - lost);
  const chosen = new Set<number>();
  for (let top = size - few + 1; top <= size; top++) {
    const one = 1 + Math.floor(uniform() * top);
    chosen.add(chosen.has(one) ? top : one);
  }
  if (few === lost) return Int32Array.from(chosen).sort();
  const rest = new Int32Array(lost);
  let at = 0;
  for (let one = 1; one <= size; one++) if (!chosen.has(one)) rest[at++] = one;
  return rest;
}
