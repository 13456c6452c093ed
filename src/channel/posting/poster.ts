import { setTimeout as pause } from 'node:timers/promises';
import type { WebClient } from '@slack/web-api';
import type { WorkspaceStore } from '../../store/types.ts';
import type { Message } from '../messages/blocks.ts';
import { mayPass, refusal } from './webClient.ts';

export interface Place {
  readonly channel: string;
  /** the message whose thread it goes to; null posts to the channel itself */
  readonly threadTs: string | null;
}

/** Posts the steps of one entry's work; what a step already posted is remembered, so that a repeated job does not post twice. */
export interface Poster {
  readonly place: Place;
  /** the same work in another place */
  in(place: Place): Poster;
  posted(step: string): Promise<string | undefined>;
  remember(step: string, ts: string): Promise<void>;
  /** @returns the message's ts */
  post(step: string, message: Message): Promise<string>;
  /** replaces what `earlier` posted; posts anew when there is nothing to replace */
  replace(step: string, earlier: string, message: Message): Promise<string>;
}

/** A message that cannot be replaced any more is posted anew. */
const NOT_REPLACEABLE = new Set([
  'message_not_found',
  'cant_update_message',
  'edit_window_closed',
  'channel_not_found',
]);

/** How far back in a place it is looked for what an attempt that was cut off may have posted. */
const LOOKED_BACK = 200;
/** Waits between tries of one post; the queue tries again later. */
const SEND_WAITS_MS = [250, 1000] as const;
const EVENT_TYPE = 'ebbline_post';

/**
 * @param posting a client that tries each call once only
 * @param again true when an earlier attempt may have been cut off between posting and remembering it: then every post is first looked for
 *              in its place, by a mark that each of them carries
 */
export function poster(
  client: WebClient,
  posting: WebClient,
  workspace: WorkspaceStore,
  jobKey: string,
  place: Place,
  again: boolean,
): Poster {
  const markOf = (step: string): string => `${jobKey}|${place.threadTs ?? ''}|${step}`;

  /** What an earlier attempt posted for this step, though it could not remember it. */
  const found = async (step: string): Promise<string | undefined> => {
    const where = { channel: place.channel, limit: LOOKED_BACK, include_all_metadata: true };
    let messages: readonly { ts?: string; metadata?: { event_type?: string; event_payload?: unknown } }[];
    try {
      const read =
        place.threadTs === null
          ? await client.conversations.history(where)
          : await client.conversations.replies({ ...where, ts: place.threadTs });
      messages = (read.messages ?? []) as typeof messages;
    } catch (error) {
      // Where the past cannot be read, posting once too often is better than not at all.
      if (refusal(error) === undefined) throw error;
      return undefined;
    }
    return messages.find(
      ({ metadata }) =>
        metadata?.event_type === EVENT_TYPE &&
        (metadata.event_payload as { mark?: unknown } | undefined)?.mark === markOf(step),
    )?.ts;
  };

  const posted = (step: string): Promise<string | undefined> => workspace.postedTs(jobKey, step);
  const remember = (step: string, ts: string): Promise<void> => workspace.recordPosted(jobKey, step, ts);
  const post = async (step: string, message: Message): Promise<string> => {
    const before = await posted(step);
    if (before !== undefined) return before;
    const already = again ? await found(step) : undefined;
    if (already !== undefined) {
      await remember(step, already);
      return already;
    }
    const ts = await send(step, message);
    await remember(step, ts);
    return ts;
  };

  const send = async (step: string, message: Message): Promise<string> => {
    for (const wait of [...SEND_WAITS_MS, null]) {
      try {
        const sent = await posting.chat.postMessage({
          channel: place.channel,
          ...(place.threadTs === null ? {} : { thread_ts: place.threadTs }),
          text: message.text,
          blocks: message.blocks,
          metadata: { event_type: EVENT_TYPE, event_payload: { mark: markOf(step) } },
          unfurl_links: false,
          unfurl_media: false,
        });
        return sent.ts ?? '';
      } catch (error) {
        if (!mayPass(error)) throw error;
        // The service may have taken the message and only its answer was lost.
        const ts = await found(step);
        if (ts !== undefined) return ts;
        if (wait === null) throw error;
        await pause(wait);
      }
    }
    throw new Error('not reached: the last try returns or throws');
  };

  return {
    place,
    in: (other) => poster(client, posting, workspace, jobKey, other, again),
    posted,
    remember,
    post,
    async replace(step, earlier, message) {
      const before = await posted(step);
      if (before !== undefined) return before;
      const ts = await posted(earlier);
      if (ts === undefined) return post(step, message);
      try {
        await client.chat.update({ channel: place.channel, ts, text: message.text, blocks: message.blocks });
      } catch (error) {
        if (!NOT_REPLACEABLE.has(refusal(error) ?? '')) throw error;
        return post(step, message);
      }
      await remember(step, ts);
      return ts;
    },
  };
}
