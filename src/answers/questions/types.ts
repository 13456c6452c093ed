import type { AccountTable } from '../../accounts/types.ts';
import type { Census, CensusPlan } from '../../census/types.ts';
import type { Picture } from '../../picture/picture.ts';
import type { SideKind, SideQuestionOf } from '../../requests/types.ts';
import type { ResolvedScope } from '../ask/scope.ts';
import type { Answer } from '../types.ts';

/** The answer to one of the questions around the verdict, finished: what the channel posts and the command line prints. */
export interface Reply {
  readonly kind: SideKind;
  readonly headline: string;
  readonly evidence: readonly string[];
  /** the last one is about what the figure may be used for */
  readonly cautions: readonly string[];
  readonly next: readonly string[];
  /** the question's own part of the JSON: rates as fractions, days as ISO dates, null where there is no figure */
  readonly figures: Readonly<Record<string, unknown>>;
  readonly picture: Picture | null;
}

/** What a question is answered from. The functions compute at most once. */
export interface SideContext {
  readonly table: AccountTable;
  /** what a picture calls the data, the group that was named included */
  readonly subject: string;
  readonly scope: ResolvedScope;
  /** whether a picture is wanted */
  readonly picture: boolean;
  /** the tenure point and the subgroup size that "has it moved?" would use */
  readonly plan: () => Promise<CensusPlan>;
  /** the census that "has it moved?" would use, in order of start */
  readonly census: () => Promise<Census>;
  /** the answer to "has it moved?" for the same scope, without its picture */
  readonly ask: () => Promise<Answer>;
}

/** Answers one kind of question. Bad data gives a sentence, never an exception; EbbError only for what the asker must mend. */
export type AnswerSide<K extends SideKind> = (context: SideContext, request: SideQuestionOf<K>) => Promise<Reply>;
