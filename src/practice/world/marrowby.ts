/** The invented workspace a newcomer lands in: the Marrowby Seed Club, its three people and two channels. */
import type { Channel, Install, World } from './world.ts';

export const MARROWBY = {
  team: 'T0MARROWBY1',
  wren: 'U0WREN00001',
  tamsin: 'U0TAMSIN001',
  odell: 'U0ODELL0001',
  bot: 'U0EBBLINE01',
  botId: 'B0EBBLINE01',
  retention: 'C0RETENTION',
  launches: 'C0LAUNCHES1',
} as const;

/** Every scope this kind of bot may ask for; a test can install with fewer. */
export const ALL_SCOPES = [
  'commands',
  'chat:write',
  'app_mentions:read',
  'files:read',
  'files:write',
  'channels:history',
  'groups:history',
  'im:history',
  'channels:read',
  'groups:read',
  'im:read',
  'channels:join',
  'users:read',
  'reactions:write',
  'im:write',
  'team:read',
] as const;

export function addInstall(world: World, install: Omit<Install, 'scopes'> & { scopes?: readonly string[] }): Install {
  const stored: Install = { ...install, scopes: new Set(install.scopes ?? ALL_SCOPES) };
  world.installs.set(stored.token, stored);
  return stored;
}

export function addChannel(
  world: World,
  channel: Pick<Channel, 'id' | 'team' | 'name' | 'purpose' | 'kind'> & { members: readonly string[] },
): Channel {
  const stored: Channel = { ...channel, members: new Set(channel.members), archived: false };
  world.channels.set(stored.id, stored);
  return stored;
}

/**
 * The channel of a person and the bot, made on first use. Its id follows from the person's, so that after a restart what the app keeps
 * under it is still found.
 */
export function directChannel(world: World, user: string, botUser: string): Channel {
  for (const channel of world.channels.values()) {
    if (channel.kind === 'direct' && channel.members.has(user) && channel.members.has(botUser)) return channel;
  }
  const team = world.people.get(user)?.team ?? '';
  return addChannel(world, {
    id: user.replace(/^./, 'D'),
    team,
    name: '',
    purpose: '',
    kind: 'direct',
    members: [user, botUser],
  });
}

export function settleMarrowby(
  world: World,
  tokens: { bot: string; app: string | undefined; scopes: readonly string[] | undefined },
): void {
  const { team } = MARROWBY;
  world.teams.set(team, { id: team, name: 'Marrowby Seed Club', domain: 'marrowby' });
  const people = [
    [MARROWBY.wren, 'wren', 'Wren', 'retention analyst', 'Europe/London', false],
    [MARROWBY.tamsin, 'tamsin', 'Tamsin', 'finance', 'America/New_York', false],
    [MARROWBY.odell, 'odell', 'Odell', 'product', 'Australia/Adelaide', false],
    [MARROWBY.bot, 'ebbline', 'ebbline', 'answers whether churn has moved', 'Etc/UTC', true],
  ] as const;
  for (const [id, name, realName, role, timeZone, isBot] of people) {
    world.people.set(id, { id, team, name, realName, role, timeZone, isBot });
  }
  const humans = [MARROWBY.wren, MARROWBY.tamsin, MARROWBY.odell];
  addChannel(world, {
    id: MARROWBY.retention,
    team,
    name: 'retention',
    purpose: 'Who stays, who leaves, and whether that has changed.',
    kind: 'public',
    members: [...humans, MARROWBY.bot],
  });
  addChannel(world, {
    id: MARROWBY.launches,
    team,
    name: 'launches',
    purpose: 'What goes out, and when.',
    kind: 'public',
    members: humans,
  });
  const install = { team, botUser: MARROWBY.bot, botId: MARROWBY.botId };
  addInstall(world, {
    ...install,
    token: tokens.bot,
    kind: 'bot',
    ...(tokens.scopes === undefined ? {} : { scopes: tokens.scopes }),
  });
  if (tokens.app !== undefined)
    addInstall(world, { ...install, token: tokens.app, kind: 'app', scopes: ['connections:write'] });
  for (const human of humans) directChannel(world, human, MARROWBY.bot);
}
