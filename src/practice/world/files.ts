/** Files: what kind they are, sharing and removing them. */
import { postMessage } from './messages.ts';
import type { Message, StoredFile, World } from './world.ts';

/** Told from the first bytes where they speak, from the name otherwise, as the service guesses too. */
export function guessKind(name: string, head: Uint8Array): { mimetype: string; filetype: string } {
  const starts = (...bytes: number[]) => bytes.every((byte, i) => head[i] === byte);
  if (starts(0x89, 0x50, 0x4e, 0x47)) return { mimetype: 'image/png', filetype: 'png' };
  if (starts(0xff, 0xd8, 0xff)) return { mimetype: 'image/jpeg', filetype: 'jpg' };
  if (starts(0x47, 0x49, 0x46, 0x38)) return { mimetype: 'image/gif', filetype: 'gif' };
  const ending = /\.([a-z0-9]+)$/i.exec(name)?.[1]?.toLowerCase() ?? '';
  const known: Record<string, string> = {
    csv: 'text/csv',
    tsv: 'text/tab-separated-values',
    txt: 'text/plain',
    json: 'application/json',
    pdf: 'application/pdf',
    zip: 'application/zip',
    gz: 'application/gzip',
    svg: 'image/svg+xml',
    webp: 'image/webp',
    xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
    parquet: 'application/octet-stream',
  };
  return {
    mimetype: known[ending] ?? 'application/octet-stream',
    filetype: ending === 'txt' ? 'text' : ending || 'binary',
  };
}

export function isShowableImage(file: StoredFile): boolean {
  return !file.deleted && ['image/png', 'image/jpeg', 'image/gif'].includes(file.mimetype);
}

export function addFile(
  world: World,
  file: {
    id?: string;
    team: string;
    user: string;
    name: string;
    title?: string | undefined;
    altText?: string | undefined;
    size: number;
    head: Uint8Array;
    content: StoredFile['content'];
    pollsLeft: number;
  },
): StoredFile {
  const stored: StoredFile = {
    id: file.id ?? world.newId('F'),
    team: file.team,
    user: file.user,
    name: file.name,
    title: file.title ?? file.name,
    altText: file.altText,
    size: file.size,
    ...guessKind(file.name, file.head),
    createdMs: world.now(),
    content: file.content,
    pollsLeft: file.pollsLeft,
    deleted: false,
    shares: [],
  };
  world.files.set(stored.id, stored);
  return stored;
}

/** Posts one message that holds the files, and says of each file that it was shared. */
export function shareFiles(
  world: World,
  files: readonly StoredFile[],
  draft: { channel: string; user: string; botId?: string | undefined; text: string; threadTs?: string | undefined } & {
    blocks?: Parameters<typeof postMessage>[1]['blocks'];
  },
): Message {
  const message = postMessage(world, { ...draft, subtype: 'file_share', fileIds: files.map((f) => f.id) });
  const channel = world.channels.get(draft.channel);
  for (const file of files) {
    file.shares.push({ channel: draft.channel, ts: message.ts, threadTs: message.threadTs });
    if (channel) world.publish({ kind: 'shared', file, channel, user: draft.user, ts: message.ts });
  }
  return message;
}

export function removeFile(world: World, file: StoredFile): void {
  file.deleted = true;
  world.publish({ kind: 'file-deleted', file });
}
