import { LEAST_POINTS } from '../judgement.ts';
import type { Outcome, Verdict } from '../types.ts';
import { capitalised, count, counted } from '../words/format.ts';
import { cutAdvice } from '../words/testWords.ts';
import { NOT_WHY, OWN_DEFINITIONS } from '../words/usual.ts';
import type { ValuesJudgement } from './judgeValues.ts';
import { valueWords } from './valueWords.ts';

const OUTCOME: Readonly<Record<ValuesJudgement['finding'], Outcome>> = {
  risen: 'risen',
  fallen: 'fallen',
  steady: 'steady',
  'unsteady-baseline': 'cannot-say',
  'no-level': 'cannot-say',
  'too-few': 'too-early',
};

/** Puts what ready values say into words. Counts before and after are left empty: nothing was counted. */
export function writeValuesVerdict(judgement: ValuesJudgement): Verdict {
  const { finding, series, before, after, chart } = judgement;
  const start = series?.start ?? null;
  const half = before && after ? Math.hypot(before.high - before.estimate, after.high - after.estimate) : 0;
  const estimate = before && after ? after.estimate - before.estimate : 0;
  return {
    outcome: OUTCOME[finding],
    headline: headline(judgement),
    evidence: evidence(judgement),
    cautions: cautions(judgement),
    next: next(judgement),
    since: start ? { point: start.first, start: null, candidates: start.candidates } : null,
    before: null,
    after: null,
    difference: before && after && chart ? { estimate, low: estimate - half, high: estimate + half } : null,
  };
}

function headline({ finding, chart, series, before, after, signals }: ValuesJudgement): string {
  switch (finding) {
    case 'risen':
    case 'fallen':
      return `The values have ${finding}: about ${valueWords(after!.estimate)} since about point ${series!.start!.first}, ${finding === 'risen' ? 'up' : 'down'} from the usual ${valueWords(before!.estimate)}.`;
    case 'steady': {
      const watching = signals.some(({ state, speaks }) => state === 'watching' && speaks === 'shift');
      return `The values are steady: the usual level is ${valueWords(chart.center)}${watching ? ', with one thing to watch' : ''}.`;
    }
    case 'unsteady-baseline':
      return 'Cannot say whether the values have moved: the stretch that should set the usual level was not steady itself.';
    case 'no-level':
      return `Cannot say whether the values have moved: all that set the usual level are ${valueWords(chart.center)}, so there is no usual spread to judge by.`;
    case 'too-few':
      return `Too early to say whether the values have moved: ${counted(chart.points.length, 'value')}, and at least ${LEAST_POINTS} are needed.`;
  }
}

function evidence({ finding, chart, series, signals, trust, before, after }: ValuesJudgement): string[] {
  const judgedFrom = chart.baseline.last < chart.points.length ? chart.baseline.last : 0;
  const lead = { standing: '', watching: 'To watch: ', passed: 'Did not last: ' } as const;
  const lines = (['standing', 'watching', 'passed'] as const).flatMap((state) =>
    signals
      .filter((signal) => signal.speaks === 'shift' && signal.state === state)
      .filter((signal) => state !== 'passed' || signal.point > judgedFrom)
      .slice(0, 3)
      .map(({ words, members, until }) => `${lead[state]}${capitalised(words)} (${pointsWords(members[0], until)}).`),
  );
  if (before && after && series?.start)
    lines.push(
      `Usual level, from ${pointsWords(1, Math.min(chart.baseline.last, series.start.first - 1))}: ${intervalWords(before)}. Since then: ${intervalWords(after)}. It was noticed because it stood out, so the lasting change may be somewhat smaller.`,
    );
  const { wouldSee, falseAlarmEvery, falseVerdictChance } = trust;
  if (finding === 'steady' && wouldSee && series) {
    const parts = [
      wouldSee.rise === null ? null : `a lasting rise to ${valueWords(wouldSee.rise)} or more`,
      wouldSee.fall === null ? null : `a lasting fall to ${valueWords(wouldSee.fall)} or less`,
    ].filter((part) => part !== null);
    lines.push(
      parts.length > 0
        ? `${capitalised(parts.join(', or '))}, from point ${series.wouldSeeFrom} on, would by now have been reported with ${Math.round(wouldSee.chance * 100)} % chance; anything smaller could have been missed.`
        : 'Not even a large move would be likely to have been reported by now: any move could have been missed.',
    );
  }
  if (falseAlarmEvery !== null && finding !== 'unsteady-baseline')
    lines.push(
      `With nothing changed, this chart raises a false flag about once in ${count(falseAlarmEvery)} points${falseVerdictChance === null ? '' : `, and a chart of this length reads as moved in about ${Math.max(1, Math.round(falseVerdictChance * 100))} of 100 cases`}.`,
    );
  const point = chart.points[0]!;
  lines.push(
    `${counted(chart.points.length, 'value')}, charted one by one (an individuals chart): the usual spread, taken from how far neighbours lie apart, keeps them between ${valueWords(point.lower)} and ${valueWords(point.upper)}.`,
  );
  return lines;
}

function cautions({ finding, chart, series, signals }: ValuesJudgement): string[] {
  const list: string[] = [];
  if (series && chart.baseline.provisional)
    list.push(
      `The usual level is provisional: it rests on ${counted(chart.baseline.last, 'point')}, and 25 make it firm.`,
    );
  else if (series && chart.baseline.last >= chart.points.length)
    list.push('Every point helped to set the usual level, so a move had to stand out from its own effect on it.');
  const neighbours = series?.neighbours;
  if (neighbours && Math.abs(neighbours.r1) > neighbours.limit && finding !== 'unsteady-baseline')
    list.push(
      `Neighbouring points ${neighbours.r1 > 0 ? 'go together' : 'pull apart'} more than chance would have them (autocorrelation ${neighbours.r1.toFixed(2)}), so flags mean a little less than stated.`,
    );
  for (const signal of signals)
    if (signal.speaks === 'cut' && signal.state === 'watching')
      list.push(`About how the data is cut: ${signal.words}; ${cutAdvice(signal.test as 4 | 7 | 8)}.`);
  if (finding === 'risen' || finding === 'fallen') list.push(NOT_WHY);
  list.push(OWN_DEFINITIONS);
  return list;
}

function next({ finding, series, signals }: ValuesJudgement): string[] {
  switch (finding) {
    case 'risen':
    case 'fallen': {
      const [from, to] = series!.start!.candidates;
      return [
        `Look for what changed around point ${series!.start!.first}${from === to ? '' : ` (anything from point ${from} to ${to} fits, with about 90 % confidence)`}, the way the values are made included.`,
      ];
    }
    case 'steady':
      return [
        signals.some(({ state, speaks }) => state === 'watching' && speaks === 'shift')
          ? 'Do nothing yet: the next points will settle whether the flag lasts.'
          : 'Nothing calls for action on these values; a single high or low one is what chance looks like.',
      ];
    case 'unsteady-baseline':
      return [
        `Something changed within the stretch that sets the usual level${series?.checks ? `, most likely after point ${series.checks.splitAfter}` : ''}. Ask with a baseline that ends before it.`,
      ];
    case 'no-level':
      return ['Give values that differ, or with more digits.'];
    case 'too-few':
      return ['Add more values, in time order.'];
  }
}

function pointsWords(first: number, last: number): string {
  return first === last ? `point ${first}` : `points ${first} to ${last}`;
}

function intervalWords({ estimate, low, high }: { estimate: number; low: number; high: number }): string {
  return `${valueWords(estimate)} on average (95 % interval ${valueWords(low)} to ${valueWords(high)})`;
}
