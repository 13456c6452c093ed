import { setTimeout as pause } from 'node:timers/promises';
import { fileInfo, fileName, sharesIn } from '../download/fileInfo.ts';
import { worthReading } from '../download/worthReading.ts';
import { entry, type Payload } from '../inbox.ts';
import { cannotReadMessage } from '../messages/plainMessages.ts';
import { answerAsk } from './answerAsk.ts';
import { type Job, posterFor } from './context.ts';
import { readUpload } from './readUpload.ts';

/** A file in a channel: reads it and answers, or leaves it alone when it obviously is something else. */
export async function workFile(job: Job, payload: Payload<'file'>): Promise<void> {
  const { client, workspace } = job;
  const poster = posterFor(job, payload);
  const file = await fileInfo(client, payload.fileId);
  const problem = !file
    ? 'gone'
    : file.mode === 'external' || file.is_external === true
      ? 'elsewhere'
      : worthReading(file)
        ? undefined
        : 'kind';
  if (problem !== undefined || !file) {
    if (!payload.mentioned) return;
    await poster.post('cannot-read', cannotReadMessage(file ? fileName(file) : 'The file', problem ?? 'gone'));
    if (payload.question !== '' && payload.alone) await answerAsk(job, poster, payload.question, payload.user);
    return;
  }
  const known = await workspace.uploadInThread(payload.channel, payload.threadTs);
  const upload =
    known?.fileId === payload.fileId
      ? known
      : await workspace.saveUpload({
          channelId: payload.channel,
          fileId: payload.fileId,
          fileName: fileName(file),
          uploadedBy: payload.user,
          threadTs: payload.threadTs,
          state: 'received',
          choices: {},
          datasetId: null,
          headers: [],
        });
  await readUpload(job, poster, upload, file, payload.question, 'Read');
}

/** Right after an upload the service does not say yet where the file stands. */
const SHARE_WAITS_MS = [250, 500, 1000, 2000, 4000] as const;

/**
 * A file was shared, and the event does not say in which message. When the message's own event came too, both name the same file in
 * the same message, and the inbox keeps only the first.
 */
export async function workFileShared(job: Job, payload: Payload<'file-shared'>): Promise<void> {
  const { client, deps, teamId, jobKey } = job;
  let file = await fileInfo(client, payload.fileId);
  for (const wait of SHARE_WAITS_MS) {
    if (!file || sharesIn(file, payload.channel).length > 0) break;
    await pause(wait);
    file = await fileInfo(client, payload.fileId);
  }
  if (!file) return;
  for (const share of sharesIn(file, payload.channel)) {
    const keys = { event: `${jobKey}#${share.ts}`, about: [payload.channel, payload.fileId, share.ts] };
    await deps.store.receive(
      entry('file', teamId, keys, {
        channel: payload.channel,
        threadTs: share.thread_ts ?? share.ts,
        user: file.user ?? 'unknown',
        fileId: payload.fileId,
        mentioned: false,
        question: '',
        alone: true,
      }),
    );
  }
}
