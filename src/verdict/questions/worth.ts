import { geometricRestrictedMean } from '../../charts/lifetimes/geometricLifetime.ts';
import type { Interval } from '../../charts/types.ts';
import { dayInWords, isoDay } from '../../days.ts';
import { count, counted, listed, percent } from '../words/format.ts';
import { LAST_CAUTION, type Words } from './plan.ts';
import { LEAST_AT_RISK } from './tenureMonths.ts';
import type { Era, EraLifetime, WorthFindings } from './worthFindings.ts';

/** A lifetime of which more than this share was never observed gets a caution. Our choice, no source. */
const MOSTLY_ASSUMED = 0.5;
/** With no more months than this measured, a first yearly renewal is not in the figures. */
const YEAR = 12;

export function worthWords(findings: WorthFindings): Words {
  return {
    headline: headline(findings),
    evidence: [
      ...eraEvidence(findings.now, findings, findings.since === null ? '' : 'since'),
      ...difference(findings),
      ...common(findings),
      ...(findings.before ? eraEvidence(findings.before, findings, 'before') : []),
    ],
    cautions: [...cautions(findings), LAST_CAUTION],
    next: next(findings),
  };
}

/** "31", "8.4". */
export const monthsFigure = (months: number): string => (months < 9.95 ? months.toFixed(1) : count(months));
/** Of months that were measured, a tenth is known. */
const tenth = (months: number): string => months.toFixed(1);
export const monthsWords = (months: number): string =>
  `${monthsFigure(months)} ${monthsFigure(months) === '1.0' ? 'month' : 'months'}`;
/** "the first 16 months" */
const firstMonths = (months: number): string =>
  months === 1 ? 'the first month' : `the first ${counted(months, 'month')}`;
const range = ({ low, high }: { low: number; high: number }, figure: (value: number) => string): string =>
  `95 % interval ${figure(low)} to ${figure(high)}`;

/** "1,115", "12.40": whole from a hundred on. */
export function money(value: number, currency: string | null): string {
  const figure = value >= 99.5 ? count(value) : value.toFixed(2);
  return currency === null ? figure : `${figure} ${currency}`;
}
const currencyOf = ({ amount }: WorthFindings): string | null => (amount.kind === 'amounts' ? amount.currency : null);

function headline(findings: WorthFindings): string {
  const { now, before, since } = findings;
  const { measured, constant } = now;
  const who = since === null ? 'An account' : `An account that started since ${dayInWords(since)}`;
  if (measured === null)
    return `Cannot say how long an account stays: ${since === null ? '' : `of those started since ${dayInWords(since)}, `}${counted(now.watched, 'account')} ${now.watched === 1 ? 'has' : 'have'} been watched through a first month, and it takes ${LEAST_AT_RISK}.`;
  const { horizon, restricted, total } = measured;
  if (total === null)
    return `${who} stays ${tenth(restricted.estimate)} of ${firstMonths(horizon)} on average; how long beyond cannot be said, since nobody left in the last of them.`;
  const { values } = now;
  const currency = currencyOf(findings);
  const worth = (value: Interval | null | undefined): string =>
    value ? ` (worth about ${money(value.estimate, currency)})` : '';
  const stays = `${who} stays about ${monthsWords(total.estimate)}${worth(values?.measured)}`;
  const steady = constant?.mean.estimate ?? null;
  const rests = assumption(measured);
  const assumed = rests === null ? '' : ` if ${rests}`;
  const earlier = before?.measured?.total;
  if (!earlier) {
    const constantly =
      steady === null ? '' : `; a constant rate would make that ${monthsWords(steady)}${worth(values?.constant)}`;
    return `${stays}${assumed}${constantly}.`;
  }
  const steadyBefore = before.constant?.mean.estimate ?? null;
  const constantly =
    steady === null || steadyBefore === null
      ? ''
      : `; constant rates would make that ${monthsFigure(steady)} against ${monthsFigure(steadyBefore)}`;
  return `${stays}, one from before ${monthsFigure(earlier.estimate)}${worth(before.values?.measured)}${assumed === '' ? '' : ','}${assumed}${constantly}.`;
}

/** What a total rests on beyond what was measured; null when nothing. */
function assumption(measured: EraLifetime): string | null {
  const { borrowed, tail } = measured;
  if (borrowed) return 'later months are as they were before the move and then go on so';
  return tail === null ? null : `later months go on as ${monthSpan(tail)} did`;
}

const monthSpan = ({ from, to }: { from: number; to: number }): string =>
  from === to ? `month ${from}` : `months ${from} to ${to}`;

function eraEvidence(era: Era, findings: WorthFindings, which: '' | 'since' | 'before'): string[] {
  const { since } = findings;
  const whose =
    since === null || which === ''
      ? ''
      : which === 'since'
        ? `Started since ${dayInWords(since)}: `
        : 'Started before: ';
  const { measured } = era;
  const lines: string[] = [];
  if (measured) {
    const { horizon, restricted } = measured;
    lines.push(
      `${whose}${whose === '' ? 'M' : 'm'}easured, nothing assumed: of ${firstMonths(horizon)} an account stays ${tenth(restricted.estimate)} on average (${range(restricted, tenth)}; ${counted(era.watched, 'account')} watched through the first, ${count(era.months.at(-1)?.atRisk ?? 0)} through the last).`,
      tailWords(measured, whose),
    );
  } else if (which === 'before') lines.push(`${whose}too few were watched to measure a lifetime.`);
  lines.push(...constantWords(era, findings, whose), ...valueWords(era, findings, whose));
  return lines;
}

function tailWords(measured: EraLifetime, whose: string): string {
  const { horizon, restricted, tail, total, survival, borrowed } = measured;
  const left = survival[horizon] ?? 0;
  const start = whose === '' ? 'B' : `${whose}b`;
  if (left === 0)
    return `${start}y the end of month ${horizon} everybody had left, so nothing need be assumed about later.`;
  if (tail === null || total === null)
    return `${start}eyond month ${horizon} nothing can be said: ${percent(left)} are still there, and nobody left in the last months that were measured.`;
  const pooled = `${percent(tail.hazard)} of those left go each month, as in ${monthSpan(tail)} (${count(tail.lost)} losses in ${count(tail.atRisk)} account-months)`;
  const assumed =
    borrowed === null
      ? `it is assumed that ${pooled}`
      : `it is assumed that ${monthSpan(borrowed)}, which too few of them have reached, are as for accounts from before, and that then ${pooled}`;
  return `${start}eyond month ${horizon}, where ${percent(left)} are still there, ${assumed}: ${monthsWords(total.estimate - restricted.estimate)} more, so ${monthsFigure(total.estimate)} in all (${range(total, monthsFigure)}).`;
}

function constantWords({ constant, counts }: Era, { tenure }: WorthFindings, whose: string): string[] {
  if (constant === null) return [];
  const { mean, hazard } = constant;
  const of = `${count(counts.lost)} of ${counted(counts.accounts, 'account')} lost within ${tenure}`;
  const start = whose === '' ? 'A' : `${whose}a`;
  if (mean.estimate === null)
    return [
      `${start}t a constant rate no lifetime can be given: ${of}; the 95 % interval begins at ${monthsWords(mean.low)} and has no upper end.`,
    ];
  const limits =
    mean.high === null
      ? `95 % interval from ${monthsFigure(mean.low)}`
      : range({ low: mean.low, high: mean.high }, monthsFigure);
  return [
    `${start}t a constant rate: ${of} is ${percent(hazard.estimate)} a month; the same at every age and for ever, that makes ${monthsWords(mean.estimate)} (${limits}).`,
  ];
}

function valueWords({ values, measured }: Era, findings: WorthFindings, whose: string): string[] {
  if (values === null) return [];
  const currency = currencyOf(findings);
  const figure = (value: number): string => money(value, currency);
  const part = (name: string, interval: Interval | null): string[] =>
    interval ? [`${name} ${figure(interval.estimate)} (${range(interval, (value) => money(value, null))})`] : [];
  const parts = [
    ...part(`over ${firstMonths(measured?.horizon ?? 0)}, nothing assumed,`, values.restricted),
    ...part(
      'with the later months assumed above',
      measured?.total && measured.total.estimate > measured.restricted.estimate ? values.measured : null,
    ),
    ...part('at the constant rate', values.constant),
  ];
  if (parts.length === 0) return [];
  return [
    `${whose}${whose === '' ? 'A' : 'a'}t a mean of ${figure(values.perMonth)} a month (${counted(values.accounts, 'account')}): ${parts.join('; ')}.`,
  ];
}

/** Why the two ways differ, in a sentence. */
function difference({ now, before, tenure }: WorthFindings): string[] {
  const measured = now.measured?.total?.estimate;
  const constant = now.constant?.mean.estimate ?? null;
  if (measured === undefined || constant === null) return [];
  const [measuredBefore, constantBefore] = [before?.measured?.total?.estimate, before?.constant?.mean.estimate ?? null];
  if (measuredBefore !== undefined && constantBefore !== null)
    return [
      `Constant rates carry the pace of the first ${tenure} on for ever, so they turn the move into ${monthsFigure(constantBefore)} to ${monthsWords(constant)}; where later months keep their own pace, it is ${monthsFigure(measuredBefore)} to ${monthsFigure(measured)}.`,
    ];
  const ratio = constant / measured;
  if (ratio > 0.95 && ratio < 1.05)
    return ['The two ways agree within 5 %: the pace of leaving hardly depends on how long an account has been there.'];
  const by = `${Math.round(Math.abs(ratio - 1) * 100)} %`;
  return [
    ratio < 1
      ? `The constant figure is ${by} lower: it carries the pace of the first ${tenure} on for ever, and later fewer leave.`
      : `The constant figure is ${by} higher: it carries the pace of the first ${tenure} on for ever, and later more leave.`,
  ];
}

function common({ common, since }: WorthFindings): string[] {
  if (common === null || since === null) return [];
  const { months, now, before, difference } = common;
  const two = (value: number): string => value.toFixed(2);
  const signed = (value: number): string => `${value < 0 ? '−' : '+'}${two(Math.abs(value))}`;
  return [
    `Over ${firstMonths(months)}, which both were watched for, accounts since the move stay ${two(now.estimate)} months on average and those before it ${two(before.estimate)}: ${signed(difference.estimate)} (95 % interval ${signed(difference.low)} to ${signed(difference.high)}), with nothing assumed.`,
  ];
}

function cautions(findings: WorthFindings): string[] {
  const { now, before, outcome, since, amount, tenure, tenureMonths } = findings;
  const list: string[] = [];
  const { measured } = now;
  const assumedShare = measured?.total ? 1 - measured.restricted.estimate / measured.total.estimate : 0;
  if (measured && assumedShare > MOSTLY_ASSUMED)
    list.push(
      `${Math.round(100 * assumedShare)} % of that lifetime lies beyond the ${counted(measured.horizon, 'month')} that were measured: it is an assumption carried forward, and its interval knows nothing of what may change.`,
    );
  if (measured && measured.horizon <= YEAR && (measured.survival[measured.horizon] ?? 0) > 0)
    list.push(
      `Only ${counted(measured.horizon, 'month')} can be measured${since === null ? '' : ' since the move'}; what happens at a first yearly renewal is not in the figures.`,
    );
  if (since !== null && before)
    list.push(
      'The move was picked out because it stood out, so the lasting difference may be smaller; that something changed does not say why.',
    );
  else if (outcome === 'cannot-say' || outcome === 'too-early')
    list.push('Whether churn has moved cannot be said of these accounts, so early and late ones are taken together.');
  else if (outcome === 'steady')
    list.push('Churn has not moved clearly, so early and late accounts are taken together.');
  else list.push('The figures are for all accounts taken together, early and late.');
  if (now.constant && now.counts.lost === now.counts.accounts)
    list.push(`Every account that reached ${tenure} had left by then, so there is no later life to measure.`);
  if (tenureMonths < 1) list.push(`The constant rate rests on ${tenure} alone, less than a month of life.`);
  list.push(...amountCautions(amount));
  list.push(
    'Months are those begun, the one in which an account leaves included, as they are paid for at their start; nothing is discounted.',
  );
  return list;
}

function amountCautions(amount: WorthFindings['amount']): string[] {
  switch (amount.kind) {
    case 'no-column':
      return ['The export has no column of amounts, so there are lifetimes and no values.'];
    case 'currencies':
      return [
        `Amounts are in more than one currency (${listed(amount.currencies)}) and none is converted, so there are lifetimes and no values.`,
      ];
    case 'unusable': {
      const why = {
        unreadable: `No amount in “${amount.column}” can be read`,
        negative: `No amount in “${amount.column}” is above zero, and a negative one is no income`,
        zero: `Every amount in “${amount.column}” is zero`,
      }[amount.reason];
      return [`${why}, so there are lifetimes and no values.`];
    }
    case 'amounts': {
      const { column, months, periodStated, negative, missing, changed, currency } = amount;
      const period = !periodStated
        ? `“${column}” does not say which time an amount pays for; it is taken as a month. If it is a year, every value is twelve times too high.`
        : months === 1
          ? null
          : `“${column}” is taken to pay for ${months === 12 ? 'a year' : months === 3 ? 'a quarter' : 'a week'} and is turned into months.`;
      const left = [
        negative > 0 ? `${counted(negative, 'account')} with a negative amount` : null,
        missing > 0 ? `${counted(missing, 'account')} without one that can be read` : null,
      ].filter((part) => part !== null);
      return [
        ...(period === null ? [] : [period]),
        ...(left.length > 0 ? [`Left out of the mean amount: ${listed(left)}.`] : []),
        ...(changed > 0
          ? [`${counted(changed, 'account')} paid another amount later; the one each began with is taken.`]
          : []),
        ...(currency === null ? ['No currency is stated; values are in the unit of the column.'] : []),
        'A value is income, before any cost, and takes it that accounts that pay more stay as long as the others.',
      ];
    }
  }
}

function next({ now, amount, since }: WorthFindings): string[] {
  const steps: string[] = [];
  if (now.measured)
    steps.push(
      `If one figure must be given, give the one over ${firstMonths(now.measured.horizon)}: it assumes nothing. Give any other together with its assumption.`,
    );
  if (since === null) steps.push('Ask “has churn moved?” before taking these figures for those of new accounts.');
  else steps.push('Ask “has churn moved?” for the move itself, and “plan” for the risky times.');
  if (amount.kind === 'currencies')
    steps.push('Ask about one group whose accounts pay in one currency, or export the amounts in one.');
  if (amount.kind === 'no-column' || (amount.kind === 'unusable' && amount.reason !== 'zero'))
    steps.push('For values, name the column that holds what each account pays, or export with it.');
  return steps;
}

/** The JSON's part: months and amounts as numbers, every figure beside the assumption it rests on. */
export function worthFigures(findings: WorthFindings): Record<string, unknown> {
  const { now, before, since, ...rest } = findings;
  return {
    ...rest,
    since: since === null ? null : isoDay(since),
    now: eraFigures(now, findings),
    before: before && eraFigures(before, findings),
  };
}

function eraFigures(era: Era, { tenure }: WorthFindings): Record<string, unknown> {
  const { measured, constant, values, counts, months, watched } = era;
  return {
    counts,
    watched,
    constant: constant && {
      assumption: `every month loses the share that compounds to the loss within ${tenure}, for ever`,
      monthlyHazard: constant.hazard,
      months: constant.mean,
      medianMonth: constant.median,
      // Over the months that were measured, to be held against the restricted mean.
      restrictedMonths: measured && geometricRestrictedMean(constant.hazard.estimate, measured.horizon),
    },
    restricted: measured && { assumption: null, horizonMonths: measured.horizon, months: measured.restricted },
    measured: measured && {
      assumption:
        measured.tail === null
          ? null
          : `${measured.borrowed ? `${monthSpan(measured.borrowed)} lose what accounts from before the move lost; ` : ''}after month ${measured.tail.to} every month loses what ${monthSpan(measured.tail)} lost, for ever`,
      borrowed: measured.borrowed,
      tail: measured.tail,
      months: measured.total,
    },
    values,
    byMonth: months.map(({ month, atRisk, lost, survival, low, high }) => ({
      month,
      atRisk,
      lost,
      survival,
      low,
      high,
    })),
  };
}
