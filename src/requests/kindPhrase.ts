import type { Day } from '../days.ts';
import { dateAt } from './dates.ts';
import { movedTo, movePhrase, withinPhrase } from './movePhrase.ts';
import { SEGMENT_WORDS } from './noise.ts';
import { percentAt } from './percentPhrase.ts';
import type { Token } from './tokens.ts';
import type { SideKind } from './types.ts';

/** A question other than the plain one, with what belongs to it alone. */
export type Asked =
  | { readonly kind: 'where' | 'revenue' | 'worth' | 'spread' | 'explain' }
  | { readonly kind: 'plan'; readonly move?: number; readonly within?: number }
  | { readonly kind: 'early'; readonly move?: number; readonly to?: number }
  | { readonly kind: 'reconcile'; readonly rate: number; readonly decimals: number; readonly month?: Day }
  | { readonly kind: 'target'; readonly rate: number };

/** A question that lacks the figure it is about, with an example of how to say it. */
export interface Lacking {
  readonly kind: 'lacking';
  readonly from: number;
  readonly to: number;
  readonly nearest: string;
}

const POLITE =
  /^(please|hey|hi|hello|ebbline|ebb|me|us|the|a|an|and|now|ok|okay|so|show|give|tell|can|could|you|do|run)$/;

/**
 * Which of the side questions a sentence asks, if any. Its words are used up; dates, ages, groups and the rest are left for the scope.
 * @param sentence as typed, for the percent signs that are no tokens
 * @param today    for "reconcile 3 % for March"
 */
export function kindPhrase(
  sentence: string,
  list: Token[],
  column: string | undefined,
  today: Day,
): Asked | Lacking | undefined {
  const kind = kindOf(list, column, sentence);
  if (kind === undefined) return undefined;
  const passed = new Set(PASSED[kind.name]?.split(' '));
  for (const token of list) if (token.segment === undefined && passed.has(token.text)) token.used = true;
  if (kind.name === 'plan') {
    use(list, kind.at);
    const move = movePhrase(sentence, list);
    const within = withinPhrase(list);
    return { kind: 'plan', ...(move === undefined ? {} : { move }), ...(within === undefined ? {} : { within }) };
  }
  if (kind.name === 'early') {
    use(list, kind.at);
    const move = movePhrase(sentence, list);
    const to = move === undefined ? movedTo(sentence, list) : undefined;
    return { kind: 'early', ...(move === undefined ? {} : { move }), ...(to === undefined ? {} : { to }) };
  }
  if (kind.name === 'target' || kind.name === 'reconcile') {
    const percent = percentAt(sentence, list);
    if (!percent) {
      const example = kind.name === 'target' ? 'target 5 %' : 'reconcile 14.2 %';
      return {
        kind: 'lacking',
        from: kind.at[0]!,
        to: kind.at[0]! + 1,
        nearest: `Say the figure with it: “${example}”.`,
      };
    }
    use(list, [...kind.at, percent.at]);
    if (kind.name === 'target') return { kind: 'target', rate: percent.rate };
    const month = monthPhrase(list, percent.at + 1, today);
    return {
      kind: 'reconcile',
      rate: percent.rate,
      decimals: percent.decimals,
      ...(month === undefined ? {} : { month }),
    };
  }
  use(list, kind.at);
  return { kind: kind.name };
}

/** What may follow "early" when it opens a sentence: else it is only a time. */
const WATCHED = new Set('for in at on with to news a an rise rising fall falling doubling halving move'.split(' '));

/** Words that go with a question and add nothing to it. */
const PASSED: Partial<Record<SideKind, string>> = {
  where: 'side',
  plan: 'need take use count measure sample read size sizes verdict answer see seen show notice detect',
  early: 'watch watching warning sign signs alarm news stand stands accounts',
  revenue: 'recurring gross net',
  reconcile: 'come comes calculated calculation reported report percent pct which way ways formula explain',
  worth: 'value customer lifetimes',
  target:
    'met meet meets meeting hit hits hitting reach reached reaching percent pct beyond under above below bonus pass passed',
  spread: 'points vary varies wide distribution',
  explain: 'verdict answer result reached that steps step working how calculated last',
};

interface KindAt {
  readonly name: SideKind;
  /** places of the words that said so */
  readonly at: readonly number[];
}

function kindOf(list: readonly Token[], column: string | undefined, sentence: string): KindAt | undefined {
  const word = (i: number): string => (list[i] && list[i].segment === undefined ? list[i].text : '');
  let first = 0;
  while (first < list.length && POLITE.test(word(first))) first++;
  const opener = word(first);
  const next = word(first + 1);
  const groups = new Set([
    ...SEGMENT_WORDS,
    ...(column === undefined ? [] : [column.toLowerCase(), `${column.toLowerCase()}s`]),
  ]);
  const anywhere = (...words: string[]): number => list.findIndex((_, i) => words.includes(word(i)));
  const phrase = (...words: string[]): number =>
    list.findIndex((_, i) => words.every((wanted, k) => wanted.split('|').includes(word(i + k))));
  const run = (from: number, length: number): number[] => Array.from({ length }, (_, k) => from + k);

  if (opener === 'explain') return { name: 'explain', at: [first] };
  const shown = phrase('how', 'did|do', 'you', 'get|reach|arrive|calculate|compute|work|come');
  if (shown >= 0) return { name: 'explain', at: run(shown, 4) };
  const work = phrase('show', 'your|the|me', 'working|workings|work|steps|calculation');
  if (work >= 0) return { name: 'explain', at: run(work, 3) };

  const reconcile = anywhere('reconcile', 'reconciliation');
  if (reconcile >= 0) return { name: 'reconcile', at: [reconcile] };
  const target = anywhere('target', 'threshold', 'goal');
  if (target >= 0) return { name: 'target', at: [target] };
  const bound = phrase('below|under|above|over');
  if (bound >= 0 && percentAt(sentence, list)?.at === bound + 1) return { name: 'target', at: [bound] };
  if (phrase('where|how', 'does|do|did|is') >= 0 && percentAt(sentence, list) && anywhere('come', 'calculated') >= 0)
    return { name: 'reconcile', at: run(phrase('where|how', 'does|do|did|is'), 2) };

  const worth = anywhere('worth', 'lifetime', 'ltv', 'clv');
  if (worth >= 0)
    return { name: 'worth', at: word(worth) === 'lifetime' && word(worth + 1) === 'value' ? run(worth, 2) : [worth] };
  const revenue = anywhere('revenue', 'mrr', 'arr', 'money');
  if (revenue >= 0) return { name: 'revenue', at: [revenue] };
  const spread = anywhere('spread', 'histogram', 'distribution', 'dispersion', 'overdispersion');
  if (spread >= 0) return { name: 'spread', at: [spread] };

  const warning = phrase('early', 'warning|watch|sign|signs|alarm');
  if (warning >= 0) return { name: 'early', at: run(warning, 2) };
  if (opener === 'early' && (next === '' || WATCHED.has(next))) return { name: 'early', at: [first] };
  if (opener === 'anything' && next === 'early') return { name: 'early', at: run(first, 2) };

  if (opener === 'plan' && (next === '' || PLANNING.has(next)) && list[first + 1]?.segment === undefined)
    return { name: 'plan', at: [first] };
  const how = phrase('how', 'should|do|can|to|shall', 'we|i|you|count', 'count|measure|sample|read|churn');
  if (how >= 0) return { name: 'plan', at: run(how, 4) };
  const many = phrase(
    'how',
    'many',
    'accounts|customers|points',
    'do|should|would|per',
    'we|i|point',
    'need|take|use|plan',
  );
  if (many >= 0) return { name: 'plan', at: run(many, 6) };
  const long = phrase('how', 'long', 'until|before|till|to');
  if (long >= 0) return { name: 'plan', at: run(long, 3) };

  if (opener === 'where' && !groups.has(next) && list[first + 1]?.segment === undefined)
    return { name: 'where', at: [first] };
  if (
    opener === 'where' &&
    groups.has(next) &&
    !['is', 'equals', 'of'].includes(word(first + 2)) &&
    list.length <= first + 2
  )
    return { name: 'where', at: [first, first + 1] };
  if (opener === 'which' && groups.has(next)) return { name: 'where', at: run(first, 2) };
  const by = phrase('by|per|across|between|each|every');
  if (by >= 0 && (groups.has(word(by + 1)) || word(by + 1) === 'all') && list[by + 2]?.segment === undefined) {
    const after = word(by + 2);
    // "by plan Orchard" only names one of them.
    if (after === '' || ['since', 'at', 'in', 'with', 'as', 'for', 'and', 'on', 'plans', 'groups'].includes(after))
      return { name: 'where', at: run(by, 2) };
  }
  return undefined;
}

const PLANNING = new Set('for to the a at ahead our how with within since as in and'.split(' '));

/** "for March 2025", "in March", right after the figure: the first day of that month. */
function monthPhrase(list: Token[], after: number, today: Day): Day | undefined {
  const i = /^(percent|pct)$/.test(list[after]?.text ?? '') ? after + 1 : after;
  if (!['for', 'in'].includes(list[i]?.text ?? '')) return undefined;
  const date = dateAt(list, i + 1, today, 'first');
  if (!date || date.day === null) return undefined;
  use(
    list,
    Array.from({ length: date.to - i }, (_, k) => i + k),
  );
  return date.day;
}

function use(list: readonly Token[], at: readonly number[]): void {
  for (const i of at) if (list[i]) list[i].used = true;
}
