import type { AccountTable } from '../accounts/types.ts';
import type { Question } from '../requests/types.ts';
import { chooseWay } from './ask/chooseWay.ts';
import { resolvePlan, resolveScope } from './ask/scope.ts';
import type { AskContext } from './ask/types.ts';
import { finishAnswer } from './finishAnswer.ts';
import type { Answer } from './types.ts';

export interface AnswerOptions {
  /** what the picture calls the data: the export's name */
  readonly subject: string;
  readonly picture: boolean;
  /** a clock in milliseconds, for the timing figures only */
  readonly clock: () => number;
  /** time already spent on reading */
  readonly readMs: number;
}

/**
 * Answers "has churn moved?" from accounts ready to be counted.
 * @throws EbbError SEGMENT_UNKNOWN, OPTION_INVALID when the question asks for what the data does not have
 */
export async function answerQuestion(table: AccountTable, question: Question, options: AnswerOptions): Promise<Answer> {
  const begun = options.clock();
  const scope = resolveScope(table, question);
  const context: AskContext = {
    table,
    question,
    scope,
    subject: options.subject,
    resolved: await resolvePlan(table, question, scope),
    clock: options.clock,
  };
  const way = await chooseWay(context);
  const { picture, clock, readMs } = options;
  return finishAnswer(await way(context), { picture, clock, begun, readMs, report: table.report });
}
