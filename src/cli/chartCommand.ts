import { answerCounts } from '../answers/answerCounts.ts';
import { answerValues } from '../answers/answerValues.ts';
import type { Answer } from '../answers/types.ts';
import { EbbError } from '../errors.ts';
import { answerText } from './answerText.ts';
import type { CliOptions } from './arguments.ts';
import { contractJson, pointsCsv } from './contractJson.ts';
import { readyCounts } from './readyCounts.ts';
import { isValuesKind, readyValues } from './readyValues.ts';
import type { CliSurroundings } from './types.ts';
import { writeOutput } from './writeOutput.ts';

/** More than this is no longer a list that somebody pasted. */
const MOST_VALUES = 2_000;

/** ebb chart --counts … --sizes …: charts ready counts; with --values, ready values. */
export async function chartCommand(options: CliOptions, around: CliSurroundings): Promise<void> {
  if (options.values !== undefined) return valuesCommand(options.values, options, around);
  if (isValuesKind(options.chart))
    throw new EbbError(
      'OPTION_INVALID',
      `a chart of the kind ${options.chart} is drawn from ready values, not from counts`,
      `Give them with --values, for example: ebb chart --chart ${options.chart} --values "4,12,30,7"`,
    );
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
  await write(answer, 'ready counts', options, around);
}

/** ebb chart --chart g|t|individuals --values …: charts ready values. */
async function valuesCommand(text: string, options: CliOptions, around: CliSurroundings): Promise<void> {
  const { chart, counts, sizes, baseline, tests } = options;
  if (counts !== undefined || sizes !== undefined)
    throw new EbbError(
      'OPTION_INVALID',
      '--values goes with neither --counts nor --sizes',
      'Leave one or the other out.',
    );
  if (!isValuesKind(chart))
    throw new EbbError(
      'OPTION_INVALID',
      '--values needs to know what the values are',
      'Say --chart g (accounts kept between losses), --chart t (days between losses) or --chart individuals (any values).',
    );
  const values = readyValues(text, chart, MOST_VALUES);
  const answer = await answerValues({
    kind: chart,
    values,
    ...(baseline === undefined ? {} : { baseline }),
    ...(tests ? { tests } : {}),
    picture: options.picture !== undefined,
    clock: around.clock,
  });
  await write(answer, 'ready values', options, around);
}

async function write(answer: Answer, name: string, options: CliOptions, around: CliSurroundings): Promise<void> {
  if (options.picture !== undefined) await writeOutput('--picture', options.picture, answer.picture!.png);
  if (options.points !== undefined) await writeOutput('--points', options.points, pointsCsv(answer));
  around.stdout(options.json ? `${JSON.stringify(contractJson(answer))}\n` : answerText(answer, name));
}
