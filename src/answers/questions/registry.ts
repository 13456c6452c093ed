import type { SideKind, SideQuestion } from '../../requests/types.ts';
import type { AnswerSide, Reply, SideContext } from './types.ts';

type Loaders = { readonly [K in SideKind]: () => Promise<AnswerSide<K>> };

/** Every question by its kind, loaded when first asked: a verdict need not wait for the code of all the others. */
const QUESTIONS: Loaders = {
  explain: async () => (await import('./explain.ts')).answerExplain,
  spread: async () => (await import('./spread.ts')).answerSpread,
  reconcile: async () => (await import('./reconcile.ts')).answerReconcile,
  revenue: async () => (await import('./revenue.ts')).answerRevenue,
  target: async () => (await import('./target.ts')).answerTarget,
  early: async () => (await import('./early.ts')).answerEarly,
  where: async () => (await import('./where.ts')).answerWhere,
  worth: async () => (await import('./worth.ts')).answerWorth,
  plan: async () => (await import('./plan.ts')).answerPlan,
};

/** Answers a question around the verdict. */
export async function answerByKind(context: SideContext, request: SideQuestion): Promise<Reply> {
  // The kind finds the function that takes requests of this kind; types cannot follow that through the table.
  const load = QUESTIONS[request.kind] as () => Promise<
    (context: SideContext, request: SideQuestion) => Promise<Reply>
  >;
  return (await load())(context, request);
}
