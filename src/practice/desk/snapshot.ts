/** What one person may see of the world, for the page. */

import { fileByRef } from '../api/method.ts';
import { botOf } from '../delivery/events.ts';
import type { Desk } from '../people/desk.ts';
import type { Block, SlackFileRef } from '../wire/blocks.ts';
import type { PageChannel, PageFile, PageMessage, PageSnapshot, PageView } from '../wire/snapshot.ts';
import { stateOf } from '../world/elementState.ts';
import { isShowableImage } from '../world/files.ts';
import { topView } from '../world/views.ts';
import type { Channel, Message, Person, StoredFile, View, World } from '../world/world.ts';

export interface Sample {
  readonly name: string;
  readonly description: string;
  readonly path: string;
}

export function snapshotFor(desk: Desk, person: Person, samples: readonly Sample[]): PageSnapshot {
  const { world, link } = desk;
  const install = botOf(world, person.team);
  const bot = install?.botUser ?? '';
  const pictures: Record<string, PageFile> = {};
  const noting = (blocks: readonly Block[]) => {
    for (const ref of pictureRefs(blocks)) {
      const file = fileByRef(world, person.team, ref);
      if (file) pictures[ref.id ?? ref.url ?? ''] = pageFile(file);
    }
    return blocks;
  };
  const channels = [...world.channels.values()]
    .filter((c) => c.team === person.team && (c.kind === 'public' || c.members.has(person.id)))
    .map((c) => pageChannel(world, c, person, bot, noting));
  const modal = topView(world, person.id);
  const home = world.views.get(world.homes.get(person.id) ?? '');
  return {
    workspace: world.teams.get(person.team)?.name ?? '',
    me: person.id,
    hasWritten: world.writers.has(person.id),
    bot,
    people: [...world.people.values()]
      .filter((p) => p.team === person.team)
      .map((p) => ({ id: p.id, name: p.realName, role: p.role, timeZone: p.timeZone, isBot: p.isBot })),
    channels,
    modal: modal ? pageView(world, modal, noting) : null,
    home: home ? pageView(world, home, noting) : null,
    samples: samples.map(({ name, description }) => ({ name, description })),
    shortcuts: desk.shortcuts,
    commands: desk.commands,
    pictures,
    appIsReachable: link.isReachable(),
    waiting: link.deliveries.filter((d) => d.state === 'waiting').length,
  };
}

function pageChannel(
  world: World,
  channel: Channel,
  person: Person,
  bot: string,
  noting: (blocks: readonly Block[]) => readonly Block[],
): PageChannel {
  return {
    id: channel.id,
    name: channel.kind === 'direct' ? `${world.people.get(bot)?.realName ?? 'bot'}, just you` : channel.name,
    purpose: channel.kind === 'direct' ? 'A channel that only you and the bot can read.' : channel.purpose,
    isDirect: channel.kind === 'direct',
    botIsMember: channel.members.has(bot),
    messages: world.messages
      .filter((m) => m.channel === channel.id && (m.onlyFor === undefined || m.onlyFor === person.id))
      .map((m) => pageMessage(world, m, person, noting)),
  };
}

function pageMessage(
  world: World,
  message: Message,
  person: Person,
  noting: (blocks: readonly Block[]) => readonly Block[],
): PageMessage {
  return {
    channel: message.channel,
    ts: message.ts,
    threadTs: message.threadTs ?? null,
    user: message.user,
    text: message.text,
    blocks: noting(message.blocks ?? []),
    files: message.fileIds.flatMap((id) => {
      const file = world.files.get(id);
      return file ? [pageFile(file)] : [];
    }),
    edited: message.editedTs !== undefined,
    onlyForYou: message.onlyFor === person.id,
    notice: message.notice,
    reactions: [...message.reactions].map(([name, users]) => ({ name, users: [...users] })),
    state: stateOf(message.blocks ?? [], message.states.get(person.id)),
  };
}

export function pageFile(file: StoredFile): PageFile {
  return {
    id: file.id,
    name: file.name,
    title: file.title,
    size: file.size,
    isImage: isShowableImage(file),
    altText: file.altText ?? '',
    url: `/page/file/${file.id}`,
    deleted: file.deleted,
  };
}

function pageView(world: World, view: View, noting: (blocks: readonly Block[]) => readonly Block[]): PageView {
  const modal = view.content.type === 'modal' ? view.content : undefined;
  return {
    id: view.id,
    hash: view.hash,
    type: view.content.type,
    title: modal?.title.text ?? '',
    submit: modal?.submit?.text ?? null,
    close: modal?.close?.text ?? null,
    blocks: noting(view.content.blocks),
    state: view.state,
    depth: world.stacks.get(view.user)?.length ?? 0,
  };
}

function pictureRefs(blocks: readonly Block[]): SlackFileRef[] {
  return blocks.flatMap((block) => {
    if (block.type === 'image') return block.slack_file ? [block.slack_file] : [];
    if (block.type === 'section') {
      return block.accessory?.type === 'image' && block.accessory.slack_file ? [block.accessory.slack_file] : [];
    }
    if (block.type === 'context') {
      return block.elements.flatMap((e) => (e.type === 'image' && e.slack_file ? [e.slack_file] : []));
    }
    return [];
  });
}
