import type { App, BlockAction, ButtonAction } from '@slack/bolt';
import { z } from 'zod';
import { entry, mendPlaceSchema } from '../inbox.ts';
import { type MendPlace, mendLoading, mendModal, mendUnavailable } from '../messages/mendModal.ts';
import { moreMessage } from '../messages/moreLines.ts';
import { ACTION } from '../names.ts';
import type { ChannelDeps } from '../types.ts';

interface PressedAt {
  readonly teamId: string;
  readonly channel: string;
  readonly messageTs: string;
  readonly threadTs: string;
  readonly user: string;
}

/** Where a button was pressed; undefined outside a message of a channel. */
function pressedAt(body: BlockAction): PressedAt | undefined {
  const channel = body.channel?.id;
  const messageTs = body.message?.ts;
  const teamId = body.team?.id ?? body.user.team_id;
  if (!channel || !messageTs || !teamId) return undefined;
  return { teamId, channel, messageTs, threadTs: body.message?.thread_ts ?? messageTs, user: body.user.id };
}

/** Buttons and selects in our messages. */
export function listenToPresses(app: App, deps: ChannelDeps, background: (work: Promise<unknown>) => void): void {
  // The select of the date order counts only when its button is pressed.
  app.action(ACTION.dateOrder, ({ ack }) => ack());

  app.action<BlockAction<ButtonAction>>(ACTION.dateOrderGo, async ({ ack, body, action }) => {
    const at = pressedAt(body);
    if (at && action.value) {
      const chosen = body.state?.values[action.block_id]?.[ACTION.dateOrder]?.selected_option?.value;
      const order = z.enum(['iso', 'dmy', 'mdy']).safeParse(chosen);
      const keys = { event: `press#${at.messageTs}#${action.action_ts}`, about: [action.value, action.action_ts] };
      const { channel, messageTs, threadTs, user } = at;
      await deps.store.receive(
        entry('date-order', at.teamId, keys, {
          upload: action.value,
          channel,
          messageTs,
          threadTs,
          user,
          order: order.success ? order.data : null,
        }),
      );
    }
    await ack();
  });

  app.action<BlockAction<ButtonAction>>(ACTION.again, async ({ ack, body, action }) => {
    const at = pressedAt(body);
    if (at && action.value) {
      const keys = {
        event: `press#${at.messageTs}#${action.action_ts}`,
        about: [at.channel, at.messageTs, action.action_ts],
      };
      const { channel, threadTs, user } = at;
      await deps.store.receive(entry('ask', at.teamId, keys, { channel, threadTs, user, text: action.value }));
    }
    await ack();
  });

  app.action<BlockAction<ButtonAction>>(ACTION.more, async ({ ack, body, action, client }) => {
    const at = pressedAt(body);
    const more = moreMessage(json(action.value));
    if (at && more) {
      const { channel, threadTs, user } = at;
      background(client.chat.postEphemeral({ channel, user, thread_ts: threadTs, ...more }));
    }
    await ack();
  });

  app.action<BlockAction<ButtonAction>>(ACTION.mend, async ({ ack, body, action, client }) => {
    const at = pressedAt(body);
    const target = mendPlaceSchema.shape.target.safeParse(json(action.value));
    if (at && target.success) {
      const place: MendPlace = { target: target.data, channel: at.channel, threadTs: at.threadTs };
      // The trigger lives three seconds: nothing is looked up before the modal is open.
      const opened = await client.views.open({ trigger_id: body.trigger_id, view: mendLoading(place) });
      const viewId = opened.view?.id;
      if (viewId) {
        background(formFor(deps, at.teamId, place).then((view) => client.views.update({ view_id: viewId, view })));
      }
    }
    await ack();
  });
}

async function formFor(deps: ChannelDeps, teamId: string, place: MendPlace) {
  const workspace = await deps.store.workspace(teamId);
  const upload = 'upload' in place.target ? await workspace.upload(place.target.upload) : undefined;
  const shown = place.target.dataset === undefined ? undefined : await workspace.dataset(place.target.dataset);
  const dataset = shown ?? (upload?.datasetId ? await workspace.dataset(upload.datasetId) : undefined);
  const headers = upload && upload.headers.length > 0 ? upload.headers : (dataset?.report.headers ?? []);
  if (headers.length === 0) return mendUnavailable(place);
  // The upload remembers the last try, also one that failed: a message that shows a reading offers that reading.
  const choices = (shown ?? upload)?.choices ?? {};
  return mendModal(place, {
    fileName: upload?.fileName ?? dataset?.name ?? 'the file',
    headers,
    columns: { ...dataset?.report.columns, ...choices.columns },
    dates: choices.dates,
    asOf: choices.asOf ?? dataset?.report.asOf,
  });
}

function json(text: string | undefined): unknown {
  try {
    return JSON.parse(text ?? '');
  } catch {
    return undefined;
  }
}
