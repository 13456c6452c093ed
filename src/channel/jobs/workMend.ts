import type { ColumnMap, ColumnRole } from '../../accounts/types.ts';
import { dayFromIso } from '../../days.ts';
import type { ReadChoices, Upload } from '../../store/types.ts';
import { fileInfo } from '../download/fileInfo.ts';
import type { Payload } from '../inbox.ts';
import { dateOrderChosen } from '../messages/dateOrderMessage.ts';
import { cannotReadMessage } from '../messages/plainMessages.ts';
import { type Job, posterFor } from './context.ts';
import { readUpload } from './readUpload.ts';

/** Somebody corrected how a file is to be read: fetches it again, reads it so, and answers anew. */
export async function workMend(job: Job, payload: Payload<'mend'>): Promise<void> {
  const { workspace } = job;
  const upload = await uploadFor(job, payload);
  if (!upload) {
    await posterFor(job, payload).post('read', cannotReadMessage('The file', 'gone'));
    return;
  }
  const columns: Partial<Record<ColumnRole, string>> = {};
  for (const [role, at] of Object.entries(payload.columns) as [ColumnRole, number | undefined][]) {
    const header = at === undefined ? undefined : upload.headers[at];
    if (header !== undefined) columns[role] = header;
  }
  const { target } = payload;
  const shown = target.dataset === undefined ? undefined : await workspace.dataset(target.dataset);
  const latest = upload.datasetId ? await workspace.dataset(upload.datasetId) : undefined;
  const inferred = (shown ?? latest)?.report.asOf;
  const chosenDay = payload.asOf === null ? undefined : dayFromIso(payload.asOf);
  // A day left as it was inferred stays inferred.
  const asOf = (shown ?? upload).choices.asOf === undefined && chosenDay === inferred ? undefined : chosenDay;
  await readAgain(job, upload, payload, {
    columns: columns satisfies ColumnMap,
    ...(payload.dates === null ? {} : { dates: payload.dates }),
    ...(asOf === undefined ? {} : { asOf }),
  });
}

/** Somebody said how the dates read. */
export async function workDateOrder(job: Job, payload: Payload<'date-order'>): Promise<void> {
  const { client, workspace } = job;
  const upload = await workspace.upload(payload.upload);
  if (!upload) return;
  if (payload.order === null) {
    await client.chat.postEphemeral({
      channel: payload.channel,
      user: payload.user,
      thread_ts: payload.threadTs,
      text: 'Choose first how the dates read, then press the button.',
    });
    return;
  }
  const poster = posterFor(job, payload);
  await poster.remember('question', payload.messageTs);
  await poster.replace('chosen', 'question', dateOrderChosen(payload.order, upload.fileName, payload.user));
  await readAgain(job, upload, payload, { ...upload.choices, dates: payload.order });
}

async function readAgain(
  job: Job,
  upload: Upload,
  place: { readonly channel: string; readonly threadTs: string },
  choices: ReadChoices,
): Promise<void> {
  const { client, workspace } = job;
  const poster = posterFor(job, place);
  const file = await fileInfo(client, upload.fileId);
  if (!file) {
    await poster.post('read', cannotReadMessage(upload.fileName, 'gone'));
    return;
  }
  const changed = await workspace.updateUpload(upload.id, { choices });
  await readUpload(job, poster, changed, file, '', 'Read again');
}

/** The upload a mend is about; a dataset whose upload is not at hand gets one of its own, in the thread of the mend. */
async function uploadFor(job: Job, payload: Payload<'mend'>): Promise<Upload | undefined> {
  const { workspace } = job;
  if ('upload' in payload.target) return workspace.upload(payload.target.upload);
  const dataset = await workspace.dataset(payload.target.dataset);
  if (!dataset?.fileId) return undefined;
  const inThread = await workspace.uploadInThread(payload.channel, payload.threadTs);
  if (inThread?.fileId === dataset.fileId) return inThread;
  return workspace.saveUpload({
    channelId: payload.channel,
    fileId: dataset.fileId,
    fileName: dataset.name,
    uploadedBy: payload.user,
    threadTs: payload.threadTs,
    state: 'read',
    choices: dataset.choices,
    datasetId: dataset.id,
    headers: dataset.report.headers,
  });
}
