import type { Signal, SignalState } from '../verdict/types.ts';
import { countOf } from './figures.ts';

/** Flags of one state and side whose points run into each other, drawn as one marked stretch. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly state: SignalState;
  /** the flag that covers most of it, in words */
  readonly words: string;
  /** first and last point of that flag */
  readonly said: readonly [number, number];
  /** how many flags are behind it */
  readonly flags: number;
}

const RANK: Record<SignalState, number> = {
  standing: 0,
  watching: 1,
  passed: 2,
};

/** The marked stretches, most important first: standing, then watching, then passed with the newest first. */
export function stretches(signals: readonly Signal[]): Stretch[] {
  const merged: {
    from: number;
    to: number;
    state: SignalState;
    side: string;
    flags: Signal[];
  }[] = [];
  const shifts = signals.filter((signal) => signal.speaks === 'shift');
  for (const signal of [...shifts].sort((a, b) => a.members[0] - b.members[0] || a.members[1] - b.members[1])) {
    const from = signal.members[0];
    const to = endOf(signal);
    const home = merged.find((one) => one.state === signal.state && one.side === signal.side && from <= one.to + 1);
    if (home) {
      home.to = Math.max(home.to, to);
      home.flags.push(signal);
    } else
      merged.push({
        from,
        to,
        state: signal.state,
        side: signal.side,
        flags: [signal],
      });
  }
  return merged
    .map(({ from, to, state, flags }) => {
      const longest = flags.reduce((a, b) => (endOf(b) - b.members[0] > endOf(a) - a.members[0] ? b : a));
      const said = [longest.members[0], endOf(longest)] as const;
      return { from, to, state, words: longest.words, said, flags: flags.length };
    })
    .sort((a, b) => RANK[a.state] - RANK[b.state] || b.to - a.to);
}

/** " (and 2 more flags)"; empty when there is one. */
export function moreFlags(stretch: Stretch): string {
  return stretch.flags > 1 ? ` (and ${countOf(stretch.flags - 1, 'more flag')})` : '';
}

/** The last point that a flag's words cover: it goes on for as long as its condition held. */
function endOf(signal: Signal): number {
  return Math.max(signal.members[1], signal.until);
}
