/** What elements hold before anyone has touched them, and giving names to blocks and elements that came without. */
import type { Block } from '../wire/blocks.ts';
import { interactiveElements } from '../wire/checkBlocks.ts';
import type { InteractiveElement } from '../wire/elements.ts';
import type { ElementValue, ElementValues } from '../wire/objects.ts';
import type { World } from './world.ts';

/** The service names every block and element itself when the app did not: state is keyed by these names. */
export function nameBlocks(world: World, blocks: readonly Block[]): Block[] {
  const name = () => world.newId('').slice(0, 5);
  const named = <T extends { action_id?: string | undefined }>(element: T): T => ({
    ...element,
    action_id: element.action_id ?? name(),
  });
  return blocks.map((block): Block => {
    const block_id = block.block_id ?? name();
    if (block.type === 'actions') return { ...block, block_id, elements: block.elements.map(named) };
    if (block.type === 'input') return { ...block, block_id, element: named(block.element) };
    if (block.type === 'section' && block.accessory && block.accessory.type !== 'image') {
      return { ...block, block_id, accessory: named(block.accessory) };
    }
    return { ...block, block_id };
  });
}

/** @returns undefined for elements that hold nothing: buttons and overflow menus */
export function initialValue(element: InteractiveElement): ElementValue | undefined {
  const { type } = element;
  switch (type) {
    case 'button':
    case 'overflow':
      return undefined;
    case 'static_select':
    case 'radio_buttons':
      return { type, selected_option: element.initial_option ?? null };
    case 'multi_static_select':
    case 'checkboxes':
      return { type, selected_options: element.initial_options ?? [] };
    case 'datepicker':
      return { type, selected_date: element.initial_date ?? null };
    case 'timepicker':
      return { type, selected_time: element.initial_time ?? null };
    case 'users_select':
      return { type, selected_user: element.initial_user ?? null };
    case 'conversations_select':
      return { type, selected_conversation: element.initial_conversation ?? null };
    case 'channels_select':
      return { type, selected_channel: element.initial_channel ?? null };
    case 'plain_text_input':
    case 'number_input':
      return { type, value: element.initial_value ?? null };
    case 'file_input':
      return { type, files: [] };
  }
}

/**
 * @param kept values from before an update: they survive only under the same block_id and action_id
 */
export function stateOf(blocks: readonly Block[], kept: ElementValues = {}): ElementValues {
  const values: Record<string, Record<string, ElementValue>> = {};
  for (const block of blocks) {
    for (const element of interactiveElements(block)) {
      const { block_id } = block;
      const { action_id } = element;
      if (block_id === undefined || action_id === undefined) continue;
      const before = kept[block_id]?.[action_id];
      const value = before?.type === element.type ? before : initialValue(element);
      if (value === undefined) continue;
      values[block_id] = { ...values[block_id], [action_id]: value };
    }
  }
  return values;
}

export function findElement(
  blocks: readonly Block[],
  actionId: string,
  blockId?: string,
): { block: Block; element: InteractiveElement } | undefined {
  for (const block of blocks) {
    if (blockId !== undefined && block.block_id !== blockId) continue;
    for (const element of interactiveElements(block)) {
      if (element.action_id === actionId) return { block, element };
    }
  }
  return undefined;
}
