/** Reading the practice world from outside: what tests look at. */
import type { ApiCallRecord } from './api/dispatch.ts';
import type { Delivery } from './delivery/appLink.ts';
import type { WireFile, WireMessage } from './wire/objects.ts';
import { presentFile, presentMessage } from './world/present.ts';
import { topView } from './world/views.ts';
import type { Channel, Person, View, World } from './world/world.ts';

export interface SeenMessage extends WireMessage {
  readonly channel: string;
  /** the one reader of an ephemeral message */
  readonly onlyFor: string | undefined;
  /** a line from the practice service itself */
  readonly notice: boolean;
}

export interface WorldReader {
  /** in the order posted; all channels when none is named */
  messages(channel?: string): SeenMessage[];
  /** the first message and its replies */
  thread(channel: string, ts: string): SeenMessage[];
  files(): WireFile[];
  fileContent(id: string): Uint8Array | { readonly path: string } | undefined;
  /** the modal on top for a person (by id or name) */
  modal(person: string): View | undefined;
  home(person: string): View | undefined;
  channel(name: string): Channel;
  person(name: string): Person;
  readonly deliveries: readonly Delivery[];
  readonly calls: readonly ApiCallRecord[];
}

export function createReader(
  world: World,
  deliveries: readonly Delivery[],
  calls: readonly ApiCallRecord[],
): WorldReader {
  const channel = (name: string) => {
    const plain = name.replace(/^#/, '');
    const found =
      world.channels.get(plain) ?? [...world.channels.values()].find((c) => c.name !== '' && c.name === plain);
    if (!found) throw new RangeError(`there is no channel "${name}"`);
    return found;
  };
  const person = (name: string) => {
    const found = world.people.get(name) ?? [...world.people.values()].find((p) => p.name === name.toLowerCase());
    if (!found) throw new RangeError(`there is no person "${name}"`);
    return found;
  };
  const messages = (name?: string) => {
    const only = name === undefined ? undefined : channel(name).id;
    return world.messages
      .filter((m) => only === undefined || m.channel === only)
      .map((m) => ({
        ...presentMessage(world, m),
        channel: m.channel,
        onlyFor: m.onlyFor,
        notice: m.notice,
      }));
  };
  return {
    messages,
    thread: (name, ts) => messages(name).filter((m) => m.ts === ts || m.thread_ts === ts),
    files: () => [...world.files.values()].filter((f) => !f.deleted).map((f) => presentFile(world, f)),
    fileContent: (id) => {
      const content = world.files.get(id)?.content;
      return content && ('bytes' in content ? content.bytes : content);
    },
    modal: (name) => topView(world, person(name).id),
    home: (name) => world.views.get(world.homes.get(person(name).id) ?? ''),
    channel,
    person,
    deliveries,
    calls,
  };
}
