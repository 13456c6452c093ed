import { percent } from '../../words/format.ts';
import type { Change } from './change.ts';

/** A group's part is told from a tenth of a percentage point on. Our choice, no source. */
const WORTH_TELLING = 0.001;

/**
 * The change of all accounts, told apart: what the groups' own rates made of it, and what their shares made of it. The two figures told
 * add up to the third as they are printed.
 * @param when  how the two stretches are called: "before 3 March 2025", "since then"
 */
export function changeWords(change: Change, when: { readonly before: string; readonly after: string }): string[] {
  const total = hundredths(change.after) - hundredths(change.before);
  const rates = hundredths(change.ratePart);
  const sentences = [
    `${LEAD[change.basis]}from ${exactly(change.before)} (${when.before}) to ${exactly(change.after)} (${when.after}): ${points(total)} percentage points. Rates within the groups make ${points(rates)} of it (95 % interval ${points(hundredths(change.ratePartLow))} to ${points(hundredths(change.ratePartHigh))}), and the mix, how the accounts spread over the groups, ${points(total - rates)}.`,
  ];
  if (change.basis !== 'move') {
    sentences.push(
      'No move was found in that, so the parts are a description and no news: some difference between two stretches there always is.',
    );
    return sentences;
  }
  const largest = (part: 'ratePart' | 'mixPart'): number =>
    change.groups.reduce(
      (best, group, i) => (Math.abs(group[part]) > Math.abs(change.groups[best]![part]) ? i : best),
      0,
    );
  const byRate = largest('ratePart');
  const { rateBefore, rateAfter, ratePart } = change.groups[byRate]!;
  if (rateBefore !== null && rateAfter !== null && Math.abs(ratePart) >= WORTH_TELLING) {
    sentences.push(
      `The group whose own rate mattered most is ${change.names[byRate]}: ${percent(rateBefore)} to ${percent(rateAfter)}, which is ${points(hundredths(ratePart))} points of the whole.`,
    );
  }
  const byMix = largest('mixPart');
  const { shareBefore, shareAfter, mixPart } = change.groups[byMix]!;
  if (Math.abs(mixPart) >= WORTH_TELLING) {
    sentences.push(
      `The group whose share mattered most is ${change.names[byMix]}: ${percent(shareBefore)} of the accounts before, ${percent(shareAfter)} since, which is ${points(hundredths(mixPart))} points of the whole.`,
    );
  }
  return sentences;
}

const LEAD: Readonly<Record<Change['basis'], string>> = {
  move: 'All accounts together went ',
  level:
    'All accounts together show no move to compare before and after, so what set the usual level is compared with all that came since. They went ',
  halves:
    'All accounts together show no move to compare before and after, so the first half of the points is compared with the second. They went ',
};

const hundredths = (part: number): number => Math.round(part * 10_000);

/** A rate to the hundredth of a per cent, so that what is told adds up. */
const exactly = (rate: number): string => `${(hundredths(rate) / 100).toFixed(2)} %`;

/** Whole hundredths of a percentage point, signed. */
function points(whole: number): string {
  const text = (Math.abs(whole) / 100).toFixed(2);
  return whole === 0 ? text : `${whole < 0 ? '−' : '+'}${text}`;
}
