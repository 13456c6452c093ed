import type { AccountTable } from '../accounts/types.ts';
import type { AnswerOptions } from '../answers/answerQuestion.ts';
import { answerSide } from '../answers/questions/answerSide.ts';
import { isoDay } from '../days.ts';
import { EbbError } from '../errors.ts';
import type { SideQuestion, Understanding } from '../requests/types.ts';
import { understoodLines } from '../requests/understoodLines.ts';
import { readText } from '../verdict/words/readText.ts';
import { wordBlocks } from './answerText.ts';
import type { CliOptions } from './arguments.ts';
import { readJson } from './contractJson.ts';
import type { CliSurroundings } from './types.ts';
import { writeOutput } from './writeOutput.ts';

/** Answers one of the questions around the verdict and writes what was asked for. */
export async function sideCommand(
  table: AccountTable,
  request: SideQuestion,
  understanding: Understanding,
  how: AnswerOptions,
  options: CliOptions,
  around: CliSurroundings,
): Promise<void> {
  if (options.points !== undefined)
    throw new EbbError(
      'OPTION_INVALID',
      `--points goes with ask, not with ${request.kind}`,
      'Leave it out; --json gives every figure of this answer.',
    );
  const { reply, asOf, timing } = await answerSide(table, request, how);
  if (options.picture !== undefined) {
    if (reply.picture) await writeOutput('--picture', options.picture, reply.picture.png);
    else around.stderr(`There is nothing to draw in this answer, so ${options.picture} was not written.\n`);
  }
  if (options.json) {
    const { kind, headline, evidence, cautions, next, figures } = reply;
    const { understood, notUnderstood } = understanding;
    around.stdout(
      `${JSON.stringify({ question: kind, answer: { headline, evidence, cautions, next }, [kind]: figures, data: { ...readJson(table.report), asOf: isoDay(asOf) }, timing, understood, notUnderstood })}\n`,
    );
    return;
  }
  const blocks = [understoodLines(understanding), readText(table.report, how.subject), ...wordBlocks(reply)];
  around.stdout(`${blocks.map((lines) => lines.join('\n')).join('\n\n')}\n`);
}
