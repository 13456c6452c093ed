import type { WebClient } from '@slack/web-api';
import type { WorkspaceStore } from '../../store/types.ts';
import type { Message } from '../messages/blocks.ts';
import { refusal } from './webClient.ts';

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

export function poster(client: WebClient, workspace: WorkspaceStore, jobKey: string, place: Place): Poster {
  const posted = (step: string): Promise<string | undefined> => workspace.postedTs(jobKey, step);
  const remember = (step: string, ts: string): Promise<void> => workspace.recordPosted(jobKey, step, ts);
  const post = async (step: string, message: Message): Promise<string> => {
    const before = await posted(step);
    if (before !== undefined) return before;
    const sent = await client.chat.postMessage({
      channel: place.channel,
      ...(place.threadTs === null ? {} : { thread_ts: place.threadTs }),
      text: message.text,
      blocks: message.blocks,
      unfurl_links: false,
      unfurl_media: false,
    });
    const ts = sent.ts ?? '';
    await remember(step, ts);
    return ts;
  };
  return {
    place,
    in: (other) => poster(client, workspace, jobKey, other),
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
