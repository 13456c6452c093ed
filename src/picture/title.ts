import type { PictureInput } from '../verdict/types.ts';
import { capitalised } from './figures.ts';
import { valueScale } from './valueScale.ts';

/** Longest lead that makes a title: two lines. */
const LONGEST_TITLE = 60;

/** The verdict in a few words of the picture's own, for when the headline has no lead to take. */
export function shortTitle(input: PictureInput): string {
  const what = /lost|churn|renew|kept/i.test(input.measure) ? 'churn' : 'the rate';
  switch (input.verdict.outcome) {
    case 'risen':
      return capitalised(`${what} has risen`);
    case 'fallen':
      return capitalised(`${what} has fallen`);
    case 'steady':
      return input.signals.some((signal) => signal.state === 'watching' && signal.speaks === 'shift')
        ? 'Steady so far, one to watch'
        : `No sign that ${what} has moved`;
    case 'too-early':
      return 'Too early to tell';
    case 'cannot-say':
      return 'These figures cannot tell';
  }
}

/**
 * The headline as a title and what follows it, so that the picture says the verdict in the reply's own words and says it once:
 * "Churn has risen: about 10 % …" becomes its lead and the rest. Without a lead, the short title and the whole headline.
 */
export function titleAndRest(input: PictureInput): { title: string; rest: string; fromHeadline: boolean } {
  const { headline } = input.verdict;
  const [, lead, rest] = /^([^:;]+)[:;]\s+(\S.*)$/su.exec(headline.trim()) ?? [];
  if (lead === undefined || rest === undefined || lead.length > LONGEST_TITLE)
    return { title: shortTitle(input), rest: headline, fromHeadline: false };
  return { title: lead, rest: capitalised(rest), fromHeadline: true };
}

/** What would by now have been seen, when nothing moved; empty when that is not known or does not apply. */
export function wouldSeeWords(input: PictureInput): string {
  const wouldSee = input.wouldSee;
  if (input.verdict.outcome !== 'steady' || !wouldSee) return '';
  const { rise, fall, chance } = wouldSee;
  const scale = valueScale(input.chart);
  const moves = [rise === null ? '' : scale.riseTo(rise), fall === null ? '' : scale.fallTo(fall)].filter(
    (move) => move !== '',
  );
  if (moves.length === 0) return 'At this size, even a large move could have been missed so far.';
  const odds = `${Math.round(chance * 100)}\u00a0%`;
  return `${capitalised(moves.join(', or '))}, would by now have shown with ${odds} chance; anything smaller could be there unseen.`;
}
