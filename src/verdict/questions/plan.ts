import { LEAST_POINTS } from '../judgement.ts';
import { capitalised, count, counted, listed, numberWord, percent } from '../words/format.ts';
import type { GroupPace, PlanFindings, SizeOffer, SizeReason, TenureMonth } from './planFindings.ts';
import { LEAST_AT_RISK } from './tenureMonths.ts';
import { chanceWords, moveNoun, weeksInWords } from './waits.ts';

/** Months named one by one; more are too many to read. */
const MONTHS_NAMED = 4;
/** Groups named one by one. */
const GROUPS_NAMED = 4;
/** Groups that differ by so little chance are called different. */
const DIFFERENT = 0.01;

export const LAST_CAUTION =
  'For pay, forecasts, investors or auditors, your company’s own written definitions and its finance and legal people decide.';

export interface Words {
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
}

/**
 * The plan in words.
 * @param ask  "has it moved?" for the same scope, as it may be typed
 */
export function planWords(findings: PlanFindings, ask: string): Words {
  return {
    headline: headline(findings),
    evidence: [
      `${capitalised(findings.tenureWhy)}.`,
      riskyTimes(findings),
      ...stillThere(findings),
      `${capitalised(findings.sizeWhy)}.`,
      ...findings.offers.map((offer) => offerWords(offer, findings)),
      ...waits(findings),
      ...groupWords(findings),
    ],
    cautions: [...cautions(findings), LAST_CAUTION],
    next: next(findings, ask),
  };
}

function chosenOf({ offers }: PlanFindings): SizeOffer {
  return offers.find(({ chosen }) => chosen) ?? offers[0]!;
}

function headline(findings: PlanFindings): string {
  const { tenure, matured } = findings;
  const { subgroupSize, pointsNow, weeksPerPoint, weeksUntilVerdict } = chosenOf(findings);
  const how = `Count churn at ${tenure}, in points of ${counted(subgroupSize, 'account')}`;
  if (matured === 0)
    return `${how}, to begin with: nobody has been a customer for ${tenure} yet, so this rests on no figures.`;
  if (pointsNow >= LEAST_POINTS) {
    const pace =
      weeksPerPoint === null
        ? 'no new accounts are coming in'
        : `a new one comes every ${weeksInWords(weeksPerPoint).replace('about a ', '').replace('about ', '')} or so`;
    return `${how}: ${counted(pointsNow, 'point')} are there already, and ${pace}.`;
  }
  const when =
    weeksUntilVerdict === null ? 'and no new accounts are coming in' : `which takes ${weeksInWords(weeksUntilVerdict)}`;
  return `${how}: ${pointsNow === 0 ? 'no point is' : pointsNow === 1 ? 'one point is' : `${numberWord(pointsNow)} points are`} there so far, and a first verdict needs ${numberWord(LEAST_POINTS)}, ${when}.`;
}

const monthWords = ({ month, lost, atRisk, hazard }: TenureMonth): string =>
  `month ${month} (${percent(hazard.estimate)}, ${count(lost)} of ${count(atRisk)})`;

function riskyTimes({ months, usualHazard }: PlanFindings): string {
  const known =
    usualHazard === null ? undefined : `in a usual month ${percent(usualHazard)} of those still there leave`;
  if (known === undefined)
    return 'Too few accounts have left to tell risky months from others: it takes two months at least with 100 accounts still there and 10 that leave.';
  const risky = months.filter((month) => month.risky);
  if (risky.length === 0) return `No month of tenure stands out: ${known}.`;
  const named = [...risky]
    .sort((a, b) => b.hazard.estimate - a.hazard.estimate)
    .slice(0, MONTHS_NAMED)
    .sort((a, b) => a.month - b.month);
  const others = risky.length > named.length ? ` and ${counted(risky.length - named.length, 'other')}` : '';
  return `Risky times are ${others === '' ? listed(named.map(monthWords)) : `${named.map(monthWords).join(', ')}${others}`}; ${known}.`;
}

function stillThere({ months, tenureMonths, medianMonth }: PlanFindings): string[] {
  const last = months.at(-1);
  if (!last) return [];
  const wanted = [Math.max(1, Math.floor(tenureMonths)), 12].filter((month, i, all) => all.indexOf(month) === i);
  const shown = wanted
    .flatMap((month) => months.find((one) => one.month === month) ?? [])
    .sort((a, b) => a.month - b.month);
  if (shown.length === 0) return [];
  const shares = shown.map(
    ({ month, survival, low, high }) =>
      `${percent(survival)} after ${counted(month, 'month')}${low === null || high === null ? '' : ` (95 % interval ${percent(low)} to ${percent(high)})`}`,
  );
  const half =
    medianMonth.time === null
      ? `fewer than half have left by month ${last.month}, the last that can be measured`
      : `half have left by month ${medianMonth.time}`;
  return [
    `Still there: ${listed(shares)}; ${half}. Each month counts only accounts observed through it (a Kaplan-Meier estimate).`,
  ];
}

function offerWords(offer: SizeOffer, findings: PlanFindings): string {
  const { within, move, movedRate } = findings;
  const because: Record<SizeReason, string> = {
    'five-losses': 'about five losses each, the least that can be judged (common practice, no source)',
    'positive-lower-limit': 'the least at which a single very low point can stand out',
    'sees-move': `${moveNoun(move)} would be flagged within ${counted(within, 'point')} in four of five cases`,
    asked: 'as asked',
    recommended: 'so that the points stay few enough to read',
  };
  const verdict =
    offer.weeksUntilVerdict === 0
      ? 'enough for a verdict'
      : offer.weeksUntilVerdict === null
        ? `${LEAST_POINTS} are needed for a verdict`
        : `the ${LEAST_POINTS} for a first verdict in ${weeksInWords(offer.weeksUntilVerdict)}`;
  const pace =
    offer.weeksPerPoint === null
      ? ''
      : `, a new one every ${weeksInWords(offer.weeksPerPoint)
          .replace(/^about a /, '')
          .replace(/^about /, '')}`;
  const delay =
    movedRate === null || offer.delayPoints === null
      ? ''
      : `; ${moveNoun(move)} is flagged after ${oneDigit(offer.delayPoints)} points on average${offer.delayWeeks === null ? '' : `, ${weeksInWords(offer.delayWeeks)} of new accounts`}`;
  const alarms =
    offer.falseAlarmEvery === null
      ? ''
      : `; with nothing changed a flag about once in ${counted(offer.falseAlarmEvery, 'point')}`;
  return `${counted(offer.subgroupSize, 'account')} a point${offer.chosen ? ' (used)' : ''}, ${offer.reasons.map((reason) => because[reason]).join(', and ')}: ${counted(offer.pointsNow, 'point')} so far, ${verdict}${pace}${delay}${alarms}.`;
}

const oneDigit = (value: number): string => (value >= 99.5 ? count(value) : value.toFixed(1));

function waits({ inflowPerWeek, tenure, movedRate, assumedRate, move }: PlanFindings): string[] {
  if (inflowPerWeek <= 0) return [];
  const from =
    movedRate === null
      ? ''
      : ` The move looked for is ${moveNoun(move)}, from ${percent(assumedRate)} to ${percent(movedRate)}.`;
  return [
    `Waits are worked out at ${oneDigit(inflowPerWeek)} accounts a week, the pace of late; add the ${tenure} that an account takes to be old enough.${from}`,
  ];
}

function groupWords({ groups, logRank, segmentColumn, tenure }: PlanFindings): string[] {
  if (groups.length < 2 || segmentColumn === null) return [];
  if (logRank === null)
    return [`The groups in “${segmentColumn}” cannot be compared: nobody left while two of them had accounts.`];
  const test = `log-rank test, which compares those who left with those who would have if all groups left alike: chi-square ${oneDigit(logRank.chiSquare)} on ${logRank.degreesOfFreedom} ${logRank.degreesOfFreedom === 1 ? 'degree' : 'degrees'} of freedom`;
  const far = [...groups]
    .filter((group) => group.expected !== null && group.expected > 0)
    .sort((a, b) => distance(b) - distance(a))
    .slice(0, GROUPS_NAMED);
  const each = far.map(
    (group) =>
      `${group.segment} lost ${count(group.lost)} where ${count(group.expected ?? 0)} were to be expected, and keeps ${percent(group.survival)} for ${tenure}`,
  );
  if (logRank.pValue < DIFFERENT)
    return [
      `The groups in “${segmentColumn}” leave at different paces (${test}; chance alone gives that ${chanceWords(logRank.pValue)}): ${each.join('; ')}.`,
    ];
  return [
    `No clear sign that the groups in “${segmentColumn}” leave at different paces (${test}; chance alone gives that ${chanceWords(logRank.pValue)}), so one chart can hold them all.`,
  ];
}

function distance({ lost, expected }: GroupPace): number {
  return expected === null || expected <= 0 ? 0 : Math.abs(lost - expected) / Math.sqrt(expected);
}

function cautions(findings: PlanFindings): string[] {
  const { matured, lost, rate, assumedRate, move, within, movedRate, sizeForMove, inflowPerWeek, months, tenure } =
    findings;
  const list: string[] = [];
  if (matured === 0)
    list.push(`The sizes take a churn of ${percent(assumedRate)} for granted until there are accounts to go by.`);
  else if (lost === 0)
    list.push(
      `None of ${counted(matured, 'account')} was lost within ${tenure}, so the sizes are worked out as if about one had been.`,
    );
  else if (lost === matured)
    list.push(
      `All of ${counted(matured, 'account')} were lost within ${tenure}, so the sizes are worked out as if about one had stayed.`,
    );
  if (move === 1) list.push('The move to be seen is no change at all, so no delay can be given for it.');
  else if (movedRate === null)
    list.push(
      `${capitalised(moveNoun(move))} of ${percent(rate)} would be more than everybody, so no size can be given for it.`,
    );
  else if (sizeForMove === null)
    list.push(
      `${capitalised(moveNoun(move))} is so small that no size up to ten million accounts a point shows it within ${counted(within, 'point')} in four of five cases.`,
    );
  else if (matured > 0 && sizeForMove > matured)
    list.push(
      `The size for ${moveNoun(move)} within ${counted(within, 'point')} is larger than the ${counted(matured, 'account')} there are to read, so that move cannot be seen so soon.`,
    );
  if (inflowPerWeek <= 0)
    list.push('No new accounts have reached that age of late, so waits cannot be put into weeks.');
  if (months.length > 0 && months.length < 12)
    list.push(
      `Only ${counted(months.length, 'month')} of tenure can be measured (at least ${LEAST_AT_RISK} accounts each); later risky times are not known yet.`,
    );
  if (movedRate !== null)
    list.push(
      'Delays are to the first flag, with the usual level known; a verdict asks for more than one flag can give, and comes later.',
    );
  return list;
}

function next(findings: PlanFindings, ask: string): string[] {
  const { moveAsked, sizeForMove, subgroupSize, logRank, groups, move, within } = findings;
  const steps = [`Ask “${ask}”: it counts in just this way.`];
  if (moveAsked && sizeForMove !== null && sizeForMove !== subgroupSize)
    steps.push(
      `To count for ${moveNoun(move)} within ${counted(within, 'point')} instead, ask “has churn moved, in subgroups of ${sizeForMove}?”.`,
    );
  const first = groups[0]?.segment;
  if (logRank && logRank.pValue < DIFFERENT && first !== undefined)
    steps.push(`Ask about one group at a time as well, for example “has churn moved for ${first}?”.`);
  return steps;
}

/** The plan's part of the JSON: rates as fractions, null where there is no figure. */
export function planFigures(findings: PlanFindings): Record<string, unknown> {
  const { logRank, earlyLogRank, months, ...rest } = findings;
  const test = (one: PlanFindings['logRank']) =>
    one && { chiSquare: one.chiSquare, degreesOfFreedom: one.degreesOfFreedom, pValue: one.pValue };
  return {
    ...rest,
    months,
    firstVerdictPoints: LEAST_POINTS,
    logRank: test(logRank),
    earlyLogRank: test(earlyLogRank),
  };
}
