import type { AccountTable } from '../accounts/types.ts';
import { drawPicture } from '../picture/picture.ts';
import type { Question } from '../requests/types.ts';
import { chooseWay } from './ask/chooseWay.ts';
import { resolvePlan, resolveScope } from './ask/scope.ts';
import type { AskContext, Reached } from './ask/types.ts';
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
  return finished(table, await way(context), options, begun);
}

/** Draws the picture and adds up the times. */
async function finished(
  table: AccountTable,
  reached: Reached,
  { picture, clock, readMs }: AnswerOptions,
  begun: number,
): Promise<Answer> {
  const { verdict, chart, dates, signals, trust, judgement, census, plan, drawn, countedAt } = reached;
  const charted = clock();
  const draw = reached.draw ?? (() => drawPicture({ ...drawn, chart, dates, signals, verdict }));
  const drawing = picture ? await draw() : null;
  const done = clock();
  return {
    verdict,
    chart,
    dates,
    signals,
    trust,
    judgement,
    report: table.report,
    census,
    plan,
    tenure: plan.tenure,
    picture: drawing,
    timing: {
      readMs,
      censusMs: countedAt - begun,
      chartMs: charted - countedAt,
      pictureMs: done - charted,
      totalMs: readMs + done - begun,
    },
  };
}
