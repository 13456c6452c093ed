import type { Day } from '../days.ts';
import type { PictureInput, PooledRate } from '../verdict/types.ts';
import { withinLimits } from '../verdict/words/testWords.ts';
import { viewWords } from '../verdict/words/viewWords.ts';
import { capitalised, count, countOf, heldDate, heldPoint } from './figures.ts';
import { candidateWords, immatureWords, waitingWords } from './notes.ts';
import { moreFlags, stretches } from './stretches.ts';
import { shortTitle, titleAndRest, wouldSeeWords } from './title.ts';
import { type ValueScale, valueScale } from './valueScale.ts';

/** Longest alternative text, in characters. */
const MOST = 1000;
/** A finding longer than this is told by the short title alone, so that the rest has room. */
const LONGEST_FINDING = 600;

/**
 * What the picture shows, for those who cannot see it: the finding first, then the levels, the points and what is marked, then what is
 * still waiting. Sentences that would pass 1000 characters are left out from the end.
 */
export function altText(input: PictureInput): string {
  let text = '';
  for (const sentence of sentences(input)
    .map(tidy)
    .filter((one) => one !== '')) {
    const longer = text === '' ? sentence : `${text} ${sentence}`;
    if (longer.length <= MOST) text = longer;
  }
  return text;
}

function sentences(input: PictureInput): string[] {
  const { chart, verdict, dates } = input;
  const scale = valueScale(chart);
  const first = finding(input);
  const said: string[] = [first.length < LONGEST_FINDING ? first : shortTitle(input), wouldSeeWords(input)];
  said.push(
    `Counted: ${input.measure}; ${input.subject}${input.asOf === null ? '' : `; data to ${heldDate(input.asOf)}`}`,
  );
  if (chart && chart.points.length > 0) {
    const begin = dates[0]?.firstStart ?? null;
    const last = dates[chart.points.length - 1]?.firstStart ?? null;
    const span = begin === null || last === null ? '' : `, ${spanWords(input, begin, last)}`;
    const { baseline } = chart;
    said.push(`The chart shows ${countOf(chart.points.length, 'point')}${span}`);
    const end = chart.points.at(-1);
    const band = end ? chanceWords(withinLimits(chart.kind), end.lower, end.upper, scale) : '';
    said.push(
      `The usual ${scale.of === 'gaps' ? 'gap' : 'level'} is ${scale.words(chart.center)}, set from points ${baseline.first} to ${baseline.last}${baseline.provisional ? ', provisional' : ''}${band}`,
    );
  } else said.push('There is no point to draw yet');
  const marked = stretches(input.signals);
  for (const stretch of marked.slice(0, 3)) {
    const state = {
      standing: 'Flagged',
      watching: 'One to watch',
      passed: input.flagsExplained === undefined ? 'Flagged, but did not last' : `Flagged, ${input.flagsExplained}`,
    }[stretch.state];
    const [from, to] = stretch.said;
    const where = from === to ? `point ${from}` : `points ${from} to ${to}`;
    said.push(`${state}, ${where}: ${stretch.words}${moreFlags(stretch)}`);
  }
  if (marked.length > 3) said.push(`${countOf(marked.length - 3, 'more marked stretch', 'more marked stretches')}`);
  if (chart && marked.length === 0) said.push('No point is flagged');
  if (input.split)
    said.push(`Not one level: the points change about between point ${input.split.after} and ${input.split.after + 1}`);
  said.push(capitalised(candidateWords(input)));
  if (verdict.after && verdict.before && verdict.since)
    said.push(`Before: ${lostOf(verdict.before, input)} lost; since then: ${lostOf(verdict.after, input)}`);
  said.push(capitalised(waitingWords(input)), immatureWords(input));
  return said;
}

/** From the first point's first day to the last point's. */
function spanWords(input: PictureInput, from: Day, to: Day): string {
  if (input.chart?.scale === 'days') return `from ${heldDate(from)} to ${heldDate(to)}`;
  return input.view === undefined || input.view === 'start'
    ? `for accounts that started from ${heldDate(from)} to ${heldDate(to)}`
    : `for ${viewWords(input.view).span(heldPoint(input, from), heldPoint(input, to))}`;
}

/** "25 of 3,100 accounts", "25 accounts in 420 days" */
function lostOf({ lost, accounts, days }: PooledRate, { view }: PictureInput): string {
  return days === undefined
    ? `${count(lost)} of ${countOf(accounts, viewWords(view).pooledOne)}`
    : `${countOf(lost, 'account')} in ${countOf(days, 'day')}`;
}

function chanceWords(within: string, lower: number, upper: number, scale: ValueScale): string {
  if (upper <= lower) return '';
  return lower > 0
    ? `; ${within} keeps points between ${scale.limitWords(lower, upper)} and ${scale.words(upper)}`
    : `; ${within} keeps points below ${scale.words(upper)}`;
}

function finding(input: PictureInput): string {
  const { outcome, since, before, after, headline } = input.verdict;
  const title = shortTitle(input);
  if ((outcome !== 'risen' && outcome !== 'fallen') || !after || !before)
    return titleAndRest(input).fromHeadline ? headline : `${title}: ${headline}`;
  const from = since
    ? since.start === null
      ? `from about point ${since.point}`
      : input.chart?.scale === 'days'
        ? `from about ${heldDate(since.start)}`
        : input.view === undefined || input.view === 'start'
          ? `for accounts starting from about ${heldDate(since.start)}`
          : viewWords(input.view).since(heldPoint(input, since.start))
    : '';
  const { levelWords } = valueScale(input.chart);
  return `${title} ${from}: about ${levelWords(after)}, against ${levelWords(before)} before`;
}

function tidy(text: string): string {
  const plain = text.replace(/\s+/g, ' ').trim();
  return plain === '' || /[.!?]$/.test(plain) ? plain : `${plain}.`;
}
