import type { AccountTable } from '../../accounts/types.ts';
import { takeCensus } from '../../census/census.ts';
import type { Scope, SideQuestion } from '../../requests/types.ts';
import type { AnswerOptions } from '../answerQuestion.ts';
import { answerQuestion } from '../answerQuestion.ts';
import { resolvePlan, resolveScope } from '../ask/scope.ts';
import { answerByKind } from './registry.ts';
import type { Reply, SideContext } from './types.ts';

export interface TimedReply {
  readonly reply: Reply;
  /** last day the data is complete for, as the question took it */
  readonly asOf: number;
  readonly timing: { readonly readMs: number; readonly answerMs: number; readonly totalMs: number };
}

/**
 * Answers one of the questions around the verdict from accounts ready to be counted.
 * @throws EbbError SEGMENT_UNKNOWN, OPTION_INVALID when the question asks for what the data does not have
 */
export async function answerSide(
  table: AccountTable,
  request: SideQuestion,
  options: AnswerOptions,
): Promise<TimedReply> {
  const { clock, readMs } = options;
  const begun = clock();
  const scope = resolveScope(table, request);
  const asked: Scope = request;
  const resolved = once(() => resolvePlan(table, asked, scope));
  const plan = once(async () => (await resolved()).plan);
  const context: SideContext = {
    table,
    subject: scope.segment === undefined ? options.subject : `${options.subject}, ${scope.segment}`,
    scope,
    picture: options.picture,
    plan,
    census: once(async () => {
      const { tenure, subgroupSize } = await plan();
      return takeCensus(table, { tenure, subgroupSize, view: 'start', ...scope });
    }),
    ask: once(() => answerQuestion(table, { ...scopeOf(asked), kind: 'ask' }, { ...options, picture: false })),
  };
  const reply = await answerByKind(context, request);
  const answerMs = clock() - begun;
  return { reply, asOf: scope.asOf, timing: { readMs, answerMs, totalMs: readMs + answerMs } };
}

/** Only what any question may pin down: what belongs to one question alone must not reach another. */
function scopeOf(request: Scope): Scope {
  const { tenure, subgroupSize, baseline, segment, since, asOf, settleDays, chart, view, tests } = request;
  return Object.fromEntries(
    Object.entries({ tenure, subgroupSize, baseline, segment, since, asOf, settleDays, chart, view, tests }).filter(
      ([, value]) => value !== undefined,
    ),
  );
}

function once<T>(make: () => Promise<T>): () => Promise<T> {
  let made: Promise<T> | undefined;
  return () => {
    made ??= make();
    return made;
  };
}
