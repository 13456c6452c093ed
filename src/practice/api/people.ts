/** auth.*, users.*, team.*, apps.*: who is calling, and who is who. */
import { presentPerson } from '../world/present.ts';
import { type MethodTable, personOf } from './method.ts';

export const people: Pick<
  MethodTable,
  'auth.test' | 'auth.revoke' | 'apps.connections.open' | 'team.info' | 'users.info'
> = {
  'auth.test': {
    scopes: [],
    token: 'bot',
    run: ({ world, install }) => ({
      url: `${world.baseUrl}/`,
      team: world.teams.get(install.team)?.name,
      user: world.people.get(install.botUser)?.name,
      team_id: install.team,
      user_id: install.botUser,
      bot_id: install.botId,
      is_enterprise_install: false,
    }),
  },
  'auth.revoke': {
    scopes: [],
    token: 'bot',
    run: ({ world, install }, args) => {
      if (args.test !== true) world.installs.delete(install.token);
      return { revoked: args.test !== true };
    },
  },
  'apps.connections.open': {
    scopes: ['connections:write'],
    token: 'app',
    run: ({ socketUrl }) => ({ url: socketUrl() }),
  },
  'team.info': {
    scopes: ['team:read'],
    token: 'bot',
    run: ({ world, install }) => ({ team: { ...world.teams.get(install.team) } }),
  },
  'users.info': {
    scopes: ['users:read'],
    token: 'bot',
    run: (call, args) => ({ user: presentPerson(personOf(call, args.user), call.world.now()) }),
  },
};
