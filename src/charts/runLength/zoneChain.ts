import { ZONES } from './zoneChances.ts';
import { afterZone, NO_PAST, type ZoneRules } from './zoneHistory.ts';

/** A flag is raised: the chain ends there. */
export const FLAGGED = -1;

/** The states of the tests between flags, numbered from 0, where a chart without a past begins. */
export interface ZoneChain {
  readonly states: number;
  /** state after a point in zone z: next[state * 9 + z + 4], or FLAGGED */
  readonly next: Int32Array;
  /** the same by pairs of states: where from, where to, and in which zones (bit z + 4); a flag is the state after the last */
  readonly moves: { readonly from: Int32Array; readonly to: Int32Array; readonly zones: Int32Array };
}

type States = Omit<ZoneChain, 'moves'>;

const known = new Map<string, ZoneChain>();

/**
 * The Markov chain of some tests over zones: every past that can be reached, those that no future can tell apart taken together.
 * It depends on the tests alone, so that it is built once for all charts.
 * Source: Champ CW, Woodall WH, Exact results for Shewhart control charts with supplementary runs rules, Technometrics 29:393-399, 1987,
 * for the representation; taking equivalent states together is Moore's partition refinement (1956, from memory).
 */
export function zoneChain(rules: ZoneRules): ZoneChain {
  const tests = [...new Set(rules.tests)].sort();
  const key = `${tests.join(',')}/${rules.run}`;
  let chain = known.get(key);
  if (!chain) {
    const states = merged(reachable({ ...rules, tests }));
    chain = { ...states, moves: movesOf(states) };
    known.set(key, chain);
  }
  return chain;
}

function reachable(rules: ZoneRules): States {
  const pasts = [NO_PAST];
  const numbers = new Map([[NO_PAST, 0]]);
  const next: number[] = [];
  for (let state = 0; state < pasts.length; state++) {
    for (let index = 0; index < ZONES; index++) {
      const past = afterZone(rules, pasts[state]!, index - 4);
      if (past === null) {
        next.push(FLAGGED);
        continue;
      }
      let number = numbers.get(past);
      if (number === undefined) {
        number = pasts.length;
        numbers.set(past, number);
        pasts.push(past);
      }
      next.push(number);
    }
  }
  return { states: pasts.length, next: Int32Array.from(next) };
}

/** Splits the states into classes by where each zone leads, until no class splits any more. */
function merged({ states, next }: States): States {
  let classOf = new Int32Array(states);
  let classes = 1;
  for (;;) {
    const refined = new Int32Array(states);
    const found = new Map<number, number>();
    let numbers = 0;
    for (let state = 0; state < states; state++) {
      // A class and the classes it leads to, folded pair by pair into one number.
      let folded = classOf[state]!;
      for (let index = 0; index < ZONES; index++) {
        const target = next[state * ZONES + index]!;
        const pair = (folded * ZONES + index) * (states + 1) + (target === FLAGGED ? states : classOf[target]!);
        let number = found.get(pair);
        if (number === undefined) {
          number = numbers++;
          found.set(pair, number);
        }
        folded = number;
      }
      refined[state] = folded;
    }
    const dense = new Map<number, number>();
    for (let state = 0; state < states; state++) {
      const one = refined[state]!;
      if (!dense.has(one)) dense.set(one, dense.size);
      refined[state] = dense.get(one)!;
    }
    classOf = refined;
    if (dense.size === classes) break;
    classes = dense.size;
  }
  const mergedNext = new Int32Array(classes * ZONES);
  for (let state = 0; state < states; state++) {
    for (let index = 0; index < ZONES; index++) {
      const target = next[state * ZONES + index]!;
      mergedNext[classOf[state]! * ZONES + index] = target === FLAGGED ? FLAGGED : classOf[target]!;
    }
  }
  return { states: classes, next: mergedNext };
}

function movesOf({ states, next }: States): ZoneChain['moves'] {
  const from: number[] = [];
  const to: number[] = [];
  const zones: number[] = [];
  for (let state = 0; state < states; state++) {
    const targets = new Map<number, number>();
    for (let index = 0; index < ZONES; index++) {
      const after = next[state * ZONES + index]!;
      const target = after === FLAGGED ? states : after;
      targets.set(target, (targets.get(target) ?? 0) | (1 << index));
    }
    for (const [target, bits] of targets) {
      from.push(state);
      to.push(target);
      zones.push(bits);
    }
  }
  return { from: Int32Array.from(from), to: Int32Array.from(to), zones: Int32Array.from(zones) };
}
