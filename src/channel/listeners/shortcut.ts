import type { App, MessageShortcut } from '@slack/bolt';
import { z } from 'zod';
import { entry } from '../inbox.ts';
import { SHORTCUT_READ } from '../names.ts';
import type { ChannelDeps } from '../types.ts';

const messageSchema = z.object({
  ts: z.string(),
  thread_ts: z.string().optional(),
  files: z.array(z.object({ id: z.string() })).optional(),
});

/** "Read this file" on a message: reads each of its files, also one that was read or left alone before. */
export function listenToShortcut(app: App, deps: ChannelDeps, background: (work: Promise<unknown>) => void): void {
  app.shortcut<MessageShortcut>(
    { callback_id: SHORTCUT_READ, type: 'message_action' },
    async ({ ack, shortcut, respond }) => {
      const message = messageSchema.parse(shortcut.message);
      const files = message.files ?? [];
      const teamId = shortcut.team?.id ?? shortcut.user.team_id;
      if (files.length > 0 && teamId) {
        for (const file of files) {
          const asked = `${shortcut.action_ts}#${shortcut.trigger_id}`;
          await deps.store.receive(
            entry(
              'file',
              teamId,
              { event: `shortcut#${asked}#${file.id}`, about: [shortcut.channel.id, file.id, message.ts, asked] },
              {
                channel: shortcut.channel.id,
                threadTs: message.thread_ts ?? message.ts,
                user: shortcut.user.id,
                fileId: file.id,
                mentioned: true,
                question: '',
                alone: files.length === 1,
              },
            ),
          );
        }
      } else {
        background(
          respond({
            response_type: 'ephemeral',
            text: 'That message holds no file. Use this on a message with an export in it.',
          }),
        );
      }
      await ack();
    },
  );
}
