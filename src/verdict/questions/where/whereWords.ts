import { type Day, dayInWords } from '../../../days.ts';
import { LEAST_POINTS } from '../../judgement.ts';
import { capitalised, count, counted, listed, numberWord, percent } from '../../words/format.ts';
import type { Change } from './change.ts';
import { changeWords } from './changeWords.ts';
import type { GroupReading } from './types.ts';

/** What the words need besides the groups' own charts. */
export interface WhereContext {
  /** name of the column that groups the accounts */
  readonly column: string;
  /** "3 months" */
  readonly tenure: string;
  /** the verdict on all accounts together, in its sentence */
  readonly overall: string;
  readonly change: Change | null;
  /** first start dates of the two stretches that `change` compares, and the last start date of the first */
  readonly stretches: { readonly from: Day; readonly to: Day; readonly since: Day } | null;
  /** accounts with which a group at the rate of all accounts could be judged, for groups that say too little of their own rate */
  readonly needed: number;
  /** what limits the whole answer: from reading the file, from following the question */
  readonly cautions: readonly string[];
}

export interface WhereWords {
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
}

/** The answer to "where did churn move?" in words. */
export function whereWords(readings: readonly GroupReading[], context: WhereContext): WhereWords {
  const of = (...findings: GroupReading['finding'][]): GroupReading[] =>
    readings.filter(({ finding }) => findings.includes(finding));
  const moved = of('risen', 'fallen');
  const alone = of('alone');
  const steady = of('steady');
  const judged = readings.filter(({ chance }) => chance !== null);
  return {
    headline: headline(readings, moved, judged, context),
    evidence: [
      ...moved.map((one) => movedSentence(one, judged.length, context)),
      ...alone.map((one) => aloneSentence(one, judged.length)),
      ...(context.change && context.stretches
        ? changeWords(context.change, {
            before: `started ${dayInWords(context.stretches.from)} to ${dayInWords(context.stretches.to)}`,
            after: `started from ${dayInWords(context.stretches.since)} on`,
          })
        : []),
      `All accounts together: ${context.overall}`,
      ...togetherSentence(readings.length, judged.length, moved.length),
      ...steadySentences(steady),
      ...of('unsteady').map(
        (one) =>
          `${begun(one)}: the points that should set its usual level were not steady themselves, so nothing is said about it; it counts as looked at.`,
      ),
      ...of('no-level').map((one) => noLevelSentence(one, context)),
      ...tooFewSentences(of('too-few'), context),
    ],
    cautions: cautionsOf(readings, moved.length > 0, context),
    next: nextOf(moved, alone, of('too-few'), judged.length, context),
  };
}

function headline(
  all: readonly GroupReading[],
  moved: readonly GroupReading[],
  judged: readonly GroupReading[],
  { column }: WhereContext,
): string {
  if (judged.length === 0)
    return `Where churn moved cannot be said yet: of the ${numberWord(all.length)} groups of “${column}” none could be judged.`;
  const could = judged.length < all.length ? ' that could be judged' : '';
  const some = judged.length > 1 ? `${numberWord(judged.length)} groups` : 'one group';
  const groups = `${some} of “${column}”${could}`;
  if (moved.length === 0)
    return judged.length === 1
      ? `Churn has not moved beyond chance in the ${groups}.`
      : `Churn has moved beyond chance in none of the ${groups}.`;
  const told = moved
    .slice(0, 3)
    .map(
      (one) =>
        `${one.name} has ${one.direction}, from ${percent(one.before!.rate)} to about ${percent(one.after!.rate)}`,
    );
  const more = moved.length > 3 ? `; and ${counted(moved.length - 3, 'more group')}` : '';
  const part = moved.length < judged.length ? `${numberWord(moved.length)} of the` : judged.length > 1 ? 'all' : 'the';
  return `Churn has moved in ${part} ${groups}: ${told.join('; ')}${more}.`;
}

const pooled = ({ rate, lost, accounts, low, high }: NonNullable<GroupReading['after']>): string =>
  `${percent(rate)} (${count(lost)} of ${counted(accounts, 'account')}; 95 % interval ${percent(low)} to ${percent(high)})`;

function movedSentence(one: GroupReading, judged: number, { tenure }: WhereContext): string {
  const allowing =
    judged > 1 ? `; allowing for the ${numberWord(judged)} groups looked at, ${chanceWords(one.adjusted!)}` : '';
  return `${begun(one)} has ${one.direction}: ${pooled(one.after!)} lost within ${tenure} among those who started from about ${dayInWords(one.since!.start)}, against ${pooled(one.before!)} before. With nothing changed, a group would show so much with a chance of ${chanceWords(one.chance!)}${allowing}.`;
}

function aloneSentence(one: GroupReading, judged: number): string {
  return `${begun(one)} would read as ${one.direction} if it were the only group asked about (${percent(one.before!.rate)} to about ${percent(one.after!.rate)}, from about ${dayInWords(one.since!.start)}); among ${numberWord(judged)} groups, one as far out as this is too likely by chance (${chanceWords(one.adjusted!)} after allowing for that).`;
}

/** A chance as small as the simulation can show is told as a bound. */
function chanceWords(chance: number): string {
  return chance < 0.001 ? 'under 0.1 %' : percent(chance);
}

function togetherSentence(all: number, judged: number, moved: number): string[] {
  const some = judged === 0 ? 'none' : judged === all ? 'all' : count(judged);
  const looked = `${counted(all, 'group was', 'groups were')} looked at, and ${some} could be judged${judged === 0 ? '' : ', each by its own chart'}.`;
  if (judged < 2) return [looked];
  return [
    `${looked} As each has its own chance of a false alarm, a group must stand out more than it would have to alone: of groups called moved in this way, about 5 in 100 at most are expected to be false alarms (Benjamini-Hochberg)${moved === 0 ? ', and none got that far' : ''}.`,
  ];
}

/** Steady groups told in a sentence each before they are put into a list. */
const TOLD_APART = 3;

function steadySentences(groups: readonly GroupReading[]): string[] {
  if (groups.length <= TOLD_APART) return groups.map(steadySentence);
  const each = groups.map((one) => {
    const { rise, fall } = wouldSee(one);
    const seen = [rise === null ? null : `${percent(rise)} or more`, fall === null ? null : `${percent(fall)} or less`];
    const moves = seen.filter((part) => part !== null);
    return `${one.name} at ${percent(one.chart!.center)} (${moves.length > 0 ? moves.join(', ') : 'no move at all'})`;
  });
  return [
    `Steady, each with the lasting rate that its own chart alone would by now have shown with 80 % chance, so that anything nearer could have been missed: ${each.join('; ')}.`,
  ];
}

const wouldSee = ({ judgement }: GroupReading) => judgement?.trust.wouldSee ?? { rise: null, fall: null, chance: 0.8 };

function steadySentence(one: GroupReading): string {
  const { rise, fall, chance } = wouldSee(one);
  const from = one.subgroups[(one.judgement?.wouldSeeFrom ?? 1) - 1]?.firstStart;
  const parts = [
    rise === null ? null : `a lasting rise to ${percent(rise)} or more`,
    fall === null ? null : `a lasting fall to ${percent(fall)} or less`,
  ].filter((part) => part !== null);
  const seen =
    parts.length === 0 || from === undefined
      ? 'any move could have been missed'
      : `on its own, ${parts.join(', or ')}, among accounts starting from ${dayInWords(from)} on, would have stood out with ${Math.round(chance * 100)} % chance, and anything smaller could have been missed`;
  return `${begun(one)} is steady at ${percent(one.chart!.center)} (${count(one.lost)} of ${counted(one.matured, 'account')} lost in all): ${seen}.`;
}

/** A group's name at the beginning of a sentence: names are written as the data writes them, the rest has no name. */
const begun = (one: GroupReading): string => (one.pooled ? capitalised(one.name) : one.name);

function noLevelSentence(one: GroupReading, { tenure }: WhereContext): string {
  const whom = one.chart?.center === 0 ? 'nobody' : 'everybody';
  return `${begun(one)} could not be judged: ${whom} was lost within ${tenure} in the points that would set its usual level (${count(one.lost)} of its ${counted(one.matured, 'account')} in all), so there is no level to compare with.`;
}

/** Groups without enough accounts told by name before the rest are only counted. */
const NAMED = 6;

function tooFewSentences(groups: readonly GroupReading[], { tenure, needed }: WhereContext): string[] {
  if (groups.length === 0) return [];
  const told = groups
    .slice(0, NAMED)
    .map((one) => `${one.name} (${count(one.matured)} of ${count(accountsFor(one, needed))})`);
  const rest = groups.length - told.length;
  return [
    `Too few accounts to be judged, with how many have reached ${tenure}, of about how many it takes: ${listed(rest > 0 ? [...told, counted(rest, 'more group')] : told)}.`,
  ];
}

/** Fewer lost say little about a group's own rate; then it takes at least what a group at the rate of all accounts would. */
const TELLING = 5;

function accountsFor({ lost, subgroupSize }: GroupReading, needed: number): number {
  const own = LEAST_POINTS * subgroupSize;
  return lost < TELLING ? Math.max(own, needed) : own;
}

function cautionsOf(readings: readonly GroupReading[], moved: boolean, context: WhereContext): string[] {
  const rest = readings.find((one) => one.pooled !== null);
  const list = [...context.cautions];
  if (rest?.pooled && rest.pooled.values > 0) {
    const without = rest.pooled.without > 0 ? `, with ${counted(rest.pooled.without, 'account')} that have none` : '';
    const values = readings.length - 1 + rest.pooled.values;
    list.push(
      `“${context.column}” has ${count(values)} values: the ${numberWord(readings.length - 1)} with most accounts were looked at one by one, the other ${count(rest.pooled.values)} together${without}. A move in a small one of them can go unseen.`,
    );
  } else if (rest?.pooled) {
    list.push(
      `${counted(rest.pooled.without, 'account')} have no “${context.column}”; they are looked at as a group of their own.`,
    );
  }
  const provisional = readings.filter(({ chance, chart }) => chance !== null && chart?.baseline.provisional);
  if (provisional.length > 0)
    list.push(
      `The usual level of ${listed(provisional.slice(0, NAMED).map(({ name }) => name))}${provisional.length > NAMED ? ' and others' : ''} is provisional: it rests on fewer than 25 points.`,
    );
  const wide = readings.filter(({ chart }) => chart?.kind === 'p-prime');
  if (wide.length > 0)
    list.push(
      `The points of ${listed(wide.slice(0, NAMED).map(({ name }) => name))} vary more than chance alone would make them (overdispersion), so their limits are set by how much they really vary (a Laney p-prime chart).`,
    );
  if (moved || context.change?.basis === 'move')
    list.push('This says where something changed, not why; a before and after is no proof that any one action did it.');
  list.push(
    'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.',
  );
  return list;
}

function nextOf(
  moved: readonly GroupReading[],
  alone: readonly GroupReading[],
  few: readonly GroupReading[],
  judged: number,
  { tenure }: WhereContext,
): string[] {
  const steps: string[] = [];
  const asked = (one: GroupReading): string =>
    one.pooled ? '' : `Ask “has churn moved for ${one.name}?” for its own chart`;
  const first = moved.find((one) => one.pooled === null);
  if (moved.length > 1 && moved.length === judged && moved.every(({ direction }) => direction === moved[0]!.direction))
    steps.push('All groups moved the same way: look first for something that touched all of them.');
  if (first)
    steps.push(
      `${asked(first)}, and look for what changed for accounts starting around ${dayInWords(first.since!.start)}: price, offer, channel, product, or how the export is made.`,
    );
  else if (moved.length > 0)
    steps.push(
      'What moved is many groups taken together: name a column with fewer values to see which of them it was.',
    );
  const close = alone.find((one) => one.pooled === null);
  if (close) steps.push(`${asked(close)}; its next points will settle whether it lasts. Do nothing yet.`);
  if (moved.length === 0 && alone.length === 0 && judged > 0)
    steps.push('Nothing calls for action in any one group; a single high or low point is what chance looks like.');
  if (few.length > 0)
    steps.push(
      `A group with too few accounts needs ${LEAST_POINTS} points: wait for more of them${tenure === '1 month' ? '' : ', ask at an earlier age such as 1 month'}, or group by a column with fewer values.`,
    );
  return steps;
}
