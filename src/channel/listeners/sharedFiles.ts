import type { App } from '@slack/bolt';
import { entry } from '../inbox.ts';
import type { ChannelDeps } from '../types.ts';

/**
 * Shared files, for workspaces in which the messages of a channel may not be read. Our own pictures come in here as well, and the
 * framework does not drop them: without this check the bot would answer itself for ever.
 */
export function listenToSharedFiles(app: App, deps: ChannelDeps): void {
  app.event('file_shared', async ({ event, body, context }) => {
    if (event.user_id === context.botUserId || !event.channel_id) return;
    await deps.store.receive(
      entry(
        'file-shared',
        body.team_id,
        { event: body.event_id, about: [event.channel_id, event.file_id, event.event_ts] },
        { channel: event.channel_id, fileId: event.file_id },
      ),
    );
  });
}
