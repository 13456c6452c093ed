import { EbbError } from '../../errors.ts';
import { putIntoWords } from '../../requests/putIntoWords.ts';
import type { Question } from '../../requests/types.ts';
import { understand } from '../../requests/understand.ts';
import type { Dataset } from '../../store/types.ts';
import { errorMessage } from '../messages/errorMessage.ts';
import { helpMessage, noDataMessage } from '../messages/plainMessages.ts';
import { readMessage } from '../messages/readMessage.ts';
import type { UnderstoodWords } from '../messages/verdictMessage.ts';
import type { Poster } from '../posting/poster.ts';
import { postVerdict } from '../posting/postVerdict.ts';
import { datasetFor, type Job, requestContext } from './context.ts';

/** Answers a question asked in words, in the thread of the poster's place. Empty words get help. */
export async function answerAsk(job: Job, poster: Poster, text: string): Promise<void> {
  const { deps, workspace } = job;
  const dataset = await datasetFor(workspace, poster.place);
  if (text === '') {
    await poster.post('help', helpMessage());
    return;
  }
  const words = understand(text, requestContext(deps.now(), dataset));
  switch (words.request.kind) {
    case 'help':
      await poster.post('help', helpMessage(words));
      return;
    case 'data':
      await poster.post(
        'data',
        dataset ? readMessage(dataset.report, dataset.name, { dataset: dataset.id }) : noDataMessage(deps.practice),
      );
      return;
    case 'ask':
      if (!dataset) await poster.post('no-data', noDataMessage(deps.practice));
      else await answerQuestion(job, poster, dataset, words.request, words);
  }
}

/** @param words null when nobody asked in words */
export async function answerQuestion(
  job: Job,
  poster: Poster,
  dataset: Dataset,
  question: Question,
  words: UnderstoodWords | null,
): Promise<void> {
  const { deps, client, rule, workspace, log } = job;
  if ((await poster.posted('verdict')) !== undefined) return;
  try {
    const answer = await deps.answers.askDataset(workspace, dataset, question);
    await postVerdict({ client, rule, poster, log }, answer, words, putIntoWords(question));
  } catch (error) {
    if (!(error instanceof EbbError)) throw error;
    await poster.post('error', errorMessage(error));
  }
}
