import { tenureInWords } from '../../census/tenure.ts';
import type { Scope } from '../../requests/types.ts';
import { capitalised } from '../../verdict/words/format.ts';
import type { ResolvedPlan } from './scope.ts';

/** Why this tenure point, where nobody asked for one: sentences. */
export function tenureChosen(asked: Scope, { plan, tenureOfAll }: ResolvedPlan): string[] {
  if (asked.tenure) return [];
  return [
    tenureOfAll
      ? `Read at ${tenureInWords(tenureOfAll)}, the age taken for all accounts.`
      : `${capitalised(plan.tenureWhy)}.`,
  ];
}

/** Why this tenure point and this size, where nobody asked for them: sentences. */
export function howChosen(asked: Scope, resolved: ResolvedPlan): string[] {
  return [...tenureChosen(asked, resolved), ...(asked.subgroupSize ? [] : [`${capitalised(resolved.plan.sizeWhy)}.`])];
}
