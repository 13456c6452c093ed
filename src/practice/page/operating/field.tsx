/** An input block: label, element, hint, and what is wrong with it. */
import type { Block } from '../../wire/blocks.ts';
import type { ElementValues } from '../../wire/objects.ts';
import { Control, type Place } from './control.tsx';

type InputBlock = Extract<Block, { type: 'input' }>;

export function Field(props: { block: InputBlock; place: Place; state: ElementValues; error: string | undefined }) {
  const { block, place, state, error } = props;
  const blockId = block.block_id ?? '';
  const actionId = block.element.action_id ?? '';
  const where = 'view' in place ? place.view : place.ts;
  const id = `field-${where}-${blockId}-${actionId}`.replaceAll('.', '-');
  const described = [block.hint ? `${id}-hint` : '', error === undefined ? '' : `${id}-error`]
    .filter(Boolean)
    .join(' ');
  const grouped = ['radio_buttons', 'checkboxes', 'multi_static_select'].includes(block.element.type);
  const words = (
    <>
      {block.label.text}
      {block.optional ? <span class="aside"> (may be left out)</span> : null}
    </>
  );
  return (
    <div class={`field${error === undefined ? '' : ' wrong'}`} data-block={blockId}>
      {grouped ? (
        <span class="label" id={`${id}-label`}>
          {words}
        </span>
      ) : (
        <label class="label" for={id}>
          {words}
        </label>
      )}
      <Control
        element={block.element}
        blockId={blockId}
        place={place}
        value={state[blockId]?.[actionId]}
        dispatch={block.dispatch_action ?? false}
        id={id}
        describedBy={described || undefined}
        invalid={error !== undefined}
        required={!block.optional}
      />
      {block.hint ? (
        <p class="hint" id={`${id}-hint`}>
          {block.hint.text}
        </p>
      ) : null}
      {error === undefined ? null : (
        <p class="error" id={`${id}-error`}>
          {error}
        </p>
      )}
    </div>
  );
}
