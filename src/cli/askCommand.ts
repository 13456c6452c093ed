import { stat } from 'node:fs/promises';
import { basename } from 'node:path';
import { openEngine } from '../accounts/engine.ts';
import { readExport } from '../accounts/readExport.ts';
import type { ReadReport } from '../accounts/types.ts';
import { EbbError } from '../errors.ts';
import { isAnswerable } from '../requests/answerable.ts';
import type { Question, Request, SideQuestion, Understanding } from '../requests/types.ts';
import { notUsedLines, understoodLines } from '../requests/understoodLines.ts';
import { readText } from '../verdict/words/readText.ts';
import { answerText } from './answerText.ts';
import type { CliOptions, FileCommand } from './arguments.ts';
import { contractJson, pointsCsv } from './contractJson.ts';
import { HELP } from './help.ts';
import { progressBar } from './progressBar.ts';
import type { CliSurroundings } from './types.ts';
import { writeOutput } from './writeOutput.ts';

/** ebb ask FILE [words], ebb where FILE [words] and so on: reads the export, answers, writes what was asked for. */
export async function askCommand(command: FileCommand, options: CliOptions, around: CliSurroundings): Promise<void> {
  const [file, ...words] = options.words;
  if (file === undefined)
    throw new EbbError(
      'FILE_MISSING',
      'no file was named',
      `For example: ebb ${command} accounts.csv${EXAMPLE[command] ?? ''}`,
    );
  const begun = around.clock();
  // The drawing parts load while the engine reads: together they take as long as the slower of the two.
  // A failure shows when the picture is drawn.
  const warming =
    options.picture === undefined
      ? undefined
      : import('../picture/picture.ts').then(({ warmPicture }) => warmPicture()).catch(() => undefined);
  const engine = await openEngine();
  try {
    const bar = await progressBar(around, file);
    const reading = readExport(engine, file, {
      ...(options.columns ? { columns: options.columns } : {}),
      ...(options.dates ? { dates: options.dates } : {}),
      ...(options.asOf === undefined ? {} : { asOf: options.asOf }),
      ...(bar ? { onProgress: bar.update } : {}),
    }).finally(() => bar?.stop());
    const answering = loadAnswering(file);
    const table = await reading;
    const readMs = around.clock() - begun;
    const asked = command === 'ask' ? words : [command, ...words];
    const understanding = asked.length > 0 ? await understandWords(asked.join(' '), table.report) : null;
    const request: Request = understanding?.request ?? { kind: 'ask' };
    const name = basename(file);
    const lacking = understanding?.notUnderstood[0];
    if (request.kind === 'help' && command !== 'ask' && lacking)
      throw new EbbError('OPTION_INVALID', `${command} needs a figure`, lacking.nearest);
    if (!isAnswerable(request) && request.kind !== 'help' && request.kind !== 'data')
      throw new EbbError(
        'OPTION_INVALID',
        `"${asked.join(' ')}" is about the posts a channel gets by itself`,
        'Say it in the channel; on the command line, ask has churn moved.',
      );
    if (!isAnswerable(request)) {
      const { understood, notUnderstood } = understanding!;
      const read = request.kind === 'data' ? readText(table.report, name) : null;
      if (options.json) around.stdout(`${JSON.stringify({ understood, notUnderstood, read })}\n`);
      else around.stdout(read ? `${read.join('\n')}\n` : [...notUsedLines(notUnderstood), HELP].join('\n'));
      return;
    }
    const { answerQuestion, sideCommand } = await answering;
    const how = { subject: name, picture: options.picture !== undefined, clock: around.clock, readMs };
    if (request.kind !== 'ask') {
      await sideCommand(table, withOptions(request, options), understanding!, how, options, around);
      return;
    }
    const answer = await answerQuestion(table, withOptions(request, options), how);
    if (options.picture !== undefined) await writeOutput('--picture', options.picture, answer.picture!.png);
    if (options.points !== undefined) await writeOutput('--points', options.points, pointsCsv(answer));
    if (options.json)
      around.stdout(
        `${JSON.stringify({ ...contractJson(answer), understood: understanding?.understood ?? null, notUnderstood: understanding?.notUnderstood ?? [] })}\n`,
      );
    else around.stdout(answerText(answer, name, understanding ? understoodLines(understanding) : []));
  } finally {
    // What is still loading would complain that its files are gone.
    await warming;
    await engine.close(around.leaving);
  }
}

/** Loads what answers, beside the reading; for a long read it is also set going. A failure shows when it is used. */
async function loadAnswering(file: string): Promise<typeof import('./answering.ts')> {
  const answering = await import('./answering.ts');
  const { size } = await stat(file).catch(() => ({ size: 0 }));
  if (size >= answering.LONG_READ_BYTES) answering.warmJudge();
  return answering;
}

const EXAMPLE: Partial<Record<FileCommand, string>> = {
  ask: ' has churn moved',
  reconcile: ' 14.2%',
  target: ' 5%',
};

/** Options win over words: they are exact. */
function withOptions<Q extends Question | SideQuestion>(question: Q, options: CliOptions): Q {
  return {
    ...question,
    ...(options.tenure ? { tenure: options.tenure } : {}),
    ...(options.subgroupSize === undefined ? {} : { subgroupSize: options.subgroupSize }),
    ...(options.baseline === undefined ? {} : { baseline: options.baseline }),
    ...(options.segment ? { segment: options.segment } : {}),
    ...(options.chart && options.chart !== 'auto' ? { chart: options.chart } : {}),
    ...(options.by && options.by !== 'start' ? { view: options.by } : {}),
    ...(options.tests ? { tests: options.tests } : {}),
    ...(options.asOf === undefined ? {} : { asOf: options.asOf }),
  };
}

async function understandWords(text: string, report: ReadReport): Promise<Understanding> {
  const { understand } = await import('../requests/understand.ts');
  return understand(text, {
    today: report.asOf,
    asOf: report.asOf,
    segments: report.segments.map((entry) => entry.value),
    ...(report.columns.segment === undefined ? {} : { segmentColumn: report.columns.segment }),
  });
}
