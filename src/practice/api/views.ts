/** views.*: opening, pushing and changing modals, and publishing the Home tab. */
import { checkView } from '../wire/checkBlocks.ts';
import { Refusal } from '../wire/refusal.ts';
import type { ViewInput } from '../wire/views.ts';
import { presentView } from '../world/present.ts';
import { exchangeTrigger } from '../world/tickets.ts';
import { isOpen, openView, publishHome, pushView, updateView } from '../world/views.ts';
import type { View } from '../world/world.ts';
import { type Call, fileCheck, type MethodTable, personOf } from './method.ts';

function viewFrom({ world, install }: Call, value: unknown, type: ViewInput['type']): ViewInput {
  if (value === undefined) throw new Refusal('invalid_arguments', ['[ERROR] missing required field: view']);
  const view = checkView(value, fileCheck(world, install.team));
  if (view.type !== type) {
    throw new Refusal('invalid_arguments', [`[ERROR] must be one of: ${type} [json-pointer:/view/type]`]);
  }
  return view;
}

function show({ world, install }: Call, view: View) {
  return { view: presentView(world, view, install) };
}

function requireTrigger(args: { trigger_id?: string | undefined; interactivity_pointer?: string | undefined }): string {
  const id = args.trigger_id ?? args.interactivity_pointer;
  if (id === undefined) throw new Refusal('invalid_arguments', ['[ERROR] missing required field: trigger_id']);
  return id;
}

function checkHash(view: View, hash: string | undefined): void {
  if (hash !== undefined && hash !== '' && hash !== view.hash) throw new Refusal('hash_conflict');
}

export const views: Pick<MethodTable, 'views.open' | 'views.push' | 'views.update' | 'views.publish'> = {
  'views.open': {
    scopes: [],
    token: 'bot',
    run: (call, args) => {
      // The view is looked at first: a refused view must not use up the trigger.
      const content = viewFrom(call, args.view, 'modal');
      const trigger = exchangeTrigger(call.world, requireTrigger(args), call.install.team);
      return show(call, openView(call.world, call.install.team, trigger.user, content));
    },
  },
  'views.push': {
    scopes: [],
    token: 'bot',
    run: (call, args) => {
      const content = viewFrom(call, args.view, 'modal');
      const trigger = exchangeTrigger(call.world, requireTrigger(args), call.install.team);
      return show(call, pushView(call.world, call.install.team, trigger.user, content));
    },
  },
  'views.update': {
    scopes: [],
    token: 'bot',
    run: (call, args) => {
      const { world, install } = call;
      const view =
        args.view_id !== undefined
          ? world.views.get(args.view_id)
          : [...world.views.values()].find(
              (v) => args.external_id !== undefined && v.content.external_id === args.external_id && isOpen(world, v),
            );
      if (!view || view.team !== install.team || !isOpen(world, view)) throw new Refusal('not_found');
      const content = viewFrom(call, args.view, view.content.type);
      checkHash(view, args.hash);
      return show(call, updateView(world, view, content));
    },
  },
  'views.publish': {
    scopes: [],
    token: 'bot',
    run: (call, args) => {
      const { world, install } = call;
      const person = personOf(call, args.user_id);
      const content = viewFrom(call, args.view, 'home');
      const before = world.views.get(world.homes.get(person.id) ?? '');
      if (before) checkHash(before, args.hash);
      return show(call, publishHome(world, install.team, person.id, content));
    },
  },
};
