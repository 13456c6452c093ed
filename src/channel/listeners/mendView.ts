import type { App } from '@slack/bolt';
import { z } from 'zod';
import { checkAsOf } from '../../accounts/checkAsOf.ts';
import { dayFromIso } from '../../days.ts';
import { EbbError } from '../../errors.ts';
import { entry, type MendTarget, mendPlaceSchema } from '../inbox.ts';
import { MEND, NO_COLUMN, VIEW_MEND } from '../names.ts';
import type { ChannelDeps } from '../types.ts';

type Values = Readonly<
  Record<
    string,
    Readonly<
      Record<
        string,
        { readonly selected_option?: { readonly value: string } | null; readonly selected_date?: string | null }
      >
    >
  >
>;

/** The mend modal, handed in: checked at once, written down, and read again from the queue. */
export function listenToMendView(app: App, deps: ChannelDeps): void {
  app.view(VIEW_MEND, async ({ ack, body, view }) => {
    const values = view.state.values as Values;
    const column = (block: string): number | undefined => {
      const value = values[block]?.[MEND.value]?.selected_option?.value;
      return value === undefined || value === NO_COLUMN ? undefined : Number(value);
    };
    const [start, end, id, segment, amount] = [MEND.start, MEND.end, MEND.id, MEND.segment, MEND.amount].map(column);
    const errors: Record<string, string> = {};
    if (start === undefined) errors[MEND.start] = 'Choose the column that holds the start.';
    if (end === undefined) errors[MEND.end] = 'Choose the column that holds the end.';
    else if (end === start) errors[MEND.end] = 'Start and end cannot be the same column.';
    if (id !== undefined && (id === start || id === end))
      errors[MEND.id] = 'A date is no account id. Choose another column.';
    const place = mendPlaceSchema.parse(JSON.parse(view.private_metadata));
    const teamId = view.app_installed_team_id ?? body.team?.id ?? body.user.team_id ?? view.team_id;
    const asOf = values[MEND.asOf]?.[MEND.value]?.selected_date ?? null;
    if (asOf !== null && start !== undefined && end !== undefined) {
      const problem = await asOfProblem(deps, teamId, place.target, asOf, start, end);
      if (problem !== undefined) errors[MEND.asOf] = problem;
    }
    if (Object.keys(errors).length > 0) {
      await ack({ response_action: 'errors', errors });
      return;
    }
    const dates = z.enum(['iso', 'dmy', 'mdy']).safeParse(values[MEND.dates]?.[MEND.value]?.selected_option?.value);
    const columns = { start, end, id, segment, amount };
    await deps.store.receive(
      entry(
        'mend',
        teamId,
        { event: `view#${view.id}#${view.hash}`, about: [view.id, view.hash] },
        {
          ...place,
          user: body.user.id,
          columns: Object.fromEntries(Object.entries(columns).filter(([, at]) => at !== undefined)),
          dates: dates.success ? dates.data : null,
          asOf,
        },
      ),
    );
    await ack();
  });
}

/** What is wrong with a data-through date, where the last reading tells; other columns than its own are judged when they are read. */
async function asOfProblem(
  deps: ChannelDeps,
  teamId: string,
  target: MendTarget,
  asOf: string,
  start: number,
  end: number,
): Promise<string | undefined> {
  const workspace = await deps.store.workspace(teamId);
  const upload = 'upload' in target ? await workspace.upload(target.upload) : undefined;
  const datasetId = target.dataset ?? upload?.datasetId;
  const report = datasetId ? (await workspace.dataset(datasetId))?.report : undefined;
  const day = dayFromIso(asOf);
  if (!report || day === undefined) return undefined;
  const headers = upload && upload.headers.length > 0 ? upload.headers : report.headers;
  if (headers[start] !== report.columns.start || headers[end] !== report.columns.end) return undefined;
  try {
    checkAsOf(day, report.inferredAsOf);
    return undefined;
  } catch (error) {
    if (!(error instanceof EbbError)) throw error;
    return `${error.message.slice(0, 1).toUpperCase()}${error.message.slice(1)}.`;
  }
}
