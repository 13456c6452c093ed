/** Modals, a stack of at most three for each person, and the Home tab. */
import { LIMITS } from '../wire/limits.ts';
import { Refusal } from '../wire/refusal.ts';
import type { ViewInput } from '../wire/views.ts';
import { nameBlocks, stateOf } from './elementState.ts';
import type { View, World } from './world.ts';

function newHash(world: World): string {
  return `${Math.floor(world.now() / 1000)}.${world.newId('').toLowerCase()}`;
}

export function topView(world: World, user: string): View | undefined {
  const id = world.stacks.get(user)?.at(-1);
  return id === undefined ? undefined : world.views.get(id);
}

export function isOpen(world: World, view: View): boolean {
  return (world.stacks.get(view.user)?.includes(view.id) ?? false) || world.homes.get(view.user) === view.id;
}

function store(world: World, team: string, user: string, content: ViewInput, below: View | undefined): View {
  const blocks = nameBlocks(world, content.blocks);
  const id = world.newId('V');
  const view: View = {
    id,
    team,
    user,
    content: { ...content, blocks },
    hash: newHash(world),
    state: stateOf(blocks),
    rootId: below?.rootId ?? id,
    previousId: below?.id ?? null,
  };
  world.views.set(id, view);
  return view;
}

export function openView(world: World, team: string, user: string, content: ViewInput): View {
  const view = store(world, team, user, content, undefined);
  world.stacks.set(user, [view.id]);
  world.publish({ kind: 'view', user });
  return view;
}

/** @throws Refusal `push_limit_reached`, or `invalid_arguments` when nothing is open to push onto */
export function pushView(world: World, team: string, user: string, content: ViewInput): View {
  const stack = world.stacks.get(user) ?? [];
  if (stack.length === 0) throw new Refusal('invalid_arguments', ['[ERROR] no view is open to push onto']);
  if (stack.length >= LIMITS.viewStack) throw new Refusal('push_limit_reached');
  const view = store(world, team, user, content, topView(world, user));
  world.stacks.set(user, [...stack, view.id]);
  world.publish({ kind: 'view', user });
  return view;
}

/** What was typed survives only under the same block_id and action_id. */
export function updateView(world: World, view: View, content: ViewInput): View {
  const blocks = nameBlocks(world, content.blocks);
  view.content = { ...content, blocks };
  view.state = stateOf(blocks, view.state);
  view.hash = newHash(world);
  world.publish({ kind: 'view', user: view.user });
  return view;
}

export function publishHome(world: World, team: string, user: string, content: ViewInput): View {
  const existing = world.homes.get(user);
  const before = existing === undefined ? undefined : world.views.get(existing);
  if (before) return updateView(world, before, content);
  const view = store(world, team, user, content, undefined);
  world.homes.set(user, view.id);
  world.publish({ kind: 'view', user });
  return view;
}

export function closeTop(world: World, user: string): void {
  world.stacks.set(user, (world.stacks.get(user) ?? []).slice(0, -1));
  world.publish({ kind: 'view', user });
}

export function clearStack(world: World, user: string): void {
  world.stacks.set(user, []);
  world.publish({ kind: 'view', user });
}
