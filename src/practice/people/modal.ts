/** Handing in and closing modals, and doing what the app answers. */
import { fileCheck } from '../api/method.ts';
import { botOf } from '../delivery/events.ts';
import { checkView, interactiveElements } from '../wire/checkBlocks.ts';
import { Refusal } from '../wire/refusal.ts';
import { viewReplySchema } from '../wire/requests.ts';
import { presentView } from '../world/present.ts';
import { issueTrigger } from '../world/tickets.ts';
import { clearStack, closeTop, pushView, topView, updateView } from '../world/views.ts';
import type { Person, View } from '../world/world.ts';
import { type Desk, interactionBase } from './desk.ts';
import { problemWith } from './elements.ts';
import { failureWords } from './interact.ts';

export type SubmitOutcome =
  | { readonly kind: 'closed' | 'updated' | 'pushed' | 'cleared' }
  /** block_id to what is wrong with it; `asked` says whether the app said so or the form itself */
  | { readonly kind: 'errors'; readonly errors: Readonly<Record<string, string>>; readonly asked: 'app' | 'form' }
  | { readonly kind: 'failed'; readonly error: string; readonly message: string };

function openTop(desk: Desk, person: Person, viewId: string | undefined): View {
  const view = topView(desk.world, person.id);
  if (!view || (viewId !== undefined && view.id !== viewId)) {
    throw new RangeError(`${person.realName} does not have that modal open on top`);
  }
  return view;
}

export async function submitView(desk: Desk, person: Person, viewId?: string): Promise<SubmitOutcome> {
  const { world } = desk;
  const view = openTop(desk, person, viewId);
  const missing = formErrors(view);
  if (Object.keys(missing).length > 0) return { kind: 'errors', errors: missing, asked: 'form' };
  const install = botOf(world, person.team);
  const outcome = await desk.link.ask('interaction', {
    type: 'view_submission',
    ...interactionBase(desk, person),
    trigger_id: issueTrigger(world, person.team, person.id).id,
    view: presentView(world, view, { botId: install?.botId ?? '' }),
    response_urls: [],
  });
  if (!outcome.ok) return { kind: 'failed', error: outcome.error, message: failureWords(outcome.error) };
  try {
    return carryOut(desk, person, view, outcome.reply);
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    return {
      kind: 'failed',
      error: error.error,
      message: `The bot answered with something the service refuses: ${error.message}`,
    };
  }
}

function formErrors(view: View): Record<string, string> {
  const errors: Record<string, string> = {};
  for (const block of view.content.blocks) {
    if (block.type !== 'input' || block.block_id === undefined) continue;
    const [element] = interactiveElements(block);
    if (!element) continue;
    const value = view.state[block.block_id]?.[element.action_id ?? ''];
    const problem = problemWith(element, value, block.optional ?? false);
    if (problem !== undefined) errors[block.block_id] = problem;
  }
  return errors;
}

function carryOut(desk: Desk, person: Person, view: View, reply: unknown): SubmitOutcome {
  const { world } = desk;
  if (reply === undefined || reply === '') {
    // The app may have changed the stack while it was thinking; only the view that was handed in closes.
    if (topView(world, person.id)?.id === view.id) closeTop(world, person.id);
    return { kind: 'closed' };
  }
  const parsed = viewReplySchema.safeParse(reply);
  if (!parsed.success)
    throw new Refusal('invalid_view_response', ['[ERROR] response_action is not one the service knows']);
  const answer = parsed.data;
  switch (answer.response_action) {
    case 'errors': {
      const inputs = new Set(view.content.blocks.filter((b) => b.type === 'input').map((b) => b.block_id));
      const strangers = Object.keys(answer.errors).filter((id) => !inputs.has(id));
      if (strangers.length > 0 || Object.keys(answer.errors).length === 0) {
        throw new Refusal('invalid_view_response', [
          `[ERROR] errors must name input blocks; these do not: ${strangers.join(', ')}`,
        ]);
      }
      return { kind: 'errors', errors: answer.errors, asked: 'app' };
    }
    case 'update':
      updateView(world, view, modalFrom(desk, person, answer.view));
      return { kind: 'updated' };
    case 'push':
      pushView(world, person.team, person.id, modalFrom(desk, person, answer.view));
      return { kind: 'pushed' };
    case 'clear':
      clearStack(world, person.id);
      return { kind: 'cleared' };
  }
}

function modalFrom(desk: Desk, person: Person, value: unknown) {
  const content = checkView(value, fileCheck(desk.world, person.team));
  if (content.type !== 'modal') throw new Refusal('invalid_arguments', ['[ERROR] a modal is expected']);
  return content;
}

/** @param all dismisses the whole stack, as the corner of the real dialog does */
export async function closeView(desk: Desk, person: Person, viewId?: string, all = false): Promise<void> {
  const { world } = desk;
  const view = openTop(desk, person, viewId);
  const content = view.content.type === 'modal' ? view.content : undefined;
  const cleared = all || content?.clear_on_close === true;
  const install = botOf(world, person.team);
  const shown = presentView(world, view, { botId: install?.botId ?? '' });
  if (cleared) clearStack(world, person.id);
  else closeTop(world, person.id);
  if (content?.notify_on_close !== true) return;
  await desk.link.ask('interaction', {
    type: 'view_closed',
    ...interactionBase(desk, person),
    view: shown,
    is_cleared: cleared,
  });
}
