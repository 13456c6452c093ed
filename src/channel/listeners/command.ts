import type { App } from '@slack/bolt';
import { understand } from '../../requests/understand.ts';
import { entry } from '../inbox.ts';
import { helpMessage } from '../messages/plainMessages.ts';
import { COMMAND } from '../names.ts';
import { plainWords } from '../plainWords.ts';
import type { ChannelDeps } from '../types.ts';

/** The slash command: help is answered at once and for the asker alone; a question goes through the inbox. */
export function listenToCommand(app: App, deps: ChannelDeps): void {
  app.command(COMMAND, async ({ ack, command }) => {
    const text = plainWords(command.text);
    const asked = understand(text, { today: 0, segments: [] });
    if (text === '' || (asked.request.kind === 'help' && asked.notUnderstood.length === 0)) {
      const help = helpMessage();
      await ack({ response_type: 'ephemeral', text: help.text, blocks: help.blocks });
      return;
    }
    const keys = { event: `command#${command.trigger_id}`, about: [command.channel_id, command.trigger_id] };
    await deps.store.receive(
      entry('command', command.team_id, keys, {
        channel: command.channel_id,
        user: command.user_id,
        text,
        responseUrl: command.response_url,
      }),
    );
    await ack();
  });
}
