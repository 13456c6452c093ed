import type { Chart } from '../../../charts/types.ts';
import { isoDay } from '../../../days.ts';
import type { LastBlockReading } from '../../judgement.ts';
import type { PooledRate, Signal } from '../../types.ts';
import { capitalised, count, counted, percent, percentagePoints } from '../../words/format.ts';
import { inCases } from '../chanceWords.ts';
import type { Explained, Step } from './types.ts';

/** From the flags to the verdict and how far to trust it. */
export function judgeSteps(from: Explained): Step[] {
  return [flags(from), lastBlock(from), verdictStep(from), sizes(from), trust(from)].filter((step) => step !== null);
}

const FLAGS_TOLD = 4;
const VALUES_TOLD = 10;

function flags({ chart, signals }: Explained): Step | null {
  if (!chart || chart.kind === 'cusum') return null;
  const shifts = signals.filter((signal) => signal.speaks === 'shift');
  const standing = ['standing', 'watching', 'passed'];
  const told = [...shifts].sort((a, b) => standing.indexOf(a.state) - standing.indexOf(b.state) || b.until - a.until);
  const rest = told.length - FLAGS_TOLD;
  return {
    title: 'Flags',
    sentences:
      told.length === 0
        ? ['No pattern that chance rarely makes was found: nothing was flagged.']
        : [
            ...told.slice(0, FLAGS_TOLD).map((signal) => flagSentence(chart, signal)),
            ...(rest > 0 ? [`And ${counted(rest, 'further flag')}.`] : []),
          ],
    figures: {
      flags: told.map(({ test, members, until, side, state, words }) => ({
        test,
        from: members[0],
        to: until,
        side,
        state,
        words,
        z: scores(chart, members[0], until),
      })),
    },
  };
}

const STATES = { standing: 'stands', watching: 'new, does not stand yet', passed: 'no longer stands' } as const;

function flagSentence(chart: Chart, signal: Signal): string {
  const [from] = signal.members;
  // Gaps are skewed: how many sigmas one lies from the level says nothing about how unlikely it is.
  const gaps = chart.scale === 'accounts' || chart.scale === 'days';
  const z = gaps
    ? chart.points.slice(from - 1, signal.until).map(({ value }) => value)
    : scores(chart, from, signal.until).filter((one) => one !== null);
  const values = z.slice(-VALUES_TOLD).map((one) => (gaps ? count(one) : one.toFixed(1).replace('-', '−')));
  const unit = gaps ? `gaps in ${chart.scale}` : 'in sigmas from the level';
  const which = from === signal.until ? `point ${from}` : `points ${from} to ${signal.until}`;
  const sigmas = values.length === 0 ? '' : `, ${unit}: ${z.length > VALUES_TOLD ? '… ' : ''}${values.join(', ')}`;
  return `${capitalised(signal.words)} (${which}${sigmas}): ${STATES[signal.state]}.`;
}

/** Distances from the centre line in sigma; null where a point has no sigma. */
function scores({ points, center }: Chart, from: number, to: number): (number | null)[] {
  return points
    .slice(from - 1, to)
    .map(({ value, sigma }) => (sigma > 0 ? Number(((value - center) / sigma).toFixed(3)) : null));
}

function lastBlock({ chart, judgement }: Explained): Step | null {
  const block = judgement?.lastBlock;
  if (!chart || !block || !judgement) return null;
  const { first, score, threshold, dividedBy, ratio } = block;
  const newest = chart.points.length;
  const sentences = [
    `Last block: of all stretches that end at the newest point, the one from point ${first} on (${counted(newest - first + 1, 'point')}) differs most from the usual level. ${ratioSentence(chart, block)}`,
  ];
  if (dividedBy > 1.0005)
    sentences.push(
      `As the points vary ${dividedBy.toFixed(2)} times as much as chance would have them, it is divided by that: ${ratio.toFixed(2)} / ${dividedBy.toFixed(2)} = ${(ratio / dividedBy).toFixed(2)}.`,
    );
  sentences.push(
    score === 0
      ? `No flag on that side lies in it, so it does not count; it would have needed more than ${threshold.toFixed(2)}.`
      : `Needed: more than ${threshold.toFixed(2)}, the value that simulated charts of this length, size and rate exceed ${inCases(judgement.trust.falseVerdictChance ?? 0.05)} cases with nothing changed. ${score.toFixed(2)} ${score > threshold ? 'exceeds' : 'does not exceed'} it${judgement.standingChance === null ? '' : `; with nothing changed so much happens ${inCases(judgement.standingChance)} cases`}.`,
  );
  return { title: 'Last block', sentences, figures: { ...block, standingChance: judgement.standingChance } };
}

function ratioSentence({ points, baseline, center }: Chart, { first, ratio }: LastBlockReading): string {
  const pool = (from: number, to: number) => {
    const used = points.filter(
      ({ index }) => index >= from && index <= to && !(index <= baseline.last && baseline.excluded.includes(index)),
    );
    return {
      n: used.reduce((sum, { accounts }) => sum + accounts, 0),
      d: used.reduce((sum, { lost }) => sum + lost, 0),
    };
  };
  const { n, d } = pool(first, points.length);
  const terms = (lost: number, accounts: number, level: number): string => {
    const rate = lost / accounts;
    const part = (times: number, a: number, b: number): string | null =>
      times > 0 ? `${count(times)} ln(${a.toFixed(4)} / ${b.toFixed(4)})` : null;
    return [part(lost, rate, level), part(accounts - lost, 1 - rate, 1 - level)]
      .filter((one) => one !== null)
      .join(' + ');
  };
  if (baseline.last < points.length)
    return `It lost ${count(d)} of ${count(n)}, ${percent(d / n)}, and its log likelihood ratio against ${percent(center)} is ${terms(d, n, center)} = ${ratio.toFixed(2)}.`;
  const before = pool(1, first - 1);
  return `It lost ${count(d)} of ${count(n)}, the points before it ${count(before.d)} of ${count(before.n)}; two levels instead of one, ${percent(center)}, have a log likelihood ratio of ${terms(d, n, center)} + ${terms(before.d, before.n, center)} = ${ratio.toFixed(2)}.`;
}

const OUTCOMES = {
  risen: 'what stands out says more losses than usual, beyond what is needed, so churn has risen',
  fallen: 'what stands out says fewer losses than usual, beyond what is needed, so churn has fallen',
  steady:
    'nothing stands out beyond what is needed, so churn is called steady, with what could have been missed told beside it',
  'too-early': 'there are too few points to judge, so it is too early to tell',
  'cannot-say': 'the data does not carry an answer',
} as const;

const FINDINGS: Readonly<Record<string, string>> = {
  'mix-change': 'the figure moved, but not within the groups: their mix did, so churn is called steady',
  'mix-unclear': 'the figure moved and the mix of groups moved with it; they cannot be told apart in one chart',
  'unsteady-baseline':
    'the points that should set the usual level do not hold one level, so nothing can be judged against them',
  'no-level': 'nobody, or everybody, was lost where the usual level is set, so there is nothing to compare with',
};

function verdictStep({ verdict, judgement }: Explained): Step {
  const why = FINDINGS[judgement?.finding ?? ''] ?? OUTCOMES[verdict.outcome];
  return {
    title: 'Verdict',
    sentences: [`Verdict: ${why}.`],
    figures: { outcome: verdict.outcome, finding: judgement?.finding ?? null },
  };
}

function sizes({ verdict, dates }: Explained): Step | null {
  const { since, before, after, difference } = verdict;
  if (!after || !before) return null;
  const sentences: string[] = [];
  if (since) {
    const [from, to] = since.candidates;
    sentences.push(
      `Since: the start that makes the points most likely is point ${since.point}${from === to ? ', and no other fits nearly as well' : `; points ${from} to ${to} fit nearly as well (in about 9 of 10 such charts the true start lies among them)`}.`,
    );
  }
  sentences.push(`${wilson('Before', before)} ${wilson('After', after)}`);
  if (difference)
    sentences.push(
      `The difference is ${percentagePoints(difference.estimate)} percentage points, 95 % interval ${percentagePoints(difference.low)} to ${percentagePoints(difference.high)} (Newcombe’s, from the two intervals).`,
    );
  const start = since ? (dates[since.point - 1]?.firstStart ?? null) : null;
  return {
    title: 'Since when, how much',
    sentences,
    figures: {
      since: since && {
        point: since.point,
        start: start === null ? null : isoDay(start),
        candidates: since.candidates,
      },
      before,
      after,
      difference,
    },
  };
}

function wilson(word: string, { lost, accounts, rate, low, high, interval, days }: PooledRate): string {
  if (interval === 'wilson') {
    return `${word}: ${count(lost)} / ${count(accounts)} = ${percent(rate)}; Wilson’s 95 % interval (2 × ${count(lost)} + z² ± z sqrt(z² + 4 × ${count(lost)} × ${(1 - rate).toFixed(4)})) / (2 (${count(accounts)} + z²)) with z = 1.96 is ${percent(low)} to ${percent(high)}.`;
  }
  const of =
    days === undefined
      ? accounts > 0
        ? `${count(lost)} / ${count(accounts)} = ${percent(rate)}`
        : percent(rate)
      : `${count(lost)} lost in ${counted(days, 'day')}`;
  const range =
    days === undefined ? `${percent(low)} to ${percent(high)}` : `${low.toFixed(3)} to ${high.toFixed(3)} a day`;
  return `${word}: ${of}; 95 % interval ${range}.`;
}

function trust({ trust: known, judgement, chart }: Explained): Step | null {
  const { falseAlarmEvery, method, standardError, falseVerdictChance, wouldSee } = known;
  const sentences: string[] = [];
  if (falseAlarmEvery !== null) {
    const how =
      method === 'exact'
        ? 'by an exact chain over everything the points can do'
        : `by seeded simulation${standardError === null ? '' : `, standard error ${standardError.toFixed(1)}`}`;
    sentences.push(
      `Trust: with nothing changed a false flag comes about once in ${count(falseAlarmEvery)} points, worked out ${how}.`,
    );
  }
  if (falseVerdictChance !== null)
    sentences.push(
      `Of simulated charts of this length in which nothing changed, with the usual level estimated in each as it is here, ${(falseVerdictChance * 100).toFixed(1)} of 100 read as moved.`,
    );
  if (wouldSee && (wouldSee.rise !== null || wouldSee.fall !== null) && judgement && chart) {
    const moves = [
      wouldSee.rise === null ? null : `a rise to ${percent(wouldSee.rise)}`,
      wouldSee.fall === null ? null : `a fall to ${percent(wouldSee.fall)}`,
    ].filter((move) => move !== null);
    sentences.push(
      `The smallest move that ${Math.round(wouldSee.chance * 100)} of 100 simulated charts would by now have shown, begun at point ${judgement.wouldSeeFrom}, is ${moves.join(' or ')}.`,
    );
  }
  return {
    title: 'Trust',
    sentences,
    figures: { falseAlarmEvery, method, standardError, falseVerdictChance, wouldSee },
  };
}
