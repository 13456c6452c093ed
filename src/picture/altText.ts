import type { PictureInput } from '../verdict/types.ts';
import { withinLimits } from '../verdict/words/testWords.ts';
import { capitalised, count, countOf, heldDate, limitPercent, percent, percentRange } from './figures.ts';
import { candidateWords, immatureWords, waitingWords } from './notes.ts';
import { moreFlags, stretches } from './stretches.ts';
import { shortTitle, titleAndRest, wouldSeeWords } from './title.ts';

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
  const first = finding(input);
  const said: string[] = [first.length < LONGEST_FINDING ? first : shortTitle(input), wouldSeeWords(input)];
  said.push(
    `Counted: ${input.measure}; ${input.subject}${input.asOf === null ? '' : `; data to ${heldDate(input.asOf)}`}`,
  );
  if (chart && chart.points.length > 0) {
    const begin = dates[0]?.firstStart ?? null;
    const last = dates[chart.points.length - 1]?.firstStart ?? null;
    const span =
      begin === null || last === null ? '' : `, for accounts that started from ${heldDate(begin)} to ${heldDate(last)}`;
    const { baseline } = chart;
    said.push(`The chart shows ${countOf(chart.points.length, 'point')}${span}`);
    const end = chart.points.at(-1);
    const band = end ? chanceWords(withinLimits(chart.kind), end.lower, end.upper) : '';
    said.push(
      `The usual level is ${percent(chart.center)}, set from points ${baseline.first} to ${baseline.last}${baseline.provisional ? ', provisional' : ''}${band}`,
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
    said.push(
      `Before: ${count(verdict.before.lost)} of ${countOf(verdict.before.accounts, 'account')} lost; since then: ${count(verdict.after.lost)} of ${countOf(verdict.after.accounts, 'account')}`,
    );
  said.push(capitalised(waitingWords(input)), immatureWords(input));
  return said;
}

function chanceWords(within: string, lower: number, upper: number): string {
  if (upper <= lower) return '';
  return lower > 0
    ? `; ${within} keeps points between ${limitPercent(lower, upper)} and ${percent(upper)}`
    : `; ${within} keeps points below ${percent(upper)}`;
}

function finding(input: PictureInput): string {
  const { outcome, since, before, after, headline } = input.verdict;
  const title = shortTitle(input);
  if ((outcome !== 'risen' && outcome !== 'fallen') || !after || !before)
    return titleAndRest(input).fromHeadline ? headline : `${title}: ${headline}`;
  const from = since
    ? since.start === null
      ? `from about point ${since.point}`
      : `for accounts starting from about ${heldDate(since.start)}`
    : '';
  return `${title} ${from}: about ${percent(after.rate)} (${percentRange(after.low, after.high)}), against ${percent(before.rate)} (${percentRange(before.low, before.high)}) before`;
}

function tidy(text: string): string {
  const plain = text.replace(/\s+/g, ' ').trim();
  return plain === '' || /[.!?]$/.test(plain) ? plain : `${plain}.`;
}
