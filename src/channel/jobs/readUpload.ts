import { EbbError } from '../../errors.ts';
import { isAnswerable } from '../../requests/answerable.ts';
import { understand } from '../../requests/understand.ts';
import type { Upload } from '../../store/types.ts';
import { changeText } from '../../verdict/words/changeText.ts';
import { withFetchedFile } from '../download/fetchFile.ts';
import type { SharedFile } from '../download/fileInfo.ts';
import { dateOrderMessage } from '../messages/dateOrderMessage.ts';
import { errorMessage } from '../messages/errorMessage.ts';
import { readingMessage, readMessage } from '../messages/readMessage.ts';
import { shortened } from '../messages/text.ts';
import type { Poster } from '../posting/poster.ts';
import { answerRequest } from './answerAsk.ts';
import { type Job, requestContext } from './context.ts';

/** A file that takes longer than this gets a word beforehand. */
export const READING_AFTER_MS = 900;

/** Errors that another choice of columns or of the data-through date can mend. */
const MENDABLE = new Set([
  'COLUMN_START_MISSING',
  'COLUMN_END_MISSING',
  'COLUMN_UNKNOWN',
  'DATES_UNREADABLE',
  'ACCOUNTS_NONE',
  'AS_OF_TOO_LATE',
]);
const ABOUT_ORDER = new Set(['DATES_AMBIGUOUS', 'DATES_MIXED']);

/**
 * Fetches a file, reads it as its upload says, and posts what was read and the verdict; or the question how its dates read; or the one
 * thing that is wrong with it.
 * @param asked words beside the file; empty asks the plain question without repeating it
 * @param lead  "Read" or "Read again"
 */
export async function readUpload(
  job: Job,
  poster: Poster,
  upload: Upload,
  file: SharedFile,
  asked: string,
  lead: string,
): Promise<void> {
  const { deps } = job;
  const read = await ingested(job, poster, upload, file);
  if (read === undefined) return;
  if (read.kind !== 'read') {
    const { error } = read;
    const about = ABOUT_ORDER.has(error.code)
      ? dateOrderMessage(error, upload.fileName, upload.id)
      : errorMessage(
          error,
          upload.fileName,
          MENDABLE.has(error.code) && read.upload.headers.length > 1 ? { upload: upload.id } : undefined,
        );
    await poster.replace('read', 'reading', about);
    return;
  }
  const { dataset, change } = read;
  await poster.replace(
    'read',
    'reading',
    readMessage(
      dataset.report,
      dataset.name,
      { upload: upload.id, dataset: dataset.id },
      lead,
      change ? changeText(change.change, shortened(change.name, 80)) : [],
    ),
  );
  const words = asked === '' ? null : understand(asked, requestContext(deps.now(), dataset));
  const request = words?.request;
  // Beside a file, "help" or words without a question still get the plain answer.
  const answered = request && isAnswerable(request) ? request : null;
  await answerRequest(job, poster, dataset, answered ?? { kind: 'ask' }, answered ? words : null);
}

async function ingested(job: Job, poster: Poster, upload: Upload, file: SharedFile) {
  const { deps, workspace } = job;
  let early: Promise<unknown> | undefined;
  const note = setTimeout(() => {
    // Only a courtesy: when it fails, the answer still comes.
    early = poster.post('reading', readingMessage(upload.fileName)).catch(() => undefined);
  }, READING_AFTER_MS);
  try {
    return await withFetchedFile(
      file,
      { token: deps.slack.botToken, rule: job.rule, maxBytes: deps.maxUploadBytes },
      (path) => deps.answers.ingest(workspace, upload, path, { ...upload.choices, maxBytes: deps.maxUploadBytes }),
    );
  } catch (error) {
    if (!(error instanceof EbbError) || error.detail['mayPass'] === true) throw error;
    clearTimeout(note);
    await early;
    await workspace.updateUpload(upload.id, { state: 'refused' });
    await poster.replace('read', 'reading', errorMessage(error));
    return undefined;
  } finally {
    clearTimeout(note);
    await early;
  }
}
