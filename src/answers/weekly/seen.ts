import { tenureInWords } from '../../census/tenure.ts';
import type { Seen } from '../../store/types.ts';
import type { Answer } from '../types.ts';

/** What an answer shows, in the form in which the next weekly post compares itself with it. Null without a chart of dated points. */
export function seenIn(answer: Answer, at: number): Seen | null {
  const { chart, dates, tenure, census, verdict, signals } = answer;
  if (!chart || !tenure || !census) return null;
  return {
    at,
    asOf: census.request.asOf,
    outcome: verdict.outcome,
    tenure: tenureInWords(tenure),
    subgroupSize: census.request.subgroupSize,
    points: chart.points.flatMap(({ accounts, lost }, i) => {
      const start = dates[i]?.firstStart ?? null;
      return start === null ? [] : [{ start, accounts, lost }];
    }),
    flags: signals
      .filter(({ speaks }) => speaks === 'shift')
      // Known by where it began: a flag that grows with the newest points stays the same flag.
      .map(({ test, side, members, words, state }) => ({
        key: `${test} ${side} ${dates[members[0] - 1]?.firstStart ?? members[0]}`,
        words,
        state,
      })),
  };
}
