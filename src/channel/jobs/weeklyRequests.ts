import { dueAfter, isZone, momentInWords } from '../../answers/weekly/dueTimes.ts';
import { putIntoWords } from '../../requests/putIntoWords.ts';
import type { Understanding, WeeklyRequest, WeeklyTime } from '../../requests/types.ts';
import { notUsedLines } from '../../requests/understoodLines.ts';
import { weeklyInWords } from '../../requests/weeklyPhrase.ts';
import type { Follow } from '../../store/types.ts';
import { linesMessage } from '../messages/weeklyMessage.ts';
import type { Poster } from '../posting/poster.ts';
import { refusal } from '../posting/webClient.ts';
import type { Job } from './context.ts';

/** Sets, shows and stops the posts a channel gets by itself. */
export async function workWeeklyRequest(
  job: Job,
  poster: Poster,
  request: WeeklyRequest,
  notUnderstood: Understanding['notUnderstood'],
  user: string,
): Promise<void> {
  const { deps, workspace } = job;
  const { channel } = poster.place;
  const say = (lines: readonly string[]): Promise<string> => poster.post('weekly', linesMessage(lines));
  const followed = await workspace.follows(channel);
  switch (request.kind) {
    case 'weekly-show':
      await say(followed.length === 0 ? NOTHING : followed.map((follow, i) => lineOf(follow, i, followed.length)));
      return;
    case 'weekly-stop': {
      if (followed.length === 0) {
        await say(NOTHING);
        return;
      }
      const chosen = request.which === null ? followed : followed.slice(request.which - 1, request.which);
      if (chosen.length === 0) {
        await say([
          `There is no weekly post ${request.which} here.`,
          ...followed.map((f, i) => lineOf(f, i, followed.length)),
        ]);
        return;
      }
      for (const { id } of chosen) await workspace.removeFollow(id);
      await say(chosen.map(({ question, time }) => `Stopped: ${weeklyInWords(time)}, ${question}`));
      return;
    }
    case 'weekly-set': {
      const zone = request.time.zone ?? (await zoneOf(job, user));
      if (!isZone(zone)) {
        await say([
          `“${zone}” is no time zone I know. Name it by area and place, such as “Europe/Vienna” or “America/New_York”.`,
        ]);
        return;
      }
      const time: WeeklyTime = { ...request.time, zone };
      const question = putIntoWords(request.question);
      const known = followed.find((follow) => follow.question === question);
      const nextDue = dueAfter(time, deps.now());
      await workspace.saveFollow({ channelId: channel, question, time, setBy: user, nextDue });
      await say([
        `${known ? 'Changed' : 'Set'}: ${weeklyInWords(time)} I answer here by myself: ${question}`,
        `The first time is ${momentInWords(nextDue, zone)}. I say what is new since the post before; without anything new it is one line.`,
        'To end it, say “stop the weekly post”.',
        ...notUsedLines(notUnderstood),
      ]);
    }
  }
}

const NOTHING = ['Nothing is posted here by itself. Say “every Monday at 9:00” to have the answer once a week.'];

function lineOf({ question, time, nextDue }: Follow, i: number, of: number): string {
  const number = of > 1 ? `${i + 1}. ` : '';
  return `${number}${weeklyInWords(time)}: ${question} Next: ${momentInWords(nextDue, time.zone)}.`;
}

/** The zone a person has set for themselves; UTC when the service does not tell. */
async function zoneOf({ client, log }: Job, user: string): Promise<string> {
  try {
    const zone = (await client.users.info({ user })).user?.tz;
    if (zone !== undefined && isZone(zone)) return zone;
  } catch (error) {
    log.warn({ refusal: refusal(error) ?? String(error) }, "the setter's time zone is not known; UTC is taken");
  }
  return 'UTC';
}
