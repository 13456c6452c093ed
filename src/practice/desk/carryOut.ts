/** Doing what the page asks, as the person it says it is: everyone on this machine may be anyone in the practice workspace. */

import { botOf } from '../delivery/events.ts';
import type { Desk } from '../people/desk.ts';
import { act, fill, messageShortcut } from '../people/interact.ts';
import { closeView, submitView } from '../people/modal.ts';
import { invite, notice, say, share, takeIn } from '../people/say.ts';
import { slash } from '../people/slash.ts';
import { findMessage, react, removeMessage } from '../world/messages.ts';
import type { Person } from '../world/world.ts';
import type { PageRequest } from './requests.ts';
import type { Sample } from './snapshot.ts';

/** @returns what the page should know beyond the next snapshot, such as a form's errors */
export async function carryOut(
  desk: Desk,
  person: Person,
  ask: PageRequest,
  samples: readonly Sample[],
): Promise<unknown> {
  const { world } = desk;
  if (ask.do === 'say' || ask.do === 'share') world.writers.add(person.id);
  switch (ask.do) {
    case 'say': {
      const isCommand =
        desk.commands.some((c) => ask.text === c || ask.text.startsWith(`${c} `)) || /^\/\w/.test(ask.text);
      if (!isCommand) return { ts: say(world, person, ask.channel, ask.text, ask.threadTs).ts };
      if (ask.threadTs !== undefined) {
        notice(
          world,
          ask.channel,
          person.id,
          'Slash commands do not work inside threads, here as in the real service. Mention @ebbline instead.',
          ask.threadTs,
        );
        return {};
      }
      await slash(desk, person, ask.channel, ask.text);
      return {};
    }
    case 'share': {
      const files = ask.files.flatMap((id) => {
        const file = world.files.get(id);
        return file && file.user === person.id ? [file] : [];
      });
      return { ts: share(world, person, ask.channel, files, { text: ask.text, threadTs: ask.threadTs }).ts };
    }
    case 'sample': {
      const sample = samples.find((s) => s.name === ask.name);
      if (!sample) throw new RangeError(`there is no sample export "${ask.name}"`);
      return { ts: share(world, person, ask.channel, [takeIn(world, person, { path: sample.path })]).ts };
    }
    case 'act':
      return act(desk, person, ask.target, ask.actionId, ask.choice, ask.blockId);
    case 'fill':
      fill(desk, person, ask.target, ask.actionId, ask.choice, ask.blockId);
      return {};
    case 'submit':
      return submitView(desk, person, ask.view);
    case 'close':
      await closeView(desk, person, ask.view, ask.all);
      return {};
    case 'shortcut':
      return messageShortcut(desk, person, ask, ask.callbackId);
    case 'react': {
      const message = findMessage(world, ask.channel, ask.ts);
      if (message) react(world, message, person.id, ask.reaction, ask.added);
      return {};
    }
    case 'remove': {
      const message = findMessage(world, ask.channel, ask.ts);
      // Own messages, and what only this person sees.
      if (message && (message.user === person.id || message.onlyFor === person.id)) removeMessage(world, message);
      return {};
    }
    case 'invite':
      invite(world, person, ask.channel, botOf(world, person.team)?.botUser ?? '');
      return {};
    case 'home':
      world.publish({ kind: 'home-opened', user: person.id, tab: 'home' });
      return {};
  }
}
