/** From what happened in the world to the events the app is told, each in an envelope of its own. */
import { presentMessage, presentView } from '../world/present.ts';
import type { Change, Channel, Install, Message, World } from '../world/world.ts';

interface Event {
  readonly body: Record<string, unknown>;
  readonly team: string;
  readonly scopes: readonly string[];
}

const HISTORY = { public: 'channels:history', private: 'groups:history', direct: 'im:history' } as const;
const CHANNEL_TYPE = { public: 'channel', private: 'group', direct: 'im' } as const;

/** @returns envelopes for the one app of the workspace; empty when it may not see what happened */
export function envelopesFor(world: World, change: Change): { id: string; envelope: Record<string, unknown> }[] {
  return eventsFor(world, change).flatMap((event) => {
    const install = botOf(world, event.team);
    if (!install || (event.scopes.length > 0 && !event.scopes.some((s) => install.scopes.has(s)))) return [];
    const id = world.newId('Ev');
    const envelope = {
      token: 'practice',
      team_id: event.team,
      context_team_id: event.team,
      context_enterprise_id: null,
      api_app_id: world.appId,
      event: event.body,
      type: 'event_callback',
      event_id: id,
      event_time: Math.floor(world.now() / 1000),
      authorizations: [
        {
          enterprise_id: null,
          team_id: event.team,
          user_id: install.botUser,
          is_bot: true,
          is_enterprise_install: false,
        },
      ],
      is_ext_shared_channel: false,
      event_context: world.newId('4-'),
    };
    return [{ id, envelope }];
  });
}

export function botOf(world: World, team: string): Install | undefined {
  return [...world.installs.values()].find((i) => i.kind === 'bot' && i.team === team);
}

function eventsFor(world: World, change: Change): Event[] {
  switch (change.kind) {
    case 'posted':
      return postedEvents(world, change.message);
    case 'edited':
      return messageEvent(world, change.message, (channel) => ({
        subtype: 'message_changed',
        hidden: true,
        ts: world.nextTs(),
        message: presentMessage(world, change.message),
        previous_message: change.before,
        channel: channel.id,
      }));
    case 'deleted':
      return messageEvent(world, change.message, (channel) => ({
        subtype: 'message_deleted',
        hidden: true,
        ts: world.nextTs(),
        deleted_ts: change.message.ts,
        previous_message: change.before,
        channel: channel.id,
      }));
    case 'shared': {
      const { file, channel, user } = change;
      if (!botSees(world, channel)) return [];
      const body = {
        type: 'file_shared',
        file_id: file.id,
        file: { id: file.id },
        channel_id: channel.id,
        user_id: user,
        event_ts: world.nextTs(),
      };
      return [{ body, team: channel.team, scopes: ['files:read'] }];
    }
    case 'file-deleted':
      return [
        {
          body: { type: 'file_deleted', file_id: change.file.id, event_ts: world.nextTs() },
          team: change.file.team,
          scopes: ['files:read'],
        },
      ];
    case 'joined':
    case 'left': {
      const { channel, user } = change;
      if (!botSees(world, channel)) return [];
      const body = {
        type: change.kind === 'joined' ? 'member_joined_channel' : 'member_left_channel',
        user,
        channel: channel.id,
        channel_type: channel.kind === 'public' ? 'C' : 'G',
        team: channel.team,
        ...(change.kind === 'joined' && change.inviter !== undefined ? { inviter: change.inviter } : {}),
        event_ts: world.nextTs(),
      };
      return [{ body, team: channel.team, scopes: ['channels:read', 'groups:read'] }];
    }
    case 'reacted': {
      const channel = world.channels.get(change.message.channel);
      if (!channel || !botSees(world, channel)) return [];
      const body = {
        type: change.added ? 'reaction_added' : 'reaction_removed',
        user: change.user,
        reaction: change.reaction,
        item: { type: 'message', channel: channel.id, ts: change.message.ts },
        item_user: change.message.user,
        event_ts: world.nextTs(),
      };
      return [{ body, team: channel.team, scopes: ['reactions:read'] }];
    }
    case 'home-opened':
      return homeOpened(world, change.user, change.tab);
    case 'view':
    case 'state':
    case 'delivery':
      return [];
  }
}

function botSees(world: World, channel: Channel): boolean {
  const install = botOf(world, channel.team);
  return install !== undefined && channel.members.has(install.botUser);
}

function messageEvent(world: World, message: Message, body: (channel: Channel) => Record<string, unknown>): Event[] {
  const channel = world.channels.get(message.channel);
  if (!channel || message.onlyFor !== undefined || message.notice || !botSees(world, channel)) return [];
  const ts = world.nextTs();
  return [
    {
      body: { type: 'message', channel_type: CHANNEL_TYPE[channel.kind], event_ts: ts, ...body(channel) },
      team: channel.team,
      scopes: [HISTORY[channel.kind]],
    },
  ];
}

function postedEvents(world: World, message: Message): Event[] {
  const shown = presentMessage(world, message);
  const events = messageEvent(world, message, (channel) => ({ ...shown, channel: channel.id, event_ts: message.ts }));
  const channel = world.channels.get(message.channel);
  const install = channel && botOf(world, channel.team);
  if (events.length === 0 || !channel || !install || channel.kind === 'direct') return events;
  if (message.user === install.botUser || !message.text.includes(`<@${install.botUser}>`)) return events;
  const { subtype: _subtype, ...plain } = shown;
  events.push({
    body: { ...plain, type: 'app_mention', channel: channel.id, event_ts: message.ts },
    team: channel.team,
    scopes: ['app_mentions:read'],
  });
  return events;
}

function homeOpened(world: World, user: string, tab: 'home' | 'messages'): Event[] {
  const team = world.people.get(user)?.team ?? '';
  const install = botOf(world, team);
  const channel = [...world.channels.values()].find(
    (c) => c.kind === 'direct' && c.members.has(user) && install !== undefined && c.members.has(install.botUser),
  );
  if (!install || !channel) return [];
  const view = world.views.get(world.homes.get(user) ?? '');
  const body = {
    type: 'app_home_opened',
    user,
    channel: channel.id,
    tab,
    ...(view ? { view: presentView(world, view, install) } : {}),
    event_ts: world.nextTs(),
  };
  return [{ body, team, scopes: [] }];
}
