/** conversations.*: what a channel is, who is in it, joining and opening. */
import { Refusal } from '../wire/refusal.ts';
import type { Request } from '../wire/requests.ts';
import { directChannel } from '../world/marrowby.ts';
import { presentChannel, presentMessage } from '../world/present.ts';
import type { Message } from '../world/world.ts';
import { type Call, channelOf, type MethodTable, memberChannel, personOf } from './method.ts';

const READ = ['channels:read', 'groups:read', 'im:read'];

/** A cursor is an offset in disguise. */
function pageOf<T>(all: readonly T[], cursor: string | undefined, limit: number | undefined) {
  const from = cursor === undefined || cursor === '' ? 0 : Number(Buffer.from(cursor, 'base64').toString());
  if (!Number.isInteger(from)) throw new Refusal('invalid_cursor');
  const to = from + (limit ?? 100);
  return {
    items: all.slice(from, to),
    response_metadata: { next_cursor: to < all.length ? Buffer.from(String(to)).toString('base64') : '' },
  };
}

const HISTORY = ['channels:history', 'groups:history', 'im:history'];

/** Messages of a channel within a stretch of time, as the app may see them: what is for one person only is in no history. */
function within(call: Call, args: Request<'conversations.history'>): Message[] {
  const channel = memberChannel(call, args.channel);
  const [oldest, latest] = [Number(args.oldest ?? 0), Number(args.latest ?? Number.POSITIVE_INFINITY)];
  return call.world.messages.filter((message) => {
    const at = Number(message.ts);
    const inside = args.inclusive === true ? at >= oldest && at <= latest : at > oldest && at < latest;
    return message.channel === channel.id && message.onlyFor === undefined && inside;
  });
}

/** Metadata is left out unless it is asked for. */
function shown(call: Call, messages: readonly Message[], all: boolean | undefined) {
  return messages.map((message) => {
    const { metadata, ...rest } = presentMessage(call.world, message);
    return all === true && metadata ? { ...rest, metadata } : rest;
  });
}

export const conversations: Pick<
  MethodTable,
  | 'conversations.info'
  | 'conversations.members'
  | 'conversations.join'
  | 'conversations.open'
  | 'conversations.list'
  | 'conversations.history'
  | 'conversations.replies'
> = {
  'conversations.info': {
    scopes: READ,
    token: 'bot',
    run: (call, args) => ({ channel: presentChannel(channelOf(call, args.channel), call.install) }),
  },
  'conversations.members': {
    scopes: READ,
    token: 'bot',
    run: (call, args) => {
      const { items, response_metadata } = pageOf([...channelOf(call, args.channel).members], args.cursor, args.limit);
      return { members: items, response_metadata };
    },
  },
  'conversations.list': {
    scopes: READ,
    token: 'bot',
    run: ({ world, install }, args) => {
      const types = new Set((args.types ?? 'public_channel').split(',').map((t) => t.trim()));
      const kinds = { public: 'public_channel', private: 'private_channel', direct: 'im' } as const;
      const seen = [...world.channels.values()].filter(
        (c) =>
          c.team === install.team &&
          types.has(kinds[c.kind]) &&
          (c.kind === 'public' || c.members.has(install.botUser)),
      );
      const { items, response_metadata } = pageOf(seen, args.cursor, args.limit);
      return { channels: items.map((c) => presentChannel(c, install)), response_metadata };
    },
  },
  'conversations.history': {
    scopes: HISTORY,
    token: 'bot',
    run: (call, args) => {
      // Newest first; replies are in their threads.
      const heads = within(call, args).filter((m) => m.threadTs === undefined || m.threadTs === m.ts);
      const { items, response_metadata } = pageOf(heads.reverse(), args.cursor, args.limit);
      return {
        messages: shown(call, items, args.include_all_metadata),
        has_more: response_metadata.next_cursor !== '',
        response_metadata,
      };
    },
  },
  'conversations.replies': {
    scopes: HISTORY,
    token: 'bot',
    run: (call, args) => {
      const thread = within(call, args).filter((m) => m.ts === args.ts || m.threadTs === args.ts);
      if (thread.length === 0) throw new Refusal('thread_not_found');
      const { items, response_metadata } = pageOf(thread, args.cursor, args.limit);
      return {
        messages: shown(call, items, args.include_all_metadata),
        has_more: response_metadata.next_cursor !== '',
        response_metadata,
      };
    },
  },
  'conversations.join': {
    scopes: ['channels:join'],
    token: 'bot',
    run: (call, args) => {
      const channel = channelOf(call, args.channel);
      if (channel.kind !== 'public') throw new Refusal('method_not_supported_for_channel_type');
      if (!channel.members.has(call.install.botUser)) {
        channel.members.add(call.install.botUser);
        call.world.publish({ kind: 'joined', channel, user: call.install.botUser, inviter: undefined });
      }
      return { channel: presentChannel(channel, call.install) };
    },
  },
  'conversations.open': {
    scopes: ['im:write'],
    token: 'bot',
    run: (call, args) => {
      if (args.channel !== undefined) return { channel: { id: channelOf(call, args.channel).id } };
      const users = (args.users ?? '').split(',').filter((id) => id !== '');
      const [user, second] = users;
      if (user === undefined) throw new Refusal('users_list_not_supplied');
      if (second !== undefined) throw new Refusal('not_enough_users');
      return { channel: { id: directChannel(call.world, personOf(call, user).id, call.install.botUser).id } };
    },
  },
};
