/** What a person does to one element: the value it then holds, and the action the app is told of. */

import type { InteractiveElement } from '../wire/elements.ts';
import type { ChosenOption, ElementValue } from '../wire/objects.ts';
import type { Option } from '../wire/text.ts';
import { presentFile } from '../world/present.ts';
import type { World } from '../world/world.ts';

export type Choice = string | readonly string[] | null;

function chosen(option: Option): ChosenOption {
  return { text: option.text, value: option.value };
}

/** @throws RangeError for an option the element does not offer */
function pick(element: InteractiveElement, value: string): ChosenOption {
  const direct = 'options' in element ? (element.options ?? []) : [];
  const grouped = 'option_groups' in element ? (element.option_groups ?? []).flatMap((g) => g.options) : [];
  const option = [...direct, ...grouped].find((o) => o.value === value);
  if (!option)
    throw new RangeError(`${element.type} ${element.action_id ?? ''} has no option with the value "${value}"`);
  return chosen(option);
}

/**
 * @param choice option values for menus, a date or time as text, an id, typed text, or file ids; null empties the element
 * @returns the value it holds, or undefined for elements that hold nothing
 */
export function valueFor(world: World, element: InteractiveElement, choice: Choice): ElementValue | undefined {
  const { type } = element;
  const one = typeof choice === 'string' && choice !== '' ? choice : null;
  const many = choice === null ? [] : typeof choice === 'string' ? [choice] : [...choice];
  switch (type) {
    case 'button':
    case 'overflow':
      return undefined;
    case 'static_select':
    case 'radio_buttons':
      return { type, selected_option: one === null ? null : pick(element, one) };
    case 'multi_static_select':
    case 'checkboxes':
      return { type, selected_options: many.map((value) => pick(element, value)) };
    case 'datepicker':
      return { type, selected_date: one };
    case 'timepicker':
      return { type, selected_time: one };
    case 'users_select':
      return { type, selected_user: one };
    case 'conversations_select':
      return { type, selected_conversation: one };
    case 'channels_select':
      return { type, selected_channel: one };
    case 'plain_text_input':
    case 'number_input':
      return { type, value: one };
    case 'file_input':
      return {
        type,
        files: many.flatMap((id) => {
          const file = world.files.get(id);
          return file ? [presentFile(world, file)] : [];
        }),
      };
  }
}

/** The entry of `actions` in a block_actions payload. */
export function actionFor(
  element: InteractiveElement,
  blockId: string,
  actionTs: string,
  value: ElementValue | undefined,
  choice: Choice,
): Record<string, unknown> {
  const base = { type: element.type, action_id: element.action_id ?? '', block_id: blockId, action_ts: actionTs };
  if (element.type === 'button') {
    return { ...base, text: element.text, ...(element.value === undefined ? {} : { value: element.value }) };
  }
  if (element.type === 'overflow') {
    return { ...base, selected_option: pick(element, typeof choice === 'string' ? choice : '') };
  }
  return { ...base, ...value };
}

/** @returns why the value cannot be handed in, or undefined when it can */
export function problemWith(
  element: InteractiveElement,
  value: ElementValue | undefined,
  optional: boolean,
): string | undefined {
  const empty =
    value === undefined ||
    Object.entries(value).every(
      ([key, held]) => key === 'type' || held === null || (Array.isArray(held) && held.length === 0),
    );
  if (empty) return optional ? undefined : 'This is needed before you can go on.';
  if (element.type === 'plain_text_input') {
    const length = (value.value ?? '').length;
    const { min_length: min, max_length: max } = element;
    if (min !== undefined && length < min) return `Write at least ${min} characters; there are ${length}.`;
    if (max !== undefined && length > max) return `Write at most ${max} characters; there are ${length}.`;
  }
  if (element.type === 'number_input') {
    const number = Number(value.value);
    if (!Number.isFinite(number)) return 'Write a number.';
    if (!element.is_decimal_allowed && !Number.isInteger(number)) return 'Write a whole number.';
    if (element.min_value !== undefined && number < Number(element.min_value)) return `At least ${element.min_value}.`;
    if (element.max_value !== undefined && number > Number(element.max_value)) return `At most ${element.max_value}.`;
  }
  if (element.type === 'file_input' && (value.files ?? []).length > (element.max_files ?? 10)) {
    return `At most ${element.max_files ?? 10} files.`;
  }
  return undefined;
}
