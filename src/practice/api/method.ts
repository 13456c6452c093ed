/** What every method of the API is made of: the scopes it needs, and what it does in the world. */
import type { SlackFileRef } from '../wire/blocks.ts';
import type { FileCheck } from '../wire/checkBlocks.ts';
import { Refusal } from '../wire/refusal.ts';
import type { MethodName, Request } from '../wire/requests.ts';
import { isShowableImage } from '../world/files.ts';
import type { Channel, Install, Person, StoredFile, World } from '../world/world.ts';

export interface Call {
  readonly world: World;
  readonly install: Install;
  /** address for a new socket mode connection */
  readonly socketUrl: () => string;
}

export interface Method<M extends MethodName> {
  /** any one of these is enough; empty means none is needed */
  readonly scopes: readonly string[];
  readonly token: 'bot' | 'app';
  readonly run: (call: Call, args: Request<M>) => Record<string, unknown>;
}

export type MethodTable = { readonly [M in MethodName]: Method<M> };

/** @throws Refusal `channel_not_found`: also for another workspace's channel, whose existence is not given away */
export function channelOf({ world, install }: Call, id: string): Channel {
  const channel = world.channels.get(id.replace(/^#/, ''));
  const found = channel ?? [...world.channels.values()].find((c) => c.team === install.team && `#${c.name}` === id);
  if (!found || found.team !== install.team) throw new Refusal('channel_not_found');
  return found;
}

/** @throws Refusal `not_in_channel` or `is_archived` */
export function memberChannel(call: Call, id: string): Channel {
  const channel = channelOf(call, id);
  if (!channel.members.has(call.install.botUser)) throw new Refusal('not_in_channel');
  if (channel.archived) throw new Refusal('is_archived');
  return channel;
}

export function personOf({ world, install }: Call, id: string): Person {
  const person = world.people.get(id);
  if (!person || person.team !== install.team) throw new Refusal('user_not_found');
  return person;
}

export function fileOf({ world, install }: Call, id: string): StoredFile {
  const file = world.files.get(id);
  if (!file || file.team !== install.team) throw new Refusal('file_not_found');
  if (file.deleted) throw new Refusal('file_deleted');
  return file;
}

/** A picture may be named by id, or by its private address or permalink. */
export function fileByRef(world: World, team: string, ref: SlackFileRef): StoredFile | undefined {
  const id = ref.id ?? /\/(?:files-pri\/[A-Z0-9]+-|files\/[A-Z0-9]+\/)(F[A-Z0-9]{8,})\//.exec(ref.url ?? '')?.[1];
  const file = id === undefined ? undefined : world.files.get(id);
  return file?.team === team ? file : undefined;
}

export function fileCheck(world: World, team: string): FileCheck {
  return (ref) => {
    const file = fileByRef(world, team, ref);
    return file !== undefined && file.pollsLeft <= 0 && isShowableImage(file);
  };
}
