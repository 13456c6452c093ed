import type { App } from '@slack/bolt';
import { z } from 'zod';
import type { InboxEntry } from '../../store/types.ts';
import { entry } from '../inbox.ts';
import { plainWords } from '../plainWords.ts';
import type { ChannelDeps } from '../types.ts';

const postSchema = z.object({
  channel: z.string(),
  ts: z.string(),
  thread_ts: z.string().optional(),
  user: z.string().optional(),
  text: z.string().nullish(),
  subtype: z.string().optional(),
  bot_id: z.string().optional(),
  channel_type: z.string().optional(),
  files: z.array(z.object({ id: z.string() })).optional(),
});
const envelopeSchema = z.object({ event_id: z.string(), team_id: z.string() });

/** Subtypes of a message that a person posted just now; the others tell of edits, joins and the like. */
const POSTED = new Set([undefined, 'file_share', 'thread_broadcast']);

/**
 * Mentions, posts with files, and direct messages. One post can arrive as several events (its message, the mention in it, the file in
 * it); all of them name the same natural keys, so the inbox keeps one.
 */
export function listenToPosts(app: App, deps: ChannelDeps): void {
  const take = async (
    event: unknown,
    body: unknown,
    botUserId: string | undefined,
    mention: boolean,
  ): Promise<void> => {
    const envelope = envelopeSchema.parse(body);
    for (const one of entriesOf(event, envelope, botUserId, mention)) await deps.store.receive(one);
  };
  app.event('app_mention', ({ event, body, context }) => take(event, body, context.botUserId, true));
  app.event('message', ({ event, body, context }) => take(event, body, context.botUserId, false));
}

/** What a post asks to be done: each of its files read, or its question answered, or nothing. */
export function entriesOf(
  event: unknown,
  envelope: { readonly event_id: string; readonly team_id: string },
  botUserId: string | undefined,
  isMention: boolean,
): InboxEntry[] {
  const parsed = postSchema.safeParse(event);
  if (!parsed.success) return [];
  const post = parsed.data;
  if (!POSTED.has(post.subtype) || post.bot_id !== undefined || !post.user || post.user === botUserId) return [];
  const direct = post.channel_type === 'im';
  const named = botUserId !== undefined && (post.text ?? '').includes(`<@${botUserId}>`);
  const mentioned = isMention || named || direct;
  const place = { channel: post.channel, threadTs: post.thread_ts ?? post.ts, user: post.user };
  const words = mentioned ? plainWords(post.text ?? '') : '';
  const files = post.files ?? [];
  if (files.length > 0) {
    return files.map((file) =>
      entry(
        'file',
        envelope.team_id,
        { event: `${envelope.event_id}#${file.id}`, about: [post.channel, file.id, post.ts] },
        { ...place, fileId: file.id, mentioned, question: words, alone: files.length === 1 },
      ),
    );
  }
  // A mention without a file comes as an event of its own; in a channel the message itself is none of our business.
  if (!isMention && !direct) return [];
  const keys = { event: envelope.event_id, about: [post.channel, post.ts] };
  return [entry('ask', envelope.team_id, keys, { ...place, text: words })];
}
