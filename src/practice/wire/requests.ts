/**
 * What each method takes. Calls come as a form with nested values as JSON strings, or as JSON; both are read by the same schemas.
 * Blocks and views are only checked to be arrays and objects here: `checkBlocks.ts` refuses them with the platform's own error codes.
 */
import { z } from 'zod';

const flag = z.union([z.boolean(), z.enum(['true', 'false', '1', '0']).transform((v) => v === 'true' || v === '1')]);
const count = z.union([z.number(), z.string().regex(/^\d+$/).transform(Number)]);

/** A value that arrives as JSON text in a form. Unreadable text is left for the inner schema to refuse. */
function nested<T extends z.ZodType>(schema: T) {
  return z.preprocess((value) => {
    if (typeof value !== 'string') return value;
    try {
      return JSON.parse(value) as unknown;
    } catch {
      return value;
    }
  }, schema);
}

const list = nested(z.array(z.unknown())).optional();
const channel = z.string().min(1);
const ts = z.string().regex(/^\d+\.\d+$/, 'must be a message timestamp');
/** listener clients add team_id to every call, and the first auth.test repeats the token */
const always = { team_id: z.string().optional(), token: z.string().optional() };
const page = { cursor: z.string().optional(), limit: count.optional() };

const metadata = nested(
  z.object({ event_type: z.string(), event_payload: z.record(z.string(), z.unknown()) }),
).optional();

const messageContent = {
  text: z.string().optional(),
  blocks: list,
  attachments: list,
  markdown_text: z.string().optional(),
  metadata,
  parse: z.string().optional(),
  link_names: flag.optional(),
};

export const REQUESTS = {
  'auth.test': z.object({ ...always }),
  'auth.revoke': z.object({ ...always, test: flag.optional() }),
  'apps.connections.open': z.object({ ...always }),
  'team.info': z.object({ ...always, team: z.string().optional() }),
  'users.info': z.object({ ...always, user: z.string().min(1), include_locale: flag.optional() }),
  'conversations.info': z.object({
    ...always,
    channel,
    include_num_members: flag.optional(),
    include_locale: flag.optional(),
  }),
  'conversations.members': z.object({ ...always, ...page, channel }),
  'conversations.join': z.object({ ...always, channel }),
  'conversations.open': z.object({
    ...always,
    users: z.string().optional(),
    channel: z.string().optional(),
    return_im: flag.optional(),
    prevent_creation: flag.optional(),
  }),
  'conversations.list': z.object({
    ...always,
    ...page,
    types: z.string().optional(),
    exclude_archived: flag.optional(),
  }),
  'conversations.history': z.object({
    ...always,
    ...page,
    channel,
    oldest: z.string().optional(),
    latest: z.string().optional(),
    inclusive: flag.optional(),
    include_all_metadata: flag.optional(),
  }),
  'conversations.replies': z.object({
    ...always,
    ...page,
    channel,
    ts,
    oldest: z.string().optional(),
    latest: z.string().optional(),
    inclusive: flag.optional(),
    include_all_metadata: flag.optional(),
  }),
  'chat.postMessage': z.object({
    ...always,
    ...messageContent,
    channel,
    thread_ts: ts.optional(),
    reply_broadcast: flag.optional(),
    unfurl_links: flag.optional(),
    unfurl_media: flag.optional(),
    mrkdwn: flag.optional(),
    icon_emoji: z.string().optional(),
    icon_url: z.string().optional(),
    username: z.string().optional(),
    client_msg_id: z.string().optional(),
  }),
  'chat.update': z.object({
    ...always,
    ...messageContent,
    channel,
    ts,
    as_user: flag.optional(),
    file_ids: nested(z.array(z.string())).optional(),
    reply_broadcast: flag.optional(),
  }),
  'chat.delete': z.object({ ...always, channel, ts, as_user: flag.optional() }),
  'chat.postEphemeral': z.object({
    ...always,
    ...messageContent,
    channel,
    user: z.string().min(1),
    thread_ts: ts.optional(),
  }),
  'chat.getPermalink': z.object({ ...always, channel, message_ts: ts }),
  'files.getUploadURLExternal': z.object({
    ...always,
    filename: z.string().min(1),
    length: count,
    alt_txt: z.string().optional(),
    snippet_type: z.string().optional(),
  }),
  'files.completeUploadExternal': z.object({
    ...always,
    files: nested(z.array(z.object({ id: z.string(), title: z.string().optional() })).min(1)),
    channel_id: z.string().optional(),
    channels: z.string().optional(),
    thread_ts: ts.optional(),
    initial_comment: z.string().optional(),
    blocks: list,
  }),
  'files.info': z.object({
    ...always,
    ...page,
    file: z.string().min(1),
    count: count.optional(),
    page: count.optional(),
  }),
  'files.delete': z.object({ ...always, file: z.string().min(1) }),
  'reactions.add': z.object({ ...always, channel, name: z.string().min(1), timestamp: ts }),
  'reactions.remove': z.object({ ...always, channel, name: z.string().min(1), timestamp: ts }),
  'views.open': z.object({
    ...always,
    view: nested(z.unknown()),
    trigger_id: z.string().optional(),
    interactivity_pointer: z.string().optional(),
  }),
  'views.push': z.object({
    ...always,
    view: nested(z.unknown()),
    trigger_id: z.string().optional(),
    interactivity_pointer: z.string().optional(),
  }),
  'views.update': z.object({
    ...always,
    view: nested(z.unknown()),
    view_id: z.string().optional(),
    external_id: z.string().optional(),
    hash: z.string().optional(),
  }),
  'views.publish': z.object({
    ...always,
    view: nested(z.unknown()),
    user_id: z.string().min(1),
    hash: z.string().optional(),
  }),
} as const;

export type MethodName = keyof typeof REQUESTS;
export type Request<M extends MethodName> = z.infer<(typeof REQUESTS)[M]>;

/** What a POST to a response_url, or a slash command's reply, may hold. */
export const replySchema = z.object({
  text: z.string().optional(),
  blocks: z.array(z.unknown()).optional(),
  response_type: z.enum(['ephemeral', 'in_channel']).optional(),
  thread_ts: ts.optional(),
  replace_original: flag.optional(),
  delete_original: flag.optional(),
  attachments: z.array(z.unknown()).optional(),
  unfurl_links: flag.optional(),
  unfurl_media: flag.optional(),
  mrkdwn: flag.optional(),
  metadata: z.unknown().optional(),
});
export type Reply = z.infer<typeof replySchema>;

/** What the app may answer to a modal's submission. */
export const viewReplySchema = z.discriminatedUnion('response_action', [
  z.object({ response_action: z.literal('errors'), errors: z.record(z.string(), z.string()) }),
  z.object({ response_action: z.literal('update'), view: z.unknown() }),
  z.object({ response_action: z.literal('push'), view: z.unknown() }),
  z.object({ response_action: z.literal('clear') }),
]);
