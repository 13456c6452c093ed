import type { Judgement } from '../verdict/judgement.ts';

/** What can be said without one full subgroup: nothing yet. */
export function emptyJudgement(): Judgement {
  return {
    finding: 'too-few-points',
    signals: [],
    trust: {
      falseAlarmEvery: null,
      method: 'simulated',
      standardError: null,
      falseVerdictChance: null,
      wouldSee: null,
    },
    start: null,
    wouldSeeFrom: 1,
    steadiness: null,
    dispersion: null,
    neighbours: null,
    segmentsDiffer: null,
    mix: null,
    standingChance: null,
    lastBlock: null,
  };
}
