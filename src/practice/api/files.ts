/** files.*: the three-step upload, looking a file up, removing it. */
import { checkMessageBlocks } from '../wire/checkBlocks.ts';
import { LIMITS } from '../wire/limits.ts';
import { Refusal } from '../wire/refusal.ts';
import { addFile, removeFile, shareFiles } from '../world/files.ts';
import { findMessage } from '../world/messages.ts';
import { presentFile } from '../world/present.ts';
import type { StoredFile } from '../world/world.ts';
import { fileCheck, fileOf, type MethodTable, memberChannel } from './method.ts';

export const files: Pick<
  MethodTable,
  'files.getUploadURLExternal' | 'files.completeUploadExternal' | 'files.info' | 'files.delete'
> = {
  'files.getUploadURLExternal': {
    scopes: ['files:write'],
    token: 'bot',
    run: ({ world, install }, args) => {
      if (args.length < 1)
        throw new Refusal('invalid_arguments', ['[ERROR] must be greater than 1 [json-pointer:/length]']);
      if ((args.alt_txt ?? '').length > LIMITS.fileAltText) throw new Refusal('alt_txt_too_large');
      const fileId = world.newId('F');
      world.uploads.set(fileId, {
        fileId,
        team: install.team,
        user: install.botUser,
        name: args.filename,
        length: args.length,
        altText: args.alt_txt,
        bytes: undefined,
        completed: false,
      });
      return { upload_url: `${world.baseUrl}/upload/v1/${fileId}`, file_id: fileId };
    },
  },
  'files.completeUploadExternal': {
    scopes: ['files:write'],
    token: 'bot',
    run: (call, args) => {
      const { world, install } = call;
      const targets = [args.channel_id, ...(args.channels?.split(',') ?? [])].filter((id) => id !== undefined);
      const channels = targets.map((id) => memberChannel(call, id.trim()));
      const tickets = args.files.map(({ id, title }) => {
        const ticket = world.uploads.get(id);
        if (!ticket || ticket.team !== install.team || ticket.bytes === undefined || ticket.completed) {
          throw new Refusal('file_not_found');
        }
        return { ticket, bytes: ticket.bytes, title };
      });
      if (args.thread_ts !== undefined) {
        if (channels.length !== 1)
          throw new Refusal('invalid_arguments', ['[ERROR] thread_ts needs exactly one channel']);
        if (!findMessage(world, channels[0]?.id ?? '', args.thread_ts)) throw new Refusal('invalid_thread_ts');
      }
      // With a comment the blocks are ignored; a markdown block brings the real service down.
      const wanted = args.initial_comment === undefined ? args.blocks : undefined;
      if (wanted?.some((b) => (b as { type?: unknown } | null)?.type === 'markdown'))
        throw new Refusal('internal_error');
      const blocks = wanted === undefined ? undefined : checkMessageBlocks(wanted, fileCheck(world, install.team));
      const made = tickets.map(({ ticket, bytes, title }): StoredFile => {
        ticket.completed = true;
        ticket.bytes = undefined;
        return addFile(world, {
          id: ticket.fileId,
          team: ticket.team,
          user: ticket.user,
          name: ticket.name,
          title,
          altText: ticket.altText,
          size: bytes.byteLength,
          head: bytes.subarray(0, 16),
          content: { bytes },
          pollsLeft: world.fileProcessingPolls,
        });
      });
      // Presented before the share: the real service answers before it has happened.
      const answer = { files: made.map((file) => presentFile(world, file)) };
      for (const channel of channels) {
        shareFiles(world, made, {
          channel: channel.id,
          user: install.botUser,
          botId: install.botId,
          text: args.initial_comment ?? '',
          threadTs: args.thread_ts,
          blocks,
        });
      }
      return answer;
    },
  },
  'files.info': {
    scopes: ['files:read'],
    token: 'bot',
    run: (call, args) => {
      const file = fileOf(call, args.file);
      const shown = presentFile(call.world, file);
      if (file.pollsLeft > 0) file.pollsLeft -= 1;
      return { file: shown, comments: [], response_metadata: { next_cursor: '' } };
    },
  },
  'files.delete': {
    scopes: ['files:write'],
    token: 'bot',
    run: (call, args) => {
      const file = fileOf(call, args.file);
      if (file.user !== call.install.botUser) throw new Refusal('cant_delete_file');
      removeFile(call.world, file);
      return {};
    },
  },
};
