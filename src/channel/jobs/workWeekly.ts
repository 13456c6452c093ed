import { momentInWords } from '../../answers/weekly/dueTimes.ts';
import { seenIn } from '../../answers/weekly/seen.ts';
import { whatIsNew } from '../../answers/weekly/whatIsNew.ts';
import { dayInWords } from '../../days.ts';
import { EbbError } from '../../errors.ts';
import { understand } from '../../requests/understand.ts';
import { counted } from '../../verdict/words/format.ts';
import type { Payload } from '../inbox.ts';
import { errorMessage } from '../messages/errorMessage.ts';
import { saidBy } from '../messages/verdictMessage.ts';
import { linesMessage, staleLines } from '../messages/weeklyMessage.ts';
import { postVerdict } from '../posting/postVerdict.ts';
import { type Job, posterFor, requestContext } from './context.ts';

const DAY_MS = 86_400_000;
/** Data older than this is no news: a weekly export, and a few days for whoever makes it. Our choice, no source. */
const STALE_DAYS = 10;

/** The post that is due: what is new since the last one; one line when nothing is, and no old answer from stale data. */
export async function workWeekly(job: Job, payload: Payload<'weekly'>): Promise<void> {
  const { deps, workspace, client, rule, log } = job;
  const follow = await workspace.follow(payload.follow);
  // Stopped meanwhile.
  if (!follow) return;
  const poster = posterFor(job, { channel: follow.channelId, threadTs: null });
  const { zone } = follow.time;
  const missed = follow.missed.filter((moment) => moment < payload.due);
  const missedLines =
    missed.length === 0
      ? []
      : [
          `I was not running at ${missed.map((moment) => momentInWords(moment, zone)).join('; ')}, so that post was missed.`,
        ];
  const say = async (lines: readonly string[]): Promise<void> => {
    await poster.post('verdict', linesMessage([...lines, ...missedLines]));
    await workspace.recordSeen(follow.id, null, missed);
  };

  const dataset = await workspace.currentDataset(follow.channelId);
  if (!dataset) {
    await say([
      'It is time for the weekly answer, but there is no export in this channel. Drop one here, and I will look at it at once.',
    ]);
    return;
  }
  const today = Math.floor(payload.due / DAY_MS);
  if (today - dataset.report.asOf > STALE_DAYS) {
    await say(staleLines(dataset.name, dataset.report.asOf, today));
    return;
  }
  const { request } = understand(follow.question, requestContext(deps.now(), dataset));
  const question = request.kind === 'ask' ? request : ({ kind: 'ask' } as const);
  try {
    const answer = await deps.answers.askDataset(workspace, dataset, question);
    const seen = seenIn(answer, payload.due);
    const { lines } = seen ? whatIsNew(follow.seen, seen) : { lines: [] };
    const { census } = answer;
    const waits = census
      ? `${counted(census.waiting, 'account')} of ${counted(census.request.subgroupSize, 'account')} wait for the next point${census.nextPointOn === null ? '' : `, due about ${dayInWords(census.nextPointOn)}`}.`
      : '';
    if (follow.seen !== null && seen !== null && lines.length === 0) {
      const last = momentInWords(follow.seen.at, zone).replace(/,.*$/, '');
      await poster.post(
        'verdict',
        linesMessage([`Nothing new since ${last}. ${answer.verdict.headline} ${waits}`, ...missedLines]),
      );
    } else {
      const said = saidBy(answer);
      const news = [...lines, ...(waits === '' ? [] : [waits])];
      await postVerdict(
        { client, rule, poster, log },
        { ...said, evidence: [...missedLines, ...news, ...said.evidence] },
        null,
        follow.question,
      );
    }
    await workspace.recordSeen(follow.id, seen, missed);
  } catch (error) {
    if (!(error instanceof EbbError)) throw error;
    await poster.post('verdict', errorMessage(error));
  }
}
