/** Slash commands. */
import { parseReply, postReply } from '../api/responseUrl.ts';
import type { Outcome } from '../delivery/appLink.ts';
import { botOf } from '../delivery/events.ts';
import { Refusal } from '../wire/refusal.ts';
import { postMessage, removeMessage } from '../world/messages.ts';
import { issueResponseUrl, issueTrigger } from '../world/tickets.ts';
import type { Person } from '../world/world.ts';
import type { Desk } from './desk.ts';
import { failureWords } from './interact.ts';
import { channelFor, invite, notice } from './say.ts';
import { escapeText, storedText } from './typed.ts';

/**
 * @param typed the whole line, from the slash on
 * @returns what the app said; the workspace's own commands answer at once
 */
export async function slash(desk: Desk, person: Person, channelName: string, typed: string): Promise<Outcome> {
  const { world } = desk;
  const channel = channelFor(world, person, channelName);
  const [command = '', ...rest] = typed.trim().split(/\s+/);
  const text = typed.trim().slice(command.length).trim();
  const install = botOf(world, person.team);
  if (command === '/invite') {
    const guest = [...world.people.values()].find((p) => `@${p.name}` === rest[0]?.toLowerCase());
    if (guest) invite(world, person, channel.id, guest.id);
    else notice(world, channel.id, person.id, 'Say whom to bring in, for example `/invite @ebbline`.');
    return { ok: true, reply: undefined };
  }
  if (!desk.commands.includes(command) || !install) {
    notice(
      world,
      channel.id,
      person.id,
      `\`${escapeText(command)}\` is not a command here. Known: ${desk.commands.join(', ')}, /invite.`,
    );
    return { ok: true, reply: undefined };
  }
  const echo = postMessage(world, {
    channel: channel.id,
    user: person.id,
    text: escapeText(typed.trim()),
    onlyFor: person.id,
    notice: true,
  });
  const { url } = issueResponseUrl(world, {
    user: person.id,
    channel: channel.id,
    source: undefined,
    threadTs: undefined,
  });
  const outcome = await desk.link.ask('command', {
    token: 'practice',
    team_id: person.team,
    team_domain: world.teams.get(person.team)?.domain ?? '',
    channel_id: channel.id,
    channel_name: channel.kind === 'direct' ? 'directmessage' : channel.name,
    user_id: person.id,
    user_name: person.name,
    command,
    text: storedText(world, person.team, text).replace(
      /<@([A-Z0-9]+)>/g,
      (_, id: string) => `<@${id}|${world.people.get(id)?.name ?? ''}>`,
    ),
    api_app_id: world.appId,
    is_enterprise_install: 'false',
    response_url: url,
    trigger_id: issueTrigger(world, person.team, person.id).id,
  });
  if (!outcome.ok) {
    notice(world, channel.id, person.id, failureWords(outcome.error));
    return outcome;
  }
  if (outcome.reply === undefined || outcome.reply === '') return outcome;
  try {
    const reply = parseReply(typeof outcome.reply === 'string' ? { text: outcome.reply } : outcome.reply);
    if (reply.response_type === 'in_channel') {
      removeMessage(world, echo);
      postMessage(world, { channel: channel.id, user: person.id, text: echo.text, notice: true });
    }
    postReply(world, install, { channel: channel.id, user: person.id, threadTs: undefined }, reply);
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    notice(world, channel.id, person.id, `The bot's answer was refused: ${escapeText(error.message)}`);
  }
  return outcome;
}
