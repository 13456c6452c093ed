import { dayInWords } from '../../days.ts';
import type { Signal } from '../types.ts';
import { capitalised, count, counted, percent, percentagePoints } from '../words/format.ts';
import type { GapFacts } from './facts.ts';
import { gapLength, gapsWords, levelWords, pace } from './phrases.ts';

const FLAGS_TOLD = 3;

/** What the answer rests on: flags, size, trust, denominators, and why this chart. */
export function gapEvidence(facts: GapFacts): string[] {
  const { judgement, context } = facts;
  const { finding, signals, chart } = judgement;
  const moved = finding === 'risen' || finding === 'fallen';
  const shift = signals.filter((signal) => signal.speaks === 'shift').sort((a, b) => lengthOf(b) - lengthOf(a));
  const judgedFrom = chart && chart.baseline.last < chart.points.length ? chart.baseline.last : 0;
  const of = (state: Signal['state']): Signal[] => shift.filter((signal) => signal.state === state);
  const watching = of('watching');
  return [
    ...flags(of('standing'), '', facts),
    ...(moved ? sizes(facts) : []),
    ...flags(watching, 'To watch: ', facts),
    ...(watching.length > 0
      ? ['Taken together, the newest gaps do not yet differ enough from the usual level to call it a move.']
      : []),
    ...flags(
      of('passed').filter((signal) => signal.point > judgedFrom),
      'Did not last: ',
      facts,
    ),
    ...(finding === 'unsteady-baseline' ? split(facts) : []),
    ...trust(facts),
    ...counts(facts),
    ...context.whyThisChart,
    ...context.howChosen,
  ];
}

function lengthOf(signal: Signal): number {
  return signal.until - signal.members[0];
}

function flags(signals: readonly Signal[], lead: string, { context }: GapFacts): string[] {
  const told = signals.slice(0, FLAGS_TOLD).map((signal) => {
    const meaning = signal.side === 'above' ? 'longer gaps are fewer losses' : 'shorter gaps are more losses';
    return `${lead}${capitalised(signal.words)} (${gapsWords(signal.members[0], signal.until, context)}): ${meaning}.`;
  });
  const rest = signals.length - told.length;
  if (rest > 0) told.push(`${lead}${counted(rest, 'further flag')} of the same kind on the chart.`);
  return told;
}

function sizes({ judgement, context, difference, since }: GapFacts): string[] {
  const { before, after, chart } = judgement;
  if (!before || !after || !difference || !since || !chart) return [];
  const last = Math.min(chart.baseline.last, since.point - 1);
  const level = `Usual level, from ${gapsWords(1, last, context)}: ${levelWords(before)}. Since then: ${levelWords(after)}.`;
  const noticed = 'It was noticed because it stood out, so the lasting change may be somewhat smaller.';
  if (context.kind === 't') return [level, noticed];
  return [
    level,
    `The difference is about ${percentagePoints(difference.estimate)} percentage points (95 % interval ${percentagePoints(difference.low)} to ${percentagePoints(difference.high)}). ${noticed}`,
  ];
}

/** The two levels of a stretch that is not one. */
function split({ judgement, context }: GapFacts): string[] {
  const { series, chart } = judgement;
  if (series?.kind !== 'judged' || !series.checks || !chart) return [];
  const after = series.checks.splitAfter;
  const mean = (first: number, last: number): string => {
    const inside = chart.points.filter((point) => point.index >= first && point.index <= last && !point.open);
    return gapLength(context.kind, Math.round(inside.reduce((sum, { value }) => sum + value, 0) / inside.length));
  };
  const last = chart.baseline.last;
  return [
    `On average ${mean(1, after)} lie between two losses in ${gapsWords(1, after, context)}, and ${mean(after + 1, last)} in ${gapsWords(after + 1, last, context)}.`,
  ];
}

function trust({ judgement, context }: GapFacts): string[] {
  const { finding, series } = judgement;
  const { wouldSee, falseAlarmEvery, falseVerdictChance } = judgement.trust;
  if (series?.kind !== 'judged' || finding === 'unsteady-baseline') return [];
  const sentences: string[] = [];
  if (finding === 'steady' && wouldSee) {
    const level = (rate: number): string => (context.kind === 'g' ? percent(rate) : pace(rate));
    const from = context.dates[series.wouldSeeFrom - 1]?.firstStart ?? null;
    const since =
      from === null
        ? `from gap ${series.wouldSeeFrom} on`
        : context.kind === 'g'
          ? `among accounts starting from ${dayInWords(from)} on`
          : `from ${dayInWords(from)} on`;
    const parts = [
      wouldSee.rise === null
        ? null
        : `a lasting rise to ${level(wouldSee.rise)} or more${context.kind === 't' ? ' often' : ''}`,
      wouldSee.fall === null
        ? null
        : `a lasting fall to ${level(wouldSee.fall)} or ${context.kind === 't' ? 'more rarely' : 'less'}`,
    ].filter((part) => part !== null);
    sentences.push(
      parts.length > 0
        ? `${capitalised(parts.join(', or '))}, ${since}, would by now have been reported with ${Math.round(wouldSee.chance * 100)} % chance; anything smaller could have been missed.`
        : 'With so few losses not even a large move would be likely to have been reported by now: any move could have been missed.',
    );
    if (wouldSee.fall === null && parts.length > 0)
      sentences.push(
        'With so few losses, a fall of any size could have been missed: rarer losses are fewer gaps to go by.',
      );
    if (wouldSee.rise === null && parts.length > 0) sentences.push('A rise of any size could have been missed.');
  }
  if (falseAlarmEvery !== null) {
    const chance =
      falseVerdictChance === null
        ? ''
        : `, and a chart of this length reads as moved in about ${Math.max(1, Math.round(falseVerdictChance * 100))} of 100 cases`;
    sentences.push(
      `With nothing changed, this chart raises a false flag about once in ${count(falseAlarmEvery)} losses${chance}.`,
    );
  }
  return sentences;
}

function counts({ judgement, context }: GapFacts): string[] {
  const { kind, losses, accounts, watched, immature, open, tenure } = context;
  const { usual, chart, finding } = judgement;
  const sentences: string[] = [];
  if (accounts !== null && accounts > 0) {
    const rest = immature > 0 ? ` ${count(immature)} not yet customers for ${tenure} and so not counted.` : '';
    sentences.push(
      `Counted in order of start: ${counted(losses, 'loss', 'losses')} among ${counted(accounts, 'account')} that have had ${tenure} to leave or stay, ${count(open)} of them since the last loss.${rest}`,
    );
  } else if (watched)
    sentences.push(
      `Counted by the day of leaving: ${counted(losses, 'loss', 'losses')} within ${tenure} of starting, from ${dayInWords(watched.from)} to ${dayInWords(watched.to)}; ${gapLength(kind, open)} since the last one.`,
    );
  else if (accounts === null) sentences.push(`${counted(losses, 'gap')} between losses.`);
  const frame = chart?.points[0];
  if (frame && usual && chart.baseline.lost > 1)
    sentences.push(
      `${finding === 'risen' || finding === 'fallen' ? 'At the usual level' : `The usual level is ${levelWords(usual)};`} half of all gaps are${finding === 'risen' || finding === 'fallen' ? '' : ' then'} longer than ${gapLength(kind, Math.round(chart.center))}, and hardly any is longer than ${gapLength(kind, Math.round(frame.upper))}.`,
    );
  return sentences;
}
