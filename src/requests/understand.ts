import type { Day } from '../days.ts';
import { baselinePhrase, settlePhrase, subgroupSizePhrase } from './countPhrases.ts';
import { asOfPhrase, sincePhrase } from './datePhrases.ts';
import { kindPhrase } from './kindPhrase.ts';
import { isNoise, leftovers } from './leftovers.ts';
import { ASKING } from './noise.ts';
import { putIntoWords } from './putIntoWords.ts';
import { ratePhrase } from './ratePhrase.ts';
import { segmentPhrase } from './segmentPhrase.ts';
import { tenurePhrase } from './tenurePhrase.ts';
import { type Token, tokens } from './tokens.ts';
import type { Question, Request, RequestContext, Scope, SideQuestion, Understanding } from './types.ts';
import { chartPhrase, viewPhrase } from './viewPhrase.ts';
import { showsWeekly, stopPhrase, weeklyPhrase } from './weeklyPhrase.ts';

type Found = { readonly from: number; readonly to: number };
type Draft = { -readonly [K in keyof Scope]: Scope[K] };
type Pieces = Understanding['notUnderstood'];

const ABOUT_RATE =
  'I say whether the rate has moved, and that is the question answered here; the usual rate stands in the reply.';
const LARGEST_COUNT = 1_000_000;

/**
 * Understands a sentence from the channel or the command line.
 * @param text    free words, without the platform's mark-up; empty words ask the plain question
 * @param context values that occur in the data, today, and the data-through date when there is data
 * @returns the request, the request put back into words, and the pieces that found no use
 * Method: phrases are looked for in a fixed order and consume their words; words that carry no meaning are passed over; what remains is
 * reported, never guessed.
 */
export function understand(text: string, context: RequestContext): Understanding {
  const { sentence, list } = tokens(text, context.segments);
  const meant = list
    .filter((token) => !/^(please|hey|hi|hello|ebbline|ebb|me|the|a|to)$/.test(token.text))
    .map((t) => t.text);
  const weekly = weeklyRequest(text, context);
  if (weekly) return weekly;
  const other = otherThanAsk(meant);
  if (other) return { request: other, understood: putIntoWords(other), notUnderstood: [] };

  const problems: { text: string; nearest: string }[] = [];
  const asked = kindPhrase(sentence, list, context.segmentColumn, context.asOf ?? context.today);
  if (asked?.kind === 'lacking') {
    problems.push({ text: sentence.slice(list[asked.from]!.from, list[asked.to - 1]!.to), nearest: asked.nearest });
    return { request: { kind: 'help' }, understood: 'help', notUnderstood: problems };
  }
  const scope = readScope(sentence, list, context, problems);
  const request: Question | SideQuestion = asked ? { ...scope, ...asked } : { ...scope, kind: 'ask' };
  const asksNothing =
    asked === undefined && list.length > 0 && !list.some((token) => token.used || ASKING.has(token.text));
  const rate = asksNothing ? undefined : ratePhrase(list);
  if (rate) {
    problems.push({ text: sentence.slice(list[rate.from]!.from, list[rate.to - 1]!.to), nearest: ABOUT_RATE });
    for (const token of list.slice(rate.from, rate.from + 2)) token.used = true;
  }
  const notUnderstood: Pieces = [...problems, ...leftovers(sentence, list, context, request.segment !== undefined)];
  // "Thank you" or "why?" alone is no question about churn; a verdict nobody asked for would be noise.
  const settled: Request = asksNothing ? { kind: 'help' } : request;
  return { request: settled, understood: putIntoWords(settled), notUnderstood };
}

const WHEN =
  'Say the day and the time, such as “every Monday at 9:00”; a time zone may follow, such as “Europe/Vienna”.';

function weeklyRequest(text: string, context: RequestContext): Understanding | undefined {
  const whole = (request: Request, notUnderstood: Pieces = []): Understanding => ({
    request,
    understood: putIntoWords(request),
    notUnderstood,
  });
  const stop = stopPhrase(text);
  if (stop) return whole({ kind: 'weekly-stop', which: stop.which });
  if (showsWeekly(text)) return whole({ kind: 'weekly-show' });
  const found = weeklyPhrase(text);
  if (found === undefined) return undefined;
  if (found === 'no-time') return whole({ kind: 'help' }, [{ text, nearest: WHEN }]);
  const rest = understand(found.rest === '' ? 'has churn moved' : found.rest, context);
  // Words such as "post" or "tell us" are no question of their own.
  const question: Question = rest.request.kind === 'ask' ? rest.request : { kind: 'ask' };
  const odd = rest.request.kind !== 'ask' && rest.request.kind !== 'help';
  const only = 'By itself I post only whether churn has moved; ask the other questions when you want them.';
  return whole(
    { kind: 'weekly-set', time: found.time, question },
    odd ? [{ text: found.rest, nearest: only }] : rest.request.kind === 'ask' ? rest.notUnderstood : [],
  );
}

const HELP =
  /^(help|usage|commands|instructions|examples?|what can you do( here| for us)?|how do(es)? (i|we|you|this|it) (use|work|ask|do)( this| it| you)?)$/;
const DATA =
  /^((show|see|which|what) )?(the |your )?(data|dataset|file|export|columns?|upload)( do you (have|use|know)| did you (read|use)| (was|were|is|are) (read|loaded|used|there))?$|^(show )?what (did you|have you|was|you) (read|got|loaded)$/;

function otherThanAsk(meant: readonly string[]): Request | undefined {
  const joined = meant.join(' ');
  if (HELP.test(joined)) return { kind: 'help' };
  if (DATA.test(joined)) return { kind: 'data' };
  return undefined;
}

/** What the sentence pins down, whichever question it asks. */
function readScope(
  sentence: string,
  list: Token[],
  context: RequestContext,
  problems: { text: string; nearest: string }[],
): Scope {
  const draft: Draft = {};
  const column = context.segmentColumn;
  const use = (found: Found): void => {
    for (let i = found.from; i < found.to; i++) list[i]!.used = true;
  };
  const refuse = (found: Found, nearest: string): void => {
    use(found);
    problems.push({ text: sentence.slice(list[found.from]!.from, list[found.to - 1]!.to), nearest });
  };

  const quoted = list.findIndex((token) => token.segment !== undefined);
  if (quoted >= 0) {
    use({ from: quoted, to: quoted + 1 });
    draft.segment = { ...namedColumn(list, quoted, column), value: list[quoted]!.segment! };
  } else {
    const marked = segmentPhrase(list, context.segments, column, 'marked');
    if (marked) {
      use(marked);
      draft.segment = { ...namedColumn(list, marked.from, column), value: marked.value };
    }
  }

  const chart = chartPhrase(list);
  if (chart) draft.chart = chart;
  const view = viewPhrase(list);
  if (view) draft.view = view;
  const settle = settlePhrase(list);
  if (settle && whole(settle.value, 0, 3_650)) {
    use(settle);
    draft.settleDays = settle.value;
  }
  const size = subgroupSizePhrase(list);
  if (size && whole(size.value, 2, LARGEST_COUNT)) {
    use(size);
    draft.subgroupSize = size.value;
  } else if (size) refuse(size, 'A subgroup holds a whole number of accounts, at least 2: say “subgroups of 120”.');
  const baseline = baselinePhrase(list);
  if (baseline && whole(baseline.value, 2, LARGEST_COUNT)) {
    use(baseline);
    draft.baseline = baseline.value;
  } else if (baseline)
    refuse(baseline, 'A baseline is a whole number of points, at least 2 and better 25 to 30: say “baseline 30”.');

  const dated = (found: (Found & { day: Day | null }) | undefined, keep: (day: Day) => void): void => {
    if (!found) return;
    if (found.day === null)
      refuse(found, 'That date reads two ways. Write the month as a word, such as “30 June 2025”, or as 2025-06-30.');
    else {
      use(found);
      keep(found.day);
    }
  };
  dated(asOfPhrase(list, context.today), (day) => {
    draft.asOf = day;
  });
  dated(sincePhrase(list, draft.asOf ?? context.asOf ?? context.today), (day) => {
    draft.since = day;
  });
  const age = tenurePhrase(list);
  if (age) {
    use(age);
    draft.tenure = age.tenure;
  }
  if (draft.segment === undefined) {
    const loose = segmentPhrase(list, context.segments, column, 'any');
    if (loose) {
      use(loose);
      draft.segment = { ...namedColumn(list, loose.from, column), value: loose.value };
    }
  }
  if (draft.segment !== undefined && column !== undefined) useColumnWords(list, column);
  return draft;
}

/** "where plan is Orchard", "plan = Orchard": the column is kept when it was named so. */
function namedColumn(list: readonly Token[], at: number, column: string | undefined): { column?: string } {
  if (column === undefined) return {};
  const words = tokens(column, []).list.map((token) => token.text);
  if (words.length === 0) return {};
  const before = list.slice(0, at);
  if (['is', 'equals', 'of'].includes(before.at(-1)?.text ?? '')) before.pop();
  const tail = before.slice(-words.length);
  const where = before.at(-words.length - 1)?.text === 'where';
  if (!where || tail.map((token) => token.text).join(' ') !== words.join(' ')) return {};
  for (const token of [...tail, before.at(-words.length - 1)!]) token.used = true;
  return { column };
}

/** The column's own name beside its value ("the Orchard subscription tier") carries nothing more. */
function useColumnWords(list: readonly Token[], column: string): void {
  const words = new Set(tokens(column, []).list.map((token) => token.text));
  for (const [i, token] of list.entries()) {
    const beside = list[i - 1]?.used === true || list[i + 1]?.used === true;
    if (!token.used && words.has(token.text) && beside && !isNoise(token)) token.used = true;
  }
}

function whole(value: number, least: number, most: number): boolean {
  return Number.isInteger(value) && value >= least && value <= most;
}
