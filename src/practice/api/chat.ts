/** chat.*: posting, changing, removing, whispering. */
import { checkMessageBlocks } from '../wire/checkBlocks.ts';
import { LIMITS } from '../wire/limits.ts';
import { Refusal } from '../wire/refusal.ts';
import { directChannel } from '../world/marrowby.ts';
import { editMessage, findMessage, postMessage, removeMessage } from '../world/messages.ts';
import { presentMessage } from '../world/present.ts';
import type { Channel, Message } from '../world/world.ts';
import { type Call, channelOf, fileCheck, type MethodTable, memberChannel } from './method.ts';

interface Content {
  text?: string | undefined;
  blocks?: unknown[] | undefined;
  attachments?: unknown[] | undefined;
  markdown_text?: string | undefined;
}

function contentOf({ world, install }: Call, args: Content) {
  if (args.markdown_text !== undefined) {
    if (args.text !== undefined || args.blocks !== undefined) throw new Refusal('markdown_text_conflict');
    if (args.markdown_text.length > LIMITS.markdownText) throw new Refusal('msg_too_long');
  }
  const blocks =
    args.blocks === undefined ? undefined : checkMessageBlocks(args.blocks, fileCheck(world, install.team));
  const text = (args.text ?? args.markdown_text ?? '').slice(0, LIMITS.textCut);
  const hasBlocks = blocks !== undefined && blocks.length > 0;
  if (text === '' && !hasBlocks && (args.attachments ?? []).length === 0) throw new Refusal('no_text');
  return { text, blocks: hasBlocks ? blocks : undefined };
}

/** A person's id stands for the direct channel with them. */
function targetChannel(call: Call, id: string): Channel {
  const person = call.world.people.get(id);
  if (person && person.team === call.install.team && !person.isBot) {
    return directChannel(call.world, person.id, call.install.botUser);
  }
  return memberChannel(call, id);
}

function ownMessage(call: Call, channel: Channel, ts: string, refusal: string): Message {
  const message = findMessage(call.world, channel.id, ts);
  // An ephemeral message has a ts too, but cannot be reached by it.
  if (!message || message.onlyFor !== undefined) throw new Refusal('message_not_found');
  if (message.user !== call.install.botUser) throw new Refusal(refusal);
  return message;
}

export const chat: Pick<
  MethodTable,
  'chat.postMessage' | 'chat.update' | 'chat.delete' | 'chat.postEphemeral' | 'chat.getPermalink'
> = {
  'chat.postMessage': {
    scopes: ['chat:write'],
    token: 'bot',
    run: (call, args) => {
      const { world, install } = call;
      const channel = targetChannel(call, args.channel);
      const content = contentOf(call, args);
      if (args.thread_ts !== undefined && !findMessage(world, channel.id, args.thread_ts)) {
        throw new Refusal('thread_not_found');
      }
      const message = postMessage(world, {
        channel: channel.id,
        user: install.botUser,
        botId: install.botId,
        threadTs: args.thread_ts,
        metadata: args.metadata,
        ...content,
      });
      return { channel: channel.id, ts: message.ts, message: presentMessage(world, message) };
    },
  },
  'chat.update': {
    scopes: ['chat:write'],
    token: 'bot',
    run: (call, args) => {
      const channel = channelOf(call, args.channel);
      const message = ownMessage(call, channel, args.ts, 'cant_update_message');
      if ((args.text ?? '').length > LIMITS.updateText) throw new Refusal('msg_too_long');
      const content = contentOf(call, args);
      editMessage(call.world, message, content);
      const shown = presentMessage(call.world, message);
      return { channel: channel.id, ts: message.ts, text: message.text, message: shown };
    },
  },
  'chat.delete': {
    scopes: ['chat:write'],
    token: 'bot',
    run: (call, args) => {
      const channel = channelOf(call, args.channel);
      removeMessage(call.world, ownMessage(call, channel, args.ts, 'cant_delete_message'));
      return { channel: channel.id, ts: args.ts };
    },
  },
  'chat.postEphemeral': {
    scopes: ['chat:write'],
    token: 'bot',
    run: (call, args) => {
      const { world, install } = call;
      const channel = targetChannel(call, args.channel);
      if (!channel.members.has(args.user)) throw new Refusal('user_not_in_channel');
      const message = postMessage(world, {
        channel: channel.id,
        user: install.botUser,
        botId: install.botId,
        threadTs: args.thread_ts,
        onlyFor: args.user,
        ...contentOf(call, args),
      });
      return { message_ts: message.ts };
    },
  },
  'chat.getPermalink': {
    scopes: [],
    token: 'bot',
    run: (call, args) => {
      const channel = channelOf(call, args.channel);
      const message = findMessage(call.world, channel.id, args.message_ts);
      if (!message || message.onlyFor !== undefined) throw new Refusal('message_not_found');
      const thread = message.threadTs === undefined ? '' : `?thread_ts=${message.threadTs}&cid=${channel.id}`;
      return {
        channel: channel.id,
        permalink: `${call.world.baseUrl}/archives/${channel.id}/p${message.ts.replace('.', '')}${thread}`,
      };
    },
  },
};
