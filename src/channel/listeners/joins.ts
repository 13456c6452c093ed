import type { App } from '@slack/bolt';
import { entry } from '../inbox.ts';
import type { ChannelDeps } from '../types.ts';

/** The bot was brought into a channel; other people's coming and going is none of its business. */
export function listenToJoins(app: App, deps: ChannelDeps): void {
  app.event('member_joined_channel', async ({ event, body, context }) => {
    if (event.user !== context.botUserId) return;
    const keys = { event: body.event_id, about: [event.channel, event.event_ts] };
    await deps.store.receive(entry('joined', body.team_id, keys, { channel: event.channel }));
  });
}
