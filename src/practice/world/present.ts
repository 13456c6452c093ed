/** From stored state to the objects the app is shown. */
import type { WireFile, WireMessage, WireShare, WireView } from '../wire/objects.ts';
import type { Channel, Install, Message, Person, StoredFile, View, World } from './world.ts';

export function presentFile(world: World, file: StoredFile): WireFile {
  const processed = file.pollsLeft <= 0;
  const open: Record<string, WireShare[]> = {};
  const closed: Record<string, WireShare[]> = {};
  for (const share of processed ? file.shares : []) {
    const channel = world.channels.get(share.channel);
    const group = channel?.kind === 'public' ? open : closed;
    const entry: WireShare = {
      ts: share.ts,
      ...(share.threadTs === undefined ? {} : { thread_ts: share.threadTs }),
      channel_name: channel?.name ?? '',
      team_id: file.team,
      share_user_id: file.user,
    };
    group[share.channel] = [...(group[share.channel] ?? []), entry];
  }
  const within = (kind: Channel['kind']) =>
    processed ? file.shares.map((s) => s.channel).filter((id) => world.channels.get(id)?.kind === kind) : [];
  const created = Math.floor(file.createdMs / 1000);
  const address = `${world.baseUrl}/files-pri/${file.team}-${file.id}`;
  return {
    id: file.id,
    created,
    timestamp: created,
    name: file.name,
    title: file.title,
    mimetype: processed ? file.mimetype : '',
    filetype: processed ? file.filetype : '',
    pretty_type: processed ? file.filetype.toUpperCase() : '',
    size: file.size,
    mode: file.deleted ? 'tombstone' : 'hosted',
    user: file.user,
    user_team: file.team,
    is_external: false,
    external_type: '',
    is_public: Object.keys(open).length > 0,
    url_private: `${address}/${encodeURIComponent(file.name)}`,
    url_private_download: `${address}/download/${encodeURIComponent(file.name)}`,
    permalink: `${world.baseUrl}/files/${file.user}/${file.id}/${encodeURIComponent(file.name)}`,
    ...(file.altText === undefined ? {} : { alt_txt: file.altText }),
    channels: within('public'),
    groups: within('private'),
    ims: within('direct'),
    shares: {
      ...(Object.keys(open).length > 0 ? { public: open } : {}),
      ...(Object.keys(closed).length > 0 ? { private: closed } : {}),
    },
  };
}

export function presentMessage(world: World, message: Message): WireMessage {
  const files = message.fileIds.flatMap((id) => {
    const file = world.files.get(id);
    return file ? [presentFile(world, file)] : [];
  });
  const team = world.people.get(message.user)?.team ?? '';
  const replies = world.messages.filter(
    (m) => m.channel === message.channel && m.threadTs === message.ts && m.ts !== message.ts && !m.onlyFor,
  ).length;
  return {
    type: 'message',
    ...(message.subtype === undefined ? {} : { subtype: message.subtype }),
    user: message.user,
    text: message.text,
    ts: message.ts,
    team,
    ...(message.threadTs === undefined
      ? replies > 0
        ? { thread_ts: message.ts }
        : {}
      : { thread_ts: message.threadTs }),
    ...(message.botId === undefined ? {} : { bot_id: message.botId, app_id: world.appId }),
    ...(message.blocks === undefined ? {} : { blocks: message.blocks }),
    ...(files.length > 0 ? { files, upload: true } : {}),
    ...(message.editedTs === undefined ? {} : { edited: { user: message.user, ts: message.editedTs } }),
    ...(message.reactions.size > 0
      ? {
          reactions: [...message.reactions].map(([name, users]) => ({ name, users: [...users], count: users.size })),
        }
      : {}),
    ...(replies > 0 ? { reply_count: replies } : {}),
    ...(message.metadata === undefined ? {} : { metadata: message.metadata }),
  };
}

export function presentView(world: World, view: View, install: Pick<Install, 'botId'>): WireView {
  const { content } = view;
  const modal = content.type === 'modal' ? content : undefined;
  return {
    id: view.id,
    team_id: view.team,
    type: content.type,
    callback_id: content.callback_id ?? '',
    private_metadata: content.private_metadata ?? '',
    hash: view.hash,
    state: { values: view.state },
    blocks: content.blocks,
    external_id: content.external_id ?? '',
    root_view_id: view.rootId,
    previous_view_id: view.previousId,
    app_id: world.appId,
    bot_id: install.botId,
    app_installed_team_id: view.team,
    ...(modal ? { title: modal.title, submit: modal.submit ?? null, close: modal.close ?? null } : {}),
    clear_on_close: modal?.clear_on_close ?? false,
    notify_on_close: modal?.notify_on_close ?? false,
  };
}

export function presentChannel(channel: Channel, install: Pick<Install, 'botUser'>): Record<string, unknown> {
  return {
    id: channel.id,
    ...(channel.kind === 'direct'
      ? { user: [...channel.members].find((member) => member !== install.botUser) ?? '' }
      : { name: channel.name, name_normalized: channel.name }),
    is_channel: channel.kind === 'public',
    is_group: channel.kind === 'private',
    is_im: channel.kind === 'direct',
    is_mpim: false,
    is_private: channel.kind !== 'public',
    is_member: channel.members.has(install.botUser),
    is_archived: channel.archived,
    is_ext_shared: false,
    is_shared: false,
    context_team_id: channel.team,
    purpose: { value: channel.purpose, creator: '', last_set: 0 },
    topic: { value: '', creator: '', last_set: 0 },
    num_members: channel.members.size,
  };
}

/** Seconds east of UTC at that moment. */
export function zoneOffsetSeconds(timeZone: string, atMs: number): number {
  const parts = new Intl.DateTimeFormat('en-US', { timeZone, timeZoneName: 'longOffset' }).formatToParts(
    new Date(atMs),
  );
  const match = /GMT([+-])(\d{2}):(\d{2})/.exec(parts.find((p) => p.type === 'timeZoneName')?.value ?? '');
  if (!match) return 0;
  const seconds = Number(match[2]) * 3600 + Number(match[3]) * 60;
  return match[1] === '-' ? -seconds : seconds;
}

export function presentPerson(person: Person, nowMs: number): Record<string, unknown> {
  return {
    id: person.id,
    team_id: person.team,
    name: person.name,
    real_name: person.realName,
    deleted: false,
    is_bot: person.isBot,
    ...(person.isBot
      ? {}
      : {
          tz: person.timeZone,
          tz_label: new Intl.DateTimeFormat('en-GB', { timeZone: person.timeZone, timeZoneName: 'long' })
            .formatToParts(new Date(nowMs))
            .find((p) => p.type === 'timeZoneName')?.value,
          tz_offset: zoneOffsetSeconds(person.timeZone, nowMs),
        }),
    profile: { display_name: person.realName, real_name: person.realName, title: person.role },
  };
}
