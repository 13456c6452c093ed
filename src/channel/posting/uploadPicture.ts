import { setTimeout as pause } from 'node:timers/promises';
import type { WebClient } from '@slack/web-api';
import { z } from 'zod';
import type { Picture } from '../../picture/picture.ts';
import { type HostRule, isAllowed } from '../download/hosts.ts';
import { plainLine, shortened } from '../messages/text.ts';
import type { Place } from './poster.ts';

const urlReply = z.object({ upload_url: z.string(), file_id: z.string() });
const infoReply = z.object({ file: z.object({ mimetype: z.string().optional() }) });

/** Waits between looks at a file that the service is still processing; together about eight seconds. */
export const PROCESSING_WAITS_MS = [0, 30, 60, 120, 250, 500, 1000, 2000, 4000] as const;
const UPLOAD_TIMEOUT_MS = 30_000;
/** files.getUploadURLExternal takes at most so much; source: its page on docs.slack.dev. */
const ALT_LENGTH = 1000;

export interface PictureFile {
  readonly name: string;
  readonly title: string;
}

/**
 * Uploads a picture in the three steps and waits until it may be shown.
 * The client's own upload call loses the alternative text, hence by hand.
 * @param share where to share it; null keeps it for a block of a message
 * @returns the file's id, as soon as the service knows that it is a picture, or when it has been given its time
 */
export async function uploadPicture(
  client: WebClient,
  rule: HostRule,
  picture: Pick<Picture, 'png' | 'altText'>,
  file: PictureFile,
  share: Place | null,
): Promise<string> {
  const asked = await client.apiCall('files.getUploadURLExternal', {
    filename: file.name,
    length: picture.png.byteLength,
    alt_txt: shortened(plainLine(picture.altText), ALT_LENGTH),
  });
  const { upload_url, file_id } = urlReply.parse(asked);
  const url = new URL(upload_url);
  if (!isAllowed(url, rule)) throw new Error(`the upload address lies on ${url.host}, where pictures are not sent`);
  const sent = await fetch(url, {
    method: 'POST',
    headers: { 'content-type': 'application/octet-stream' },
    body: Buffer.from(picture.png),
    redirect: 'error',
    signal: AbortSignal.timeout(UPLOAD_TIMEOUT_MS),
  });
  await sent.arrayBuffer();
  if (!sent.ok) throw new Error(`the upload was answered with ${sent.status}`);
  await client.apiCall('files.completeUploadExternal', {
    files: JSON.stringify([{ id: file_id, title: file.title }]),
    ...(share === null
      ? {}
      : { channel_id: share.channel, ...(share.threadTs === null ? {} : { thread_ts: share.threadTs }) }),
  });
  await processed(client, file_id);
  return file_id;
}

/** Right after the upload the service does not know yet what the file is, and refuses to show it. */
async function processed(client: WebClient, fileId: string): Promise<void> {
  for (const wait of PROCESSING_WAITS_MS) {
    if (wait > 0) await pause(wait);
    const info = infoReply.safeParse(await client.apiCall('files.info', { file: fileId }));
    if (info.success && (info.data.file.mimetype ?? '').startsWith('image/')) return;
  }
}
