import type { Question, Request, SideQuestion } from './types.ts';

const OTHER: ReadonlySet<Request['kind']> = new Set(['help', 'data', 'weekly-set', 'weekly-show', 'weekly-stop']);

/** True for what is answered from accounts, on the command line as in the channel. */
export function isAnswerable(request: Request): request is Question | SideQuestion {
  return !OTHER.has(request.kind);
}
