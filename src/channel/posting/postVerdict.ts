import { setTimeout as pause } from 'node:timers/promises';
import type { WebClient } from '@slack/web-api';
import type { Logger } from 'pino';
import type { HostRule } from '../download/hosts.ts';
import { shareFailedMessage } from '../messages/plainMessages.ts';
import { plainLine, shortened } from '../messages/text.ts';
import { type Said, type UnderstoodWords, verdictMessage } from '../messages/verdictMessage.ts';
import type { Poster } from './poster.ts';
import { uploadPicture } from './uploadPicture.ts';
import { mayPass, refusal, refusalDetails } from './webClient.ts';

/** Waits before a message is sent again whose picture the service is not ready to show. */
const SHOW_WAITS_MS = [200, 600, 1500, 3000] as const;

export interface VerdictPosting {
  readonly client: WebClient;
  readonly rule: HostRule;
  readonly poster: Poster;
  readonly log: Logger;
}

/**
 * Posts an answer with its picture as one message. When the service will not show the picture in a block, it is shared in the thread;
 * when it will not take it at all, the words stand alone: they carry the whole meaning.
 */
export async function postVerdict(
  posting: VerdictPosting,
  said: Said,
  words: UnderstoodWords | null,
  again: string,
): Promise<void> {
  const { poster } = posting;
  if ((await poster.posted('verdict')) !== undefined) return;
  const fileId = await uploaded(posting, said);
  if (fileId !== null && (await shown(posting, said, words, fileId, again))) return;
  await poster.post('verdict', verdictMessage(said, words, null, again));
  if (said.picture && !(await shared(posting, said))) await poster.post('no-picture', shareFailedMessage());
}

/** The picture's file id; null when there is none or the service refuses it. */
async function uploaded({ client, rule, poster, log }: VerdictPosting, said: Said): Promise<string | null> {
  if (!said.picture) return null;
  const before = await poster.posted('picture');
  if (before !== undefined) return before;
  try {
    const id = await uploadPicture(client, rule, said.picture, nameOf(said), null);
    await poster.remember('picture', id);
    return id;
  } catch (error) {
    if (mayPass(error)) throw error;
    log.warn(
      { err: error, refusal: refusal(error) },
      'the picture could not be uploaded; the verdict goes out in words',
    );
    return null;
  }
}

async function shown(
  { poster, log }: VerdictPosting,
  said: Said,
  words: UnderstoodWords | null,
  fileId: string,
  again: string,
): Promise<boolean> {
  for (const wait of [...SHOW_WAITS_MS, null]) {
    try {
      await poster.post('verdict', verdictMessage(said, words, fileId, again));
      return true;
    } catch (error) {
      const aboutPicture =
        refusal(error) === 'invalid_blocks' && refusalDetails(error).some((line) => line.includes('slack'));
      if (!aboutPicture) throw error;
      if (wait !== null) await pause(wait);
      else
        log.warn(
          { refusal: refusalDetails(error) },
          'the picture is not shown in the message; it is shared in the thread',
        );
    }
  }
  return false;
}

async function shared({ client, rule, poster, log }: VerdictPosting, said: Said): Promise<boolean> {
  if (!said.picture) return true;
  if ((await poster.posted('share')) !== undefined) return true;
  try {
    await poster.remember('share', await uploadPicture(client, rule, said.picture, nameOf(said), poster.place));
    return true;
  } catch (error) {
    log.warn({ err: error, refusal: refusal(error) }, 'the picture could not be shared either');
    return false;
  }
}

function nameOf(said: Said): { name: string; title: string } {
  return { name: 'churn.png', title: shortened(plainLine(said.headline), 200) };
}
