/** What happens when the app posts to a response_url, or answers a slash command with a body. */
import { checkMessageBlocks } from '../wire/checkBlocks.ts';
import { LIMITS } from '../wire/limits.ts';
import { issueMessages, Refusal } from '../wire/refusal.ts';
import { type Reply, replySchema } from '../wire/requests.ts';
import { editMessage, findMessage, postMessage, removeMessage } from '../world/messages.ts';
import { useResponseUrl } from '../world/tickets.ts';
import type { Install, World } from '../world/world.ts';
import { fileCheck } from './method.ts';

/** @throws Refusal `invalid_payload` */
export function parseReply(value: unknown): Reply {
  const parsed = replySchema.safeParse(value, { reportInput: true });
  if (!parsed.success) throw new Refusal('invalid_payload', issueMessages(parsed.error.issues));
  return parsed.data;
}

/** Ephemeral unless the app asks for `in_channel`. */
export function postReply(
  world: World,
  install: Install,
  place: { channel: string; user: string; threadTs: string | undefined },
  reply: Reply,
): void {
  const blocks =
    reply.blocks === undefined ? undefined : checkMessageBlocks(reply.blocks, fileCheck(world, install.team));
  const text = (reply.text ?? '').slice(0, LIMITS.textCut);
  if (text === '' && (blocks ?? []).length === 0) throw new Refusal('no_text');
  postMessage(world, {
    channel: place.channel,
    user: install.botUser,
    botId: install.botId,
    text,
    blocks,
    threadTs: reply.thread_ts ?? place.threadTs,
    onlyFor: reply.response_type === 'in_channel' ? undefined : place.user,
  });
}

/** @throws Refusal when the address has run out or the reply cannot be taken */
export function respond(world: World, id: string, body: unknown): void {
  const ticket = useResponseUrl(world, id);
  const team = world.channels.get(ticket.channel)?.team;
  const install = [...world.installs.values()].find((i) => i.kind === 'bot' && i.team === team);
  if (!install) throw new Refusal('account_inactive');
  const reply = parseReply(body);
  const source = ticket.source === undefined ? undefined : findMessage(world, ticket.channel, ticket.source.ts);
  if (reply.delete_original === true) {
    if (!source || source.user !== install.botUser) throw new Refusal('message_not_found');
    removeMessage(world, source);
    if (reply.text === undefined && reply.blocks === undefined) return;
  }
  if (reply.replace_original === true && source && source.user === install.botUser) {
    const blocks =
      reply.blocks === undefined ? undefined : checkMessageBlocks(reply.blocks, fileCheck(world, install.team));
    editMessage(world, source, { text: reply.text ?? '', blocks });
    return;
  }
  postReply(world, install, ticket, reply);
}
