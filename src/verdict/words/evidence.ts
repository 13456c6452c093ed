import type { VerdictContext } from '../context.ts';
import type { Judgement } from '../judgement.ts';
import type { PooledRate, Signal, Verdict } from '../types.ts';
import { capitalised, count, counted, percent, percentagePoints } from './format.ts';
import { viewWords } from './viewWords.ts';

/** "points 31 to 39 (accounts that started 12 March to 9 June 2025)". */
export function stretch(first: number, last: number, context: VerdictContext): string {
  const points = first === last ? `point ${first}` : `points ${first} to ${last}`;
  const from = context.dates[first - 1]?.firstStart ?? null;
  const to = context.dates[last - 1]?.lastStart ?? null;
  if (from === null || to === null) return points;
  const { span, day } = viewWords(context.view);
  return `${points}, ${span(day(from), day(to))}`;
}

export function signalSentence(signal: Signal, context: VerdictContext): string {
  return `${capitalised(signal.words)} (${stretch(signal.members[0], signal.until, context)}).`;
}

/** Pooled rate with its interval: "4.1 % (41 of 1,000 accounts; 95 % interval 3.0 % to 5.5 %)". */
export function pooled(rate: PooledRate, context?: VerdictContext): string {
  const interval = rate.interval === 'exact' ? 'exact 95 % interval' : '95 % interval';
  const of = counted(rate.accounts, viewWords(context?.view).pooledOne);
  return `${percent(rate.rate)} (${count(rate.lost)} of ${of}; ${interval} ${percent(rate.low)} to ${percent(rate.high)})`;
}

/** How big a move was, with its uncertainty and the reason to say "about". */
export function sizeSentences(
  verdict: Pick<Verdict, 'before' | 'after' | 'difference'>,
  beforePoints: readonly [number, number],
  context: VerdictContext,
): string[] {
  const { before, after, difference } = verdict;
  if (!before || !after || !difference) return [];
  return [
    `Usual level, from ${stretch(...beforePoints, context)}: ${pooled(before, context)}. Since then: ${pooled(after, context)}.`,
    `The difference is about ${percentagePoints(difference.estimate)} percentage points (95 % interval ${percentagePoints(difference.low)} to ${percentagePoints(difference.high)}). It was noticed because it stood out, so the lasting change may be somewhat smaller.`,
  ];
}

/** A flag rarer than this is told as such: no figure beyond it means anything to anybody. */
export const RAREST_TOLD = 100_000;

/** "about once in 81 points". */
function onceIn(points: number): string {
  return points > RAREST_TOLD
    ? `less than once in ${count(RAREST_TOLD)} points`
    : `about once in ${counted(Math.max(1, points), 'point')}`;
}

/** What could have been missed, and how often a chart like this cries wolf. */
/** Findings about which the chart's own false-alarm figures say something; where it cannot say, they would only mislead. */
export const ANSWERED: ReadonlySet<Judgement['finding']> = new Set(['risen', 'fallen', 'steady', 'mix-change']);

export function trustSentences(judgement: Judgement, context: VerdictContext, quiet: boolean): string[] {
  if (!ANSWERED.has(judgement.finding)) return [];
  const { trust } = judgement;
  const sentences: string[] = [];
  if (quiet && trust.wouldSee) {
    const from = context.dates[judgement.wouldSeeFrom - 1]?.firstStart ?? null;
    const words = viewWords(context.view);
    const since = from === null ? `from point ${judgement.wouldSeeFrom} on` : words.from(words.day(from));
    const { rise, fall, chance } = trust.wouldSee;
    const parts = [
      rise === null ? null : `a lasting rise to ${percent(rise)} or more`,
      fall === null ? null : `a lasting fall to ${percent(fall)} or less`,
    ].filter((part) => part !== null);
    sentences.push(
      parts.length > 0
        ? `${capitalised(parts.join(', or '))}, ${since}, would by now have been reported with ${Math.round(chance * 100)} % chance; anything smaller could have been missed.`
        : 'At this size not even a large move would be likely to have been reported by now: any move could have been missed.',
    );
    if (parts.length === 1 && fall === null) {
      sentences.push('With points this small, a fall of any size could have been missed.');
    }
  }
  if (trust.falseAlarmEvery !== null) {
    const chance =
      trust.falseVerdictChance === null
        ? ''
        : `, and a chart of this length reads as moved in about ${Math.max(1, Math.round(trust.falseVerdictChance * 100))} of 100 cases`;
    const { estimated } = trust;
    const every = estimated?.falseAlarmEvery ?? null;
    // The figure that such charts really keep: a level that is itself estimated flags more often than one that is known.
    sentences.push(
      estimated && every !== null && every <= RAREST_TOLD
        ? `With nothing changed, a chart like this raises a false flag ${onceIn(every)}, counting that its usual level rests on ${counted(estimated.points, 'point')} only (${onceIn(trust.falseAlarmEvery)} if the level were known exactly)${chance}.`
        : `With nothing changed, this chart raises a false flag ${onceIn(trust.falseAlarmEvery)}${chance}.`,
    );
  }
  return sentences;
}

/**
 * The denominators: nobody should have to ask "of how many?".
 * @param sizes  accounts of each point, where they differ
 */
export function countSentence(points: number, context: VerdictContext, sizes: readonly number[] = []): string {
  const { tenure, subgroupSize, view } = context;
  if (tenure === null) return `${counted(points, 'point')}, ${counted(context.accounts, 'case')} in all.`;
  if (view === 'calendar') return monthsSentence(points, context, sizes);
  const { one, order } = viewWords(view);
  const size = subgroupSize === null ? '' : ` of ${counted(subgroupSize, one)} each`;
  const young =
    view === 'renewal'
      ? `${counted(context.immature, one)} still to come`
      : `${count(context.immature)} not yet customers for ${tenure} and so not counted`;
  const rest = [
    `${counted(points, 'point')}${size}`,
    context.waiting > 0 ? `${count(context.waiting)} waiting for the next point` : null,
    context.immature > 0 ? young : null,
  ].filter((part) => part !== null);
  return `Counted ${order}: ${rest.join('; ')}.`;
}

function monthsSentence(points: number, { withheld }: VerdictContext, sizes: readonly number[]): string {
  const { order, day } = viewWords('calendar');
  const [least, most] = [Math.min(...sizes), Math.max(...sizes)];
  const customers = least === most ? counted(least, 'customer') : `${count(least)} to ${counted(most, 'customer')}`;
  const rest = withheld ? `; ${day(withheld.first)} is not over in the data and left out` : '';
  return `Counted ${order}: ${counted(points, 'month')}, ${points === 1 ? '' : 'each '}beginning with ${customers}${rest}. A customer counts once in every month it begins.`;
}
