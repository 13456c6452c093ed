import type { Signal, SignalState } from '../verdict/types.ts';

/** Flags of one state and side whose points run into each other, drawn as one marked stretch. */
export interface Stretch {
  readonly from: number;
  readonly to: number;
  readonly state: SignalState;
  /** the flag that covers most of it, in words */
  readonly words: string;
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
    const to = Math.max(signal.members[1], signal.until);
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
      const longest = flags.reduce((a, b) => (b.members[1] - b.members[0] > a.members[1] - a.members[0] ? b : a));
      return { from, to, state, words: longest.words, flags: flags.length };
    })
    .sort((a, b) => RANK[a.state] - RANK[b.state] || b.to - a.to);
}
