/** Posting, changing and removing messages. Checks that concern the caller's rights live with the API; these only change the world. */
import type { Block } from '../wire/blocks.ts';
import type { WireMessage } from '../wire/objects.ts';
import { nameBlocks } from './elementState.ts';
import { presentMessage } from './present.ts';
import type { Message, World } from './world.ts';

export interface Draft {
  readonly channel: string;
  readonly user: string;
  readonly text: string;
  readonly botId?: string | undefined;
  readonly subtype?: string | undefined;
  readonly threadTs?: string | undefined;
  readonly blocks?: readonly Block[] | undefined;
  readonly fileIds?: readonly string[];
  readonly onlyFor?: string | undefined;
  readonly notice?: boolean;
  readonly metadata?: WireMessage['metadata'];
}

export function findMessage(world: World, channel: string, ts: string): Message | undefined {
  return world.messages.find((m) => m.channel === channel && m.ts === ts);
}

export function postMessage(world: World, draft: Draft): Message {
  // A reply belongs to the thread's first message, even when someone names another reply.
  const parent = draft.threadTs === undefined ? undefined : findMessage(world, draft.channel, draft.threadTs);
  const message: Message = {
    channel: draft.channel,
    ts: world.nextTs(),
    threadTs: parent?.threadTs ?? draft.threadTs,
    user: draft.user,
    botId: draft.botId,
    subtype: draft.subtype,
    text: draft.text,
    blocks: draft.blocks === undefined ? undefined : nameBlocks(world, draft.blocks),
    fileIds: draft.fileIds ?? [],
    onlyFor: draft.onlyFor,
    notice: draft.notice ?? false,
    editedTs: undefined,
    metadata: draft.metadata,
    reactions: new Map(),
    states: new Map(),
  };
  world.messages.push(message);
  world.publish({ kind: 'posted', message });
  return message;
}

export function editMessage(
  world: World,
  message: Message,
  content: { text?: string | undefined; blocks?: readonly Block[] | undefined },
): void {
  const before = presentMessage(world, message);
  message.text = content.text ?? message.text;
  message.blocks = content.blocks === undefined ? undefined : nameBlocks(world, content.blocks);
  message.editedTs = world.nextTs();
  world.publish({ kind: 'edited', message, before });
}

export function removeMessage(world: World, message: Message): void {
  const before = presentMessage(world, message);
  const index = world.messages.indexOf(message);
  if (index >= 0) world.messages.splice(index, 1);
  world.publish({ kind: 'deleted', message, before });
}

/** @returns false when nothing changed */
export function react(world: World, message: Message, user: string, reaction: string, added: boolean): boolean {
  const users = message.reactions.get(reaction) ?? new Set<string>();
  if (users.has(user) === added) return false;
  if (added) users.add(user);
  else users.delete(user);
  if (users.size > 0) message.reactions.set(reaction, users);
  else message.reactions.delete(reaction);
  world.publish({ kind: 'reacted', message, user, reaction, added });
  return true;
}
