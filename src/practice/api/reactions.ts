/** reactions.*: a mark under a message. */
import { Refusal } from '../wire/refusal.ts';
import { findMessage, react } from '../world/messages.ts';
import { type Call, type MethodTable, memberChannel } from './method.ts';

function mark(call: Call, args: { channel: string; timestamp: string; name: string }, added: boolean) {
  const channel = memberChannel(call, args.channel);
  const message = findMessage(call.world, channel.id, args.timestamp);
  if (!message || message.onlyFor !== undefined) throw new Refusal('message_not_found');
  const name = args.name.replaceAll(':', '');
  if (!react(call.world, message, call.install.botUser, name, added)) {
    throw new Refusal(added ? 'already_reacted' : 'no_reaction');
  }
  return {};
}

export const reactions: Pick<MethodTable, 'reactions.add' | 'reactions.remove'> = {
  'reactions.add': { scopes: ['reactions:write'], token: 'bot', run: (call, args) => mark(call, args, true) },
  'reactions.remove': { scopes: ['reactions:write'], token: 'bot', run: (call, args) => mark(call, args, false) },
};
