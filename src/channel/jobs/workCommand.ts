import { isAllowed } from '../download/hosts.ts';
import type { Payload } from '../inbox.ts';
import { commandRoot } from '../messages/plainMessages.ts';
import { refusal } from '../posting/webClient.ts';
import { answerAsk } from './answerAsk.ts';
import { type Job, posterFor } from './context.ts';

/** Refusals that mean: the bot is not in the channel. */
const ABSENT = new Set(['not_in_channel', 'channel_not_found']);

/** A question from the slash command: opens a thread for it, since a command has no message of its own. */
export async function workCommand(job: Job, payload: Payload<'command'>): Promise<void> {
  const root = posterFor(job, { channel: payload.channel, threadTs: null });
  let threadTs: string;
  try {
    threadTs = await root.post('root', commandRoot(payload.user, payload.text));
  } catch (error) {
    if (!ABSENT.has(refusal(error) ?? '')) throw error;
    await respond(job, payload.responseUrl, 'I am not in this channel yet. Invite me (`/invite`), then ask again.');
    return;
  }
  await answerAsk(job, root.in({ channel: payload.channel, threadTs }), payload.text, payload.user);
}

/** The address that came with the command works without being in the channel. */
async function respond(job: Job, address: string, text: string): Promise<void> {
  const url = new URL(address);
  if (!isAllowed(url, job.rule)) return;
  const answer = await fetch(url, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({ response_type: 'ephemeral', text }),
    redirect: 'error',
    signal: AbortSignal.timeout(10_000),
  });
  await answer.arrayBuffer();
}
