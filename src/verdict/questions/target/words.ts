import type { PointDates } from '../../types.ts';
import { capitalised, count, counted, numberWord, percent } from '../../words/format.ts';
import type { ViewWords } from '../../words/viewWords.ts';
import { chancePercent, inCases } from '../chanceWords.ts';
import type { TargetReading } from './reading.ts';

export interface TargetContext {
  /** "3 months" */
  readonly tenure: string;
  readonly view: ViewWords;
  readonly dates: readonly PointDates[];
  /** points on the chart */
  readonly points: number;
  /** " for Orchard" or nothing */
  readonly whose: string;
  readonly inflowPerWeek: number;
  /** true when a verdict on the same points could not be given */
  readonly unsure: boolean;
  readonly fewPoints: boolean;
  readonly readCautions: readonly string[];
}

export interface Words {
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
}

/** A target as people set it: "5 %", "4.25 %". */
export function targetPercent(target: number): string {
  return `${Number((target * 100).toPrecision(6))} %`;
}

/** Whether a target is met, in words. */
export function targetWords(reading: TargetReading, context: TargetContext): Words {
  return {
    headline: targetHeadline(reading, context),
    evidence: evidence(reading, context),
    cautions: cautions(reading, context),
    next: next(reading, context),
  };
}

/** Rates with as many decimals as tell them from each other: two where an interval spans less than half a point. */
function finely({ low, high }: TargetReading['interval']): (rate: number) => string {
  return (rate) => (high - low < 0.005 && rate > 0 && rate < 1 ? `${(rate * 100).toFixed(2)} %` : percent(rate));
}

function targetHeadline(reading: TargetReading, { tenure, whose, view }: TargetContext): string {
  const { outcome, interval, stretch } = reading;
  const { lost, accounts } = stretch.pooled;
  const target = targetPercent(reading.target);
  const fine = finely(interval);
  const level = `${fine(interval.estimate)} ${view.areLost(tenure)}`;
  const range = `${fine(interval.low)} to ${fine(interval.high)}`;
  switch (outcome) {
    case 'met':
      return `The target of ${target} is met${whose}, beyond chance: ${level}, and the true level lies, with 95 % confidence, within ${range}.`;
    case 'missed':
      return `The target of ${target} is missed${whose}, beyond chance: ${level}, and the true level lies, with 95 % confidence, within ${range}.`;
    case 'unclear':
      return `Cannot say whether the target of ${target} is met${whose}: ${level}, but the true level can lie anywhere within ${range}.`;
    case 'nobody':
      return lost > 0
        ? `A target of 0 % is missed${whose}: it is met only while nobody at all is lost, and ${count(lost)} of ${counted(accounts, view.pooledOne)} were.`
        : `Cannot say whether a target of 0 % is met${whose}: nobody of ${counted(accounts, view.pooledOne)} was lost, but no count can show that nobody ever will be.`;
    case 'everybody':
      return `A target of 100 % cannot be missed${whose}: even if every account were lost, it would be met.`;
  }
}

function evidence(reading: TargetReading, context: TargetContext): string[] {
  const { stretch, interval, outcome, soFew, soMany, target } = reading;
  const { pooled, counts } = stretch;
  const fine = finely(interval);
  const rows = [
    `${capitalised(whichPoints(reading, context))}: ${count(pooled.lost)} of ${counted(pooled.accounts, context.view.pooledOne)} lost, ${fine(interval.estimate)} (95 % interval ${fine(interval.low)} to ${fine(interval.high)}).`,
  ];
  if (outcome === 'nobody' || outcome === 'everybody') return rows;
  const below = interval.estimate <= target;
  const surprise = below ? soFew : soMany;
  rows.push(
    `If the true level were exactly ${targetPercent(target)}, so ${below ? 'few' : 'many'} would be lost ${inCases(surprise)} such stretches; ${
      outcome === 'unclear'
        ? 'up to 25 of 1,000 would be needed to call that more than chance'
        : 'that is more than chance explains'
    }.`,
  );
  rows.push(
    `${reading.pointsMet === 0 ? 'None' : capitalised(numberWord(reading.pointsMet))} of its ${counted(counts.length, 'point')} met the target by ${reading.pointsMet === 1 ? 'itself' : 'themselves'}; a single point says little, since chance moves it.`,
    ...outlookWords(reading, context.view.one),
  );
  return rows;
}

/** What the next points will do with nothing changed. */
function outlookWords({ next, nextRange, nextSize }: TargetReading, unit: string): string[] {
  const [one, ...more] = next;
  if (!one) return [];
  const means = more.map(({ points, chance }) => `${points} points with ${chancePercent(chance)}`);
  return [
    `With nothing changed, the next point of ${counted(nextSize, unit)} meets the target (at most ${count(one.mostLost)} lost) with ${chancePercent(one.chance)} chance, and 9 of 10 such points lie between ${percent(nextRange.low)} and ${percent(nextRange.high)}.`,
    `The mean of the next ${means.slice(0, -1).join(', of ')}${means.length > 1 ? ' and of ' : ''}${means.at(-1)}.`,
  ];
}

/** "points 31 to 57 (accounts that started …), the stretch since churn moved". */
function whichPoints({ stretch }: TargetReading, { dates, points, fewPoints, view }: TargetContext): string {
  const { from, to, reason } = stretch;
  const first = dates[from - 1]?.firstStart ?? null;
  const last = dates[to - 1]?.lastStart ?? null;
  const when = first === null || last === null ? '' : `, ${view.span(view.day(first), view.day(last))}`;
  if (reason === 'all')
    return points === 1
      ? `the only point${when}`
      : `all ${count(points)} points${when}${fewPoints ? '' : ', since no move was found among them'}`;
  const why =
    reason === 'moved'
      ? 'the stretch since the figure last moved'
      : 'the stretch since the place where the level changes';
  return `${from === to ? `point ${from}` : `points ${from} to ${to}`}${when}, ${why}`;
}

function cautions(reading: TargetReading, context: TargetContext): string[] {
  const { stretch, outcome, next, dispersion } = reading;
  const list = [...context.readCautions];
  const chance = next[0]?.chance ?? 0;
  if (context.unsure)
    list.push('These points do not hold one clear level (ask "has churn moved?"), so the interval may be too narrow.');
  if (stretch.reason === 'moved')
    list.push(
      'The stretch was taken because it stood out, so the lasting level may be somewhat nearer to what it was before.',
    );
  if (context.fewPoints)
    list.push(
      `This rests on ${counted(stretch.counts.length, 'point')} only; whether they hold one level has not been tested.`,
    );
  if (dispersion > 1)
    list.push(
      `The points vary about ${dispersion.toFixed(1)} times as much as chance alone would make them; the interval and the chances allow for it.`,
    );
  if ((outcome === 'met' || outcome === 'missed' || outcome === 'unclear') && chance > 0.02 && chance < 0.98)
    list.push(
      `A bonus decided point by point would be paid by chance: at the level of now, ${Math.round(chance * 100)} of 100 points meet the target and ${100 - Math.round(chance * 100)} do not, with nobody having done anything better or worse.`,
    );
  list.push(
    'Before anybody’s pay, bonus or job hangs on this: what counts as lost, for whom and by when must stand in the company’s own written definitions, and its finance and legal people decide, not this chart.',
  );
  return list;
}

function next(reading: TargetReading, { inflowPerWeek, view }: TargetContext): string[] {
  const { outcome, accountsToTell, stretch, nextSize } = reading;
  if (outcome === 'nobody' || outcome === 'everybody')
    return ['Name a target between the two, such as "target 5 %", to have it tested.'];
  if (outcome !== 'unclear')
    return ['Ask again after the next points; a target is met or missed by the level, not by one of them.'];
  if (accountsToTell === null)
    return ['The level and the target are too close to be told apart by any amount of data to be had.'];
  const more = Math.max(nextSize, accountsToTell - stretch.pooled.accounts);
  const weeks =
    inflowPerWeek > 0 ? `, at the recent pace about ${counted(Math.ceil(more / inflowPerWeek), 'week')}` : '';
  return [
    `If the level stays where it is, about ${count(more)} more ${view.pooledOne}s (${counted(Math.ceil(more / nextSize), 'point')}${weeks}) would tell it from the target.`,
  ];
}
