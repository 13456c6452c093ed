import type { App } from '@slack/bolt';
import { z } from 'zod';
import { entry, mendPlaceSchema } from '../inbox.ts';
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
    if (Object.keys(errors).length > 0) {
      await ack({ response_action: 'errors', errors });
      return;
    }
    const place = mendPlaceSchema.parse(JSON.parse(view.private_metadata));
    const dates = z.enum(['iso', 'dmy', 'mdy']).safeParse(values[MEND.dates]?.[MEND.value]?.selected_option?.value);
    const teamId = view.app_installed_team_id ?? body.team?.id ?? body.user.team_id ?? view.team_id;
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
          asOf: values[MEND.asOf]?.[MEND.value]?.selected_date ?? null,
        },
      ),
    );
    await ack();
  });
}
