import type { WebClient } from '@slack/web-api';
import { z } from 'zod';
import { refusal } from '../posting/webClient.ts';

const share = z.object({ ts: z.string(), thread_ts: z.string().optional() });
const shares = z.record(z.string(), z.array(share)).optional();

const fileSchema = z.object({
  id: z.string(),
  name: z.string().nullish(),
  title: z.string().nullish(),
  mimetype: z.string().nullish(),
  filetype: z.string().nullish(),
  size: z.number().nullish(),
  mode: z.string().nullish(),
  user: z.string().nullish(),
  is_external: z.boolean().nullish(),
  url_private: z.string().nullish(),
  url_private_download: z.string().nullish(),
  shares: z.object({ public: shares, private: shares }).nullish(),
});

export type SharedFile = z.infer<typeof fileSchema>;

/** Codes with which the service says that a file is not to be had. */
const GONE = new Set(['file_not_found', 'file_deleted', 'not_visible', 'access_denied']);

/** What the service knows of a file; undefined when it is gone or hidden. An event may hold only a stub, so it is always asked. */
export async function fileInfo(client: WebClient, fileId: string): Promise<SharedFile | undefined> {
  try {
    const reply = z.object({ file: fileSchema }).parse(await client.apiCall('files.info', { file: fileId }));
    const { file } = reply;
    return file.mode === 'tombstone' || file.mode === 'hidden_by_limit' ? undefined : file;
  } catch (error) {
    if (GONE.has(refusal(error) ?? '')) return undefined;
    throw error;
  }
}

export function fileName(file: SharedFile): string {
  return file.name || file.title || file.id;
}

/** The messages of a channel in which a file stands, oldest first. */
export function sharesIn(
  file: SharedFile,
  channel: string,
): readonly { readonly ts: string; readonly thread_ts?: string | undefined }[] {
  return [...(file.shares?.public?.[channel] ?? []), ...(file.shares?.private?.[channel] ?? [])];
}
