/** Operating what the app has put into messages, modals and the Home tab. */
import type { Outcome } from '../delivery/appLink.ts';
import { botOf } from '../delivery/events.ts';
import type { Block } from '../wire/blocks.ts';
import type { ElementValues } from '../wire/objects.ts';
import { findElement, stateOf } from '../world/elementState.ts';
import { findMessage } from '../world/messages.ts';
import { presentMessage, presentView } from '../world/present.ts';
import { issueResponseUrl, issueTrigger } from '../world/tickets.ts';
import { isOpen } from '../world/views.ts';
import type { Message, Person, View } from '../world/world.ts';
import { type Desk, interactionBase } from './desk.ts';
import { actionFor, type Choice, valueFor } from './elements.ts';
import { notice } from './say.ts';

/** Where the element sits: a message, or an open view (or published Home tab) by its id. */
export type Target = { readonly channel: string; readonly ts: string } | { readonly view: string };

type Place =
  | { kind: 'message'; message: Message; blocks: readonly Block[] }
  | { kind: 'view'; view: View; blocks: readonly Block[] };

/** @throws RangeError when there is no such message or view for this person */
function placeOf(desk: Desk, person: Person, target: Target): Place {
  if ('view' in target) {
    const view = desk.world.views.get(target.view);
    if (!view || view.user !== person.id || !isOpen(desk.world, view)) {
      throw new RangeError(`${person.realName} has no open view ${target.view}`);
    }
    return { kind: 'view', view, blocks: view.content.blocks };
  }
  const message = findMessage(desk.world, target.channel, target.ts);
  if (!message || (message.onlyFor !== undefined && message.onlyFor !== person.id)) {
    throw new RangeError(`${person.realName} sees no message ${target.ts} in ${target.channel}`);
  }
  return { kind: 'message', message, blocks: message.blocks ?? [] };
}

function stateAt(place: Place, person: Person): ElementValues {
  if (place.kind === 'view') return place.view.state;
  return stateOf(place.blocks, place.message.states.get(person.id));
}

/**
 * Puts a value into an element without telling the app, as typing into an input does.
 * @throws RangeError for an element or option that is not there
 */
export function fill(desk: Desk, person: Person, target: Target, actionId: string, choice: Choice, blockId?: string) {
  const place = placeOf(desk, person, target);
  const found = findElement(place.blocks, actionId, blockId);
  if (!found)
    throw new RangeError(`there is no element ${actionId}${blockId === undefined ? '' : ` in ${blockId}`} there`);
  const id = found.block.block_id ?? '';
  const value = valueFor(desk.world, found.element, choice);
  if (value !== undefined) {
    const before = stateAt(place, person);
    const state = { ...before, [id]: { ...before[id], [actionId]: value } };
    if (place.kind === 'view') place.view.state = state;
    else place.message.states.set(person.id, state);
    desk.world.publish({ kind: 'state' });
  }
  return { place, element: found.element, blockId: id, value };
}

/** Presses a button or makes a choice the app wants to hear of at once. */
export async function act(
  desk: Desk,
  person: Person,
  target: Target,
  actionId: string,
  choice: Choice,
  blockId?: string,
): Promise<Outcome> {
  const { world } = desk;
  const { place, element, blockId: id, value } = fill(desk, person, target, actionId, choice, blockId);
  const action = actionFor(element, id, world.nextTs(), value, choice);
  const trigger = issueTrigger(world, person.team, person.id);
  const base = {
    type: 'block_actions',
    ...interactionBase(desk, person),
    trigger_id: trigger.id,
    state: { values: stateAt(place, person) },
    actions: [action],
  };
  if (place.kind === 'view') {
    const install = botOf(world, person.team);
    const view = presentView(world, place.view, { botId: install?.botId ?? '' });
    return desk.link.ask('interaction', { ...base, container: { type: 'view', view_id: view.id }, view });
  }
  const { message } = place;
  const ephemeral = message.onlyFor !== undefined;
  const { url } = issueResponseUrl(world, {
    user: person.id,
    channel: message.channel,
    source: { ts: message.ts },
    threadTs: message.threadTs,
  });
  const outcome = await desk.link.ask('interaction', {
    ...base,
    response_url: url,
    container: {
      type: 'message',
      message_ts: message.ts,
      channel_id: message.channel,
      is_ephemeral: ephemeral,
      ...(message.threadTs === undefined ? {} : { thread_ts: message.threadTs }),
    },
    channel: { id: message.channel, name: world.channels.get(message.channel)?.name || 'directmessage' },
    ...(ephemeral ? {} : { message: presentMessage(world, message) }),
  });
  if (!outcome.ok)
    notice(world, message.channel, person.id, failureWords(outcome.error), message.threadTs ?? message.ts);
  return outcome;
}

export function failureWords(error: string): string {
  const words: Record<string, string> = {
    operation_timeout: 'The bot did not answer within three seconds (`operation_timeout`).',
    dispatch_failed: 'The bot could not take that (`dispatch_failed`). Its log says more.',
    app_unreachable: 'The bot is not running yet, so nothing happened.',
  };
  return words[error] ?? `That did not work (\`${error}\`).`;
}

/** Chooses an entry from a message's own menu. */
export async function messageShortcut(
  desk: Desk,
  person: Person,
  target: { channel: string; ts: string },
  callbackId: string,
) {
  const { world } = desk;
  const place = placeOf(desk, person, target);
  if (place.kind !== 'message') throw new RangeError('a message shortcut needs a message');
  const { message } = place;
  const { url } = issueResponseUrl(world, {
    user: person.id,
    channel: message.channel,
    source: { ts: message.ts },
    threadTs: message.threadTs,
  });
  const outcome = await desk.link.ask('interaction', {
    type: 'message_action',
    ...interactionBase(desk, person),
    action_ts: world.nextTs(),
    callback_id: callbackId,
    trigger_id: issueTrigger(world, person.team, person.id).id,
    response_url: url,
    message_ts: message.ts,
    channel: { id: message.channel, name: world.channels.get(message.channel)?.name || 'directmessage' },
    message: presentMessage(world, message),
  });
  if (!outcome.ok) notice(world, message.channel, person.id, failureWords(outcome.error));
  return outcome;
}

export function globalShortcut(desk: Desk, person: Person, callbackId: string): Promise<Outcome> {
  const { world } = desk;
  return desk.link.ask('interaction', {
    type: 'shortcut',
    ...interactionBase(desk, person),
    action_ts: world.nextTs(),
    callback_id: callbackId,
    trigger_id: issueTrigger(world, person.team, person.id).id,
  });
}
