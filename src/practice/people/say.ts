/** What people in the workspace do with messages and files. */
import { closeSync, openSync, readSync, statSync } from 'node:fs';
import { basename } from 'node:path';
import { botOf } from '../delivery/events.ts';
import { addFile, shareFiles } from '../world/files.ts';
import { postMessage } from '../world/messages.ts';
import type { Channel, Message, Person, StoredFile, World } from '../world/world.ts';
import { storedText } from './typed.ts';

export type DroppedFile =
  | { readonly name: string; readonly bytes: Uint8Array }
  | { readonly name: string; readonly text: string }
  | { readonly name?: string; readonly path: string };

/** @throws RangeError for a person or channel that is not in the workspace */
export function channelFor(world: World, person: Person, name: string): Channel {
  const plain = name.replace(/^#/, '');
  for (const channel of world.channels.values()) {
    if (channel.team !== person.team) continue;
    if (channel.id === plain || (channel.name === plain && plain !== '')) return channel;
    const mine = channel.kind === 'direct' && channel.members.has(person.id);
    if (plain === 'direct' && mine && channel.members.has(botOf(world, person.team)?.botUser ?? '')) return channel;
  }
  throw new RangeError(`there is no channel "${name}" in the practice workspace`);
}

export function say(world: World, person: Person, channelName: string, text: string, threadTs?: string): Message {
  const channel = channelFor(world, person, channelName);
  joinIfNeeded(world, channel, person);
  const message = postMessage(world, {
    channel: channel.id,
    user: person.id,
    text: storedText(world, person.team, text),
    threadTs,
  });
  explainAbsentBot(world, channel, message);
  return message;
}

export function takeIn(world: World, person: Person, dropped: DroppedFile): StoredFile {
  const place = { team: person.team, user: person.id, pollsLeft: 0 };
  if ('path' in dropped) {
    return addFile(world, {
      ...place,
      name: dropped.name ?? basename(dropped.path),
      size: statSync(dropped.path).size,
      head: headOf(dropped.path),
      content: { path: dropped.path },
    });
  }
  const bytes = 'bytes' in dropped ? dropped.bytes : new TextEncoder().encode(dropped.text);
  return addFile(world, {
    ...place,
    name: dropped.name,
    size: bytes.byteLength,
    head: bytes.subarray(0, 16),
    content: { bytes },
  });
}

function headOf(path: string): Uint8Array {
  const handle = openSync(path, 'r');
  try {
    const head = new Uint8Array(16);
    return head.subarray(0, readSync(handle, head, 0, head.length, 0));
  } finally {
    closeSync(handle);
  }
}

export function share(
  world: World,
  person: Person,
  channelName: string,
  files: readonly StoredFile[],
  options: { text?: string | undefined; threadTs?: string | undefined } = {},
): Message {
  const channel = channelFor(world, person, channelName);
  joinIfNeeded(world, channel, person);
  const message = shareFiles(world, files, {
    channel: channel.id,
    user: person.id,
    text: storedText(world, person.team, options.text ?? ''),
    threadTs: options.threadTs,
  });
  explainAbsentBot(world, channel, message);
  return message;
}

export function invite(world: World, inviter: Person, channelName: string, user: string): void {
  const channel = channelFor(world, inviter, channelName);
  if (channel.members.has(user)) return;
  channel.members.add(user);
  world.publish({ kind: 'joined', channel, user, inviter: inviter.id });
}

/** A line from the practice service itself that only one person sees. */
export function notice(world: World, channel: string, onlyFor: string, text: string, threadTs?: string): void {
  postMessage(world, { channel, user: onlyFor, text, onlyFor, notice: true, threadTs });
}

function joinIfNeeded(world: World, channel: Channel, person: Person): void {
  if (channel.members.has(person.id) || channel.kind !== 'public') return;
  channel.members.add(person.id);
  world.publish({ kind: 'joined', channel, user: person.id, inviter: undefined });
}

/** Without this a newcomer would wait for an answer that cannot come. */
function explainAbsentBot(world: World, channel: Channel, message: Message): void {
  const install = botOf(world, channel.team);
  if (!install || channel.members.has(install.botUser) || !message.text.includes(`<@${install.botUser}>`)) return;
  notice(
    world,
    channel.id,
    message.user,
    `<@${install.botUser}> is not in this channel, so it has not seen what you wrote. Bring it in first.`,
    message.threadTs,
  );
}
