import { EbbError } from '../../errors.ts';
import { putIntoWords } from '../../requests/putIntoWords.ts';
import type { Question, SideQuestion, SideQuestionOf } from '../../requests/types.ts';
import { understand } from '../../requests/understand.ts';
import type { Dataset } from '../../store/types.ts';
import { errorMessage } from '../messages/errorMessage.ts';
import { helpMessage, noDataMessage } from '../messages/plainMessages.ts';
import { readMessage } from '../messages/readMessage.ts';
import { saidBy, type UnderstoodWords } from '../messages/verdictMessage.ts';
import type { Poster } from '../posting/poster.ts';
import { postVerdict } from '../posting/postVerdict.ts';
import { datasetFor, type Job, requestContext } from './context.ts';
import { workWeeklyRequest } from './weeklyRequests.ts';

/**
 * Answers a question asked in words, in the thread of the poster's place. Empty words get help.
 * @param user who asks; their time zone is taken for a weekly post
 */
export async function answerAsk(job: Job, poster: Poster, text: string, user: string): Promise<void> {
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
    case 'weekly-set':
    case 'weekly-show':
    case 'weekly-stop':
      return workWeeklyRequest(job, poster, words.request, words.notUnderstood, user);
    default:
      if (!dataset) await poster.post('no-data', noDataMessage(deps.practice));
      else await answerRequest(job, poster, dataset, words.request, words);
  }
}

/**
 * Answers a question about one dataset.
 * @param words null when nobody asked in words
 */
export async function answerRequest(
  job: Job,
  poster: Poster,
  dataset: Dataset,
  asked: Question | SideQuestion,
  words: UnderstoodWords | null,
): Promise<void> {
  const { deps, client, rule, workspace, log } = job;
  if ((await poster.posted('verdict')) !== undefined) return;
  try {
    const request = asked.kind === 'explain' ? await aboutTheLast(job, poster, dataset, asked) : asked;
    const answer =
      request.kind === 'ask'
        ? await deps.answers.askDataset(workspace, dataset, request)
        : await deps.answers.askSide(workspace, dataset, request);
    const shown = words && request !== asked ? { ...words, understood: putIntoWords(request) } : words;
    await postVerdict({ client, rule, poster, log }, saidBy(answer), shown, putIntoWords(request));
    if (request.kind === 'ask')
      await workspace.rememberQuestion(poster.place.channel, poster.place.threadTs, putIntoWords(request));
  } catch (error) {
    if (!(error instanceof EbbError)) throw error;
    await poster.post('error', errorMessage(error));
  }
}

/** A bare "explain" is about the last verdict given here: in this thread, else in the channel. */
async function aboutTheLast(
  { deps, workspace }: Job,
  { place }: Poster,
  dataset: Dataset,
  asked: SideQuestionOf<'explain'>,
): Promise<SideQuestionOf<'explain'>> {
  if (Object.keys(asked).length > 1) return asked;
  const last = await workspace.lastQuestion(place.channel, place.threadTs);
  const { request } = understand(last ?? '', requestContext(deps.now(), dataset));
  return request.kind === 'ask' ? { ...request, kind: 'explain' } : asked;
}
