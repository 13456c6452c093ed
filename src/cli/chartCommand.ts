import { answerCounts } from '../answers/answerCounts.ts';
import { EbbError } from '../errors.ts';
import { answerText } from './answerText.ts';
import type { CliOptions } from './arguments.ts';
import { contractJson, pointsCsv } from './contractJson.ts';
import { readyCounts } from './readyCounts.ts';
import type { CliSurroundings } from './types.ts';
import { writeOutput } from './writeOutput.ts';

/** ebb chart --counts … --sizes …: charts ready counts. */
export async function chartCommand(options: CliOptions, around: CliSurroundings): Promise<void> {
  const counts = readyCounts(options.counts, options.sizes);
  if (counts.length === 0)
    throw new EbbError('COUNTS_INVALID', '--counts is empty', 'For example: ebb chart --counts "12,15,8" --sizes 50');
  const answer = await answerCounts({
    counts,
    ...(options.baseline === undefined ? {} : { baseline: options.baseline }),
    // Ready counts come from a table or a spreadsheet whose owner expects the plain chart; auto chooses.
    ...(options.chart === 'auto' ? {} : { chart: options.chart ?? 'p' }),
    ...(options.tests ? { tests: options.tests } : {}),
    picture: options.picture !== undefined,
    clock: around.clock,
  });
  if (options.picture !== undefined) await writeOutput('--picture', options.picture, answer.picture!.png);
  if (options.points !== undefined) await writeOutput('--points', options.points, pointsCsv(answer));
  around.stdout(options.json ? `${JSON.stringify(contractJson(answer))}\n` : answerText(answer, 'ready counts'));
}
