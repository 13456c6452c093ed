import { type Day, dayInWords } from '../../../days.ts';
import { capitalised, count, counted, listed, percentagePoints } from '../../words/format.ts';
import type { Candidate, ReconcileFindings } from './findings.ts';
import { monthWords, outOf, percentWith, wayWords } from './names.ts';

export interface ReconcileContext {
  readonly segment: string | null;
  readonly asOf: Day;
  readonly asOfInferred: boolean;
  /** cautions that reading the file gave rise to */
  readonly readCautions: readonly string[];
}

export interface ReconcileWords {
  readonly headline: string;
  readonly evidence: readonly string[];
  readonly cautions: readonly string[];
  readonly next: readonly string[];
}

const TOLD = 5;
const NEAREST_TOLD = 3;
/** As many coincidences as this call for a word. Our choice, no source. */
const COINCIDENCES = 0.5;

/** Which common calculation gives the figure, what the others give, and how far each is from the census. */
export function reconcileWords(findings: ReconcileFindings, context: ReconcileContext): ReconcileWords {
  return {
    headline: headline(findings, context),
    evidence: evidence(findings),
    cautions: cautions(findings, context),
    next: next(findings, context),
  };
}

/** The figure as it was given. */
export function reportedWords({ reported, decimals }: ReconcileFindings): string {
  return percentWith(reported.rate, decimals);
}

/** A computed figure with one more decimal than the reported one, so that its rounding can be seen. */
function shown(candidate: Candidate, { decimals }: ReconcileFindings): string {
  return percentWith(candidate.value, decimals + 1);
}

/** Those about the month that was named, when there are any; else all. */
function mainGiving({ matched, named }: ReconcileFindings): readonly Candidate[] {
  if (named?.kind !== 'complete') return matched.giving;
  return matched.giving.filter(({ period }) => period !== null && period.last === named.month);
}

function headline(findings: ReconcileFindings, { segment }: ReconcileContext): string {
  const { candidates, matched, named } = findings;
  const figure = reportedWords(findings);
  const whose = segment === null ? '' : ` for ${segment}`;
  const about = named?.kind === 'complete' ? ` for ${monthWords(named.month)}` : '';
  if (candidates.length === 0)
    return `Cannot say where ${figure}${whose} comes from: the data holds no whole calendar month with customers in it, and no account has had the time the census needs.`;
  const giving = mainGiving(findings);
  const [first] = giving;
  if (first && giving.length === 1)
    return `${figure}${whose} is what one of ${counted(candidates.length, 'figure')} that were tried comes to${about}: ${wayWords(first)}${outOf(first)}. A fit is a hint, not a proof.`;
  if (first)
    return `${figure}${whose} is what ${giving.length} of ${candidates.length} figures come to${about}, so it alone does not tell which was meant; one is ${wayWords(first)}${outOf(first)}.`;
  const elsewhere = matched.giving[0];
  if (elsewhere)
    return `No common calculation gives ${figure}${whose}${about}; it is what another time gives: ${wayWords(elsewhere)}${outOf(elsewhere)}.`;
  const nearest = matched.nearest[0];
  return `None of ${counted(candidates.length, 'figure')} gives ${figure}${whose}; the nearest is ${nearest ? `${shown(nearest, findings)}, ${wayWords(nearest)}` : 'unknown'}.`;
}

function evidence(findings: ReconcileFindings): string[] {
  const { candidates, matched, census, reported } = findings;
  if (candidates.length === 0) return [];
  const main = mainGiving(findings);
  const giving = [...main, ...matched.giving.filter((one) => !main.includes(one))];
  const rest = giving.length - TOLD;
  const lines = giving.slice(0, TOLD).map((one) => `Gives it: ${valueLine(one, findings)}`);
  if (rest > 0)
    lines.push(`${counted(rest, 'further figure')} of those tried ${rest === 1 ? 'rounds' : 'round'} to it.`);
  if (giving.length === 0)
    lines.push(...matched.nearest.slice(0, NEAREST_TOLD).map((one) => `Near it: ${valueLine(one, findings)}`));
  if (census)
    lines.push(
      `The census, which compares accounts of equal age: ${shown(census, findings)} are lost within ${census.tenure ?? ''} of starting (${count(census.lost ?? 0)} of ${counted(census.over ?? 0, 'account')} that have had that long). ${reportedWords(findings)} lies ${apart(reported.rate, census.value)} it.`,
    );
  lines.push(...tableLines(findings, new Set(lines)));
  lines.push(triedSentence(findings));
  return lines;
}

/** "Lost in March 2025, over …: 2.31 % (41 of 1,775 accounts), 3.90 percentage points below the census." */
function valueLine(candidate: Candidate, findings: ReconcileFindings): string {
  const { census } = findings;
  const from = census === null || candidate === census ? '' : `, ${apart(candidate.value, census.value)} the census`;
  return `${wayWords(candidate)}: ${shown(candidate, findings)}${outOf(candidate)}${from}.`;
}

function apart(value: number, from: number): string {
  const points = percentagePoints(value - from).replace(/^[+−]/, '');
  if (Number(points) === 0) return 'level with';
  return `${points} percentage ${points === '1.0' ? 'point' : 'points'} ${value > from ? 'above' : 'below'}`;
}

/** The ways side by side for the period that is asked about, and for the twelve months to its end. */
function tableLines(findings: ReconcileFindings, said: ReadonlySet<string>): string[] {
  const { candidates } = findings;
  const first = candidates.find(({ period }) => period !== null)?.period;
  if (!first) return [];
  const year = candidates.find(({ period }) => period?.kind === 'year')?.period;
  return candidates
    .filter(({ period }) => period !== null && (period === first || period === year))
    .map((one) => capitalised(valueLine(one, findings)))
    .filter((line) => ![...said].some((other) => other.endsWith(line.slice(1))));
}

function triedSentence({ candidates, months }: ReconcileFindings): string {
  const tenures = candidates.flatMap(({ way, tenure }) => (way === 'census' && tenure !== null ? [tenure] : []));
  const census = tenures.length > 0 ? `the census at ${listed(tenures)}` : null;
  const monthly = months
    ? 'the ways of dividing those lost by the customers, over a month, a calendar quarter, twelve months and all complete months, and over each of the last twelve months'
    : null;
  return `Tried: ${[monthly, census].filter((part) => part !== null).join('; ')}; ${counted(candidates.length, 'figure')} in all.`;
}

function cautions(findings: ReconcileFindings, context: ReconcileContext): string[] {
  const { matched, named, census, months, reported, candidates } = findings;
  const list: string[] = [...context.readCautions];
  if (named && named.kind !== 'complete')
    list.push(
      named.kind === 'before'
        ? `Nobody was a customer in ${monthWords(named.month)}, so other months were looked at.`
        : `The data does not cover ${monthWords(named.month)} to its end, so ${months ? `the months to ${monthWords(months.last)} were looked at` : 'no month could be looked at'}.`,
    );
  if (reported.rate > 1)
    list.push(
      'More than 100 % can only come from a rate multiplied up to a longer time, or from a slip of the decimal point.',
    );
  if (matched.giving.length > 0 && matched.byChance >= COINCIDENCES)
    list.push(
      `With ${candidates.length} figures tried, about ${Math.max(1, Math.round(matched.byChance))} would round to ${reportedWords(findings)} by coincidence: a fit is a hint, not a proof. A figure with more decimals would tell more.`,
    );
  else if (matched.giving.length > 0) list.push('That a calculation fits does not prove that it was the one used.');
  if (census && months)
    list.push(
      `A monthly rate says how many customers leave in a month, whatever their age; the census says how many leave within ${census.tenure ?? ''} of starting. They differ by what they ask, and neither is wrong; only the first moves when many new customers join.`,
    );
  if (context.asOfInferred)
    list.push(
      `The data is taken to be complete through ${dayInWords(context.asOf)}, worked out from the file; a wrong date makes the last month look better than it was.`,
    );
  list.push(
    'Which calculation is right is not for Ebbline to say: your company’s own written definition, and its finance and legal people, decide.',
  );
  return list;
}

function next(findings: ReconcileFindings, { segment }: ReconcileContext): string[] {
  const { matched, candidates } = findings;
  if (candidates.length === 0)
    return ['Ask again when the data covers a whole month, or read an export that reaches further.'];
  const figure = reportedWords(findings);
  return [
    matched.giving.length > 0
      ? `Ask whoever reported ${figure} whether that is the definition written down, and for the two numbers that were divided.`
      : `Ask whoever reported ${figure} for the two numbers that were divided, and for the days between which they were counted.`,
    ...(segment === null && matched.giving.length === 0
      ? [
          'A figure for some of the accounts only can be looked for too: name the group, as in “reconcile … for Orchard”.',
        ]
      : []),
    'A figure alone does not tell whether churn has moved; ask “has churn moved?”.',
  ];
}
