/** What the actions of people need besides the world: the way to the app, and what the app has announced it answers to. */
import type { AppLink } from '../delivery/appLink.ts';
import type { Person, World } from '../world/world.ts';

export interface ShortcutDefinition {
  readonly callbackId: string;
  readonly name: string;
}

export interface Desk {
  readonly world: World;
  readonly link: AppLink;
  readonly commands: readonly string[];
  readonly shortcuts: readonly ShortcutDefinition[];
}

/** The fields that open every interaction payload. */
export function interactionBase(desk: Desk, person: Person): Record<string, unknown> {
  const team = desk.world.teams.get(person.team);
  return {
    user: { id: person.id, username: person.name, name: person.name, team_id: person.team },
    team: { id: person.team, domain: team?.domain ?? '' },
    enterprise: null,
    is_enterprise_install: false,
    api_app_id: desk.world.appId,
    token: 'practice',
  };
}
