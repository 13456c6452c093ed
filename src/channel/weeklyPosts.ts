import { dueAfter } from '../answers/weekly/dueTimes.ts';
import { entry } from './inbox.ts';
import type { ChannelDeps } from './types.ts';

const DAY_MS = 86_400_000;

/**
 * Takes what is due: writes each due post down as an entry of the inbox, then moves the post on to its next time. Any process may do so,
 * at any moment and more than once: the inbox keeps one entry for each post and moment, and moving on works only from the moment taken.
 * A post that is more than a day late is not made any more; its moment is named in the next one.
 * @returns how many posts were written down
 */
export async function takeDuePosts({ store, now }: Pick<ChannelDeps, 'store' | 'now'>): Promise<number> {
  const moment = now();
  let written = 0;
  for (const follow of await store.dueFollows(moment)) {
    const { teamId, id, time, due } = follow;
    const missed: number[] = [];
    let last = due;
    for (let next = dueAfter(time, last); next <= moment; next = dueAfter(time, last)) {
      missed.push(last);
      last = next;
    }
    if (moment - last >= DAY_MS) missed.push(last);
    else {
      const keys = { event: `weekly#${id}#${last}`, about: [id, String(last)] };
      if ((await store.receive(entry('weekly', teamId, keys, { follow: id, due: last }))) === 'new') written++;
    }
    await store.advanceFollow(follow, dueAfter(time, last), missed);
  }
  return written;
}
