import { z } from 'zod';
import type { InboxEntry } from '../store/types.ts';

const id = z.string().min(1);
const dateOrder = z.enum(['iso', 'dmy', 'mdy']);
/** the upload, with the reading that the message showed when it showed one; or a dataset whose upload is not at hand */
const target = z.union([z.strictObject({ upload: id, dataset: id.optional() }), z.strictObject({ dataset: id })]);

export type MendTarget = z.infer<typeof target>;

export const mendPlaceSchema = z.strictObject({ target, channel: id, threadTs: id });

const payloads = {
  /** a question in words, from a mention, a direct message or the button that asks again */
  ask: z.strictObject({
    channel: id,
    threadTs: id,
    user: id,
    text: z.string(),
  }),
  /** a question from the slash command, which has no message of its own */
  command: z.strictObject({ channel: id, user: id, text: z.string(), responseUrl: z.string() }),
  /** a file in a channel; `question` is what a mention beside it asks */
  file: z.strictObject({
    channel: id,
    threadTs: id,
    user: id,
    fileId: id,
    mentioned: z.boolean(),
    question: z.string(),
    /** the only file of its post */
    alone: z.boolean(),
  }),
  /** a file was shared somewhere; which message it stands in is still to be looked up */
  'file-shared': z.strictObject({ channel: id, fileId: id }),
  joined: z.strictObject({ channel: id }),
  /** an answer to "how do the dates read?" */
  'date-order': z.strictObject({
    upload: id,
    channel: id,
    messageTs: id,
    threadTs: id,
    user: id,
    order: dateOrder.nullable(),
  }),
  /** a weekly post that is due; `due` in milliseconds since 1970 */
  weekly: z.strictObject({ follow: id, due: z.number() }),
  /** the mend modal, handed in; columns by their place among the headers */
  mend: mendPlaceSchema.extend({
    user: id,
    columns: z.strictObject({
      start: z.number().int().optional(),
      end: z.number().int().optional(),
      id: z.number().int().optional(),
      segment: z.number().int().optional(),
      amount: z.number().int().optional(),
    }),
    dates: dateOrder.nullable(),
    asOf: z.string().nullable(),
  }),
} as const;

export type EntryKind = keyof typeof payloads;
export type Payload<K extends EntryKind> = z.infer<(typeof payloads)[K]>;
export type Work = { [K in EntryKind]: { readonly kind: K; readonly payload: Payload<K> } }[EntryKind];

/** An entry on its way into the inbox. */
export function entry<K extends EntryKind>(
  kind: K,
  teamId: string,
  keys: { readonly event: string; readonly about: readonly string[] },
  payload: Payload<K>,
): InboxEntry {
  return { kind, teamId, eventKey: keys.event, naturalKey: [kind, ...keys.about].join('|'), payload };
}

/**
 * An entry on its way out of the inbox; it may have been written by an older version.
 * @throws ZodError for a kind or payload that this version does not know
 */
export function workOf(stored: Pick<InboxEntry, 'kind' | 'payload'>): Work {
  const kind = z.enum(Object.keys(payloads) as [EntryKind, ...EntryKind[]]).parse(stored.kind);
  return { kind, payload: payloads[kind].parse(stored.payload) } as Work;
}
