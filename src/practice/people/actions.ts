/** Everything one person can do, bound to that person. */
import type { Outcome } from '../delivery/appLink.ts';
import { botOf } from '../delivery/events.ts';
import type { WireMessage } from '../wire/objects.ts';
import { editMessage, findMessage, react, removeMessage } from '../world/messages.ts';
import { presentMessage } from '../world/present.ts';
import { topView } from '../world/views.ts';
import type { Message, Person, View } from '../world/world.ts';
import type { Desk } from './desk.ts';
import type { Choice } from './elements.ts';
import { act, fill, globalShortcut, messageShortcut, type Target } from './interact.ts';
import { closeView, type SubmitOutcome, submitView } from './modal.ts';
import { channelFor, type DroppedFile, invite, say, share, takeIn } from './say.ts';
import { slash } from './slash.ts';
import { storedText } from './typed.ts';

export interface MessageRef {
  readonly channel: string;
  readonly ts: string;
}

/** Channels are named by id, by `#name` or `name`, or `direct` for the person's own channel with the bot. */
export interface PersonActions {
  readonly id: string;
  say(channel: string, text: string, options?: { threadTs?: string }): WireMessage & MessageRef;
  drop(
    channel: string,
    files: readonly DroppedFile[],
    options?: { text?: string; threadTs?: string },
  ): WireMessage & MessageRef;
  /** changes one of the person's own messages */
  edit(message: MessageRef, text: string): void;
  remove(message: MessageRef): void;
  react(message: MessageRef, reaction: string, added?: boolean): void;
  press(target: Target, actionId: string, blockId?: string): Promise<Outcome>;
  choose(target: Target, actionId: string, choice: Choice, blockId?: string): Promise<Outcome>;
  /** puts a value in without telling the app; file inputs take dropped files */
  fill(target: Target, actionId: string, choice: Choice | readonly DroppedFile[], blockId?: string): void;
  /** the modal on top, if any */
  modal(): View | undefined;
  submit(viewId?: string): Promise<SubmitOutcome>;
  closeModal(options?: { viewId?: string; all?: boolean }): Promise<void>;
  /** @param line with or without the command: 'help' is sent as the first known command */
  slash(channel: string, line: string): Promise<Outcome>;
  messageShortcut(message: MessageRef, callbackId: string): Promise<Outcome>;
  globalShortcut(callbackId: string): Promise<Outcome>;
  openHome(tab?: 'home' | 'messages'): void;
  invite(channel: string, user?: string): void;
}

export function actionsOf(desk: Desk, person: Person): PersonActions {
  const { world } = desk;
  const shown = (message: Message) => ({ ...presentMessage(world, message), channel: message.channel });
  const own = (ref: MessageRef) => {
    const message = findMessage(world, channelFor(world, person, ref.channel).id, ref.ts);
    if (!message || message.user !== person.id) throw new RangeError(`${person.realName} has written no such message`);
    return message;
  };
  return {
    id: person.id,
    say: (channel, text, options) => shown(say(world, person, channel, text, options?.threadTs)),
    drop: (channel, files, options) =>
      shown(
        share(
          world,
          person,
          channel,
          files.map((file) => takeIn(world, person, file)),
          { text: options?.text, threadTs: options?.threadTs },
        ),
      ),
    edit: (ref, text) => editMessage(world, own(ref), { text: storedText(world, person.team, text) }),
    remove: (ref) => removeMessage(world, own(ref)),
    react: (ref, reaction, added = true) => {
      const message = findMessage(world, ref.channel, ref.ts);
      if (!message) throw new RangeError('there is no such message');
      react(world, message, person.id, reaction, added);
    },
    press: (target, actionId, blockId) => act(desk, person, target, actionId, null, blockId),
    choose: (target, actionId, choice, blockId) => act(desk, person, target, actionId, choice, blockId),
    fill: (target, actionId, choice, blockId) => {
      const values =
        choice === null || typeof choice === 'string'
          ? choice
          : choice.map((item) => (typeof item === 'string' ? item : takeIn(world, person, item).id));
      fill(desk, person, target, actionId, values, blockId);
    },
    modal: () => topView(world, person.id),
    submit: (viewId) => submitView(desk, person, viewId),
    closeModal: (options) => closeView(desk, person, options?.viewId, options?.all),
    slash: (channel, line) =>
      slash(desk, person, channel, line.startsWith('/') ? line : `${desk.commands[0] ?? '/ebb'} ${line}`),
    messageShortcut: (ref, callbackId) => messageShortcut(desk, person, ref, callbackId),
    globalShortcut: (callbackId) => globalShortcut(desk, person, callbackId),
    openHome: (tab = 'home') => world.publish({ kind: 'home-opened', user: person.id, tab }),
    invite: (channel, user) => invite(world, person, channel, user ?? botOf(world, person.team)?.botUser ?? ''),
  };
}
