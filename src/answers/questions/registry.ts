import { EbbError } from '../../errors.ts';
import type { SideKind, SideQuestion } from '../../requests/types.ts';
import type { AnswerSide, Reply, SideContext } from './types.ts';

type Loaders = { readonly [K in SideKind]?: () => Promise<AnswerSide<K>> };

/** Every question by its kind, loaded when first asked: a verdict need not wait for the code of all the others. */
const QUESTIONS: Loaders = {};

/** Answers a question around the verdict. */
export async function answerByKind(context: SideContext, request: SideQuestion): Promise<Reply> {
  const load = QUESTIONS[request.kind] as
    | (() => Promise<(context: SideContext, request: SideQuestion) => Promise<Reply>>)
    | undefined;
  if (!load)
    throw new EbbError('OPTION_INVALID', `"${request.kind}" cannot be answered yet`, 'Ask “has churn moved?”.');
  return (await load())(context, request);
}
