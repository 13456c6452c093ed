/** One element a person can operate. */
import type { InteractiveElement } from '../../wire/elements.ts';
import type { ElementValue } from '../../wire/objects.ts';
import type { Option } from '../../wire/text.ts';
import { useLooking } from '../context.ts';
import { TextObject } from '../reading/text.tsx';
import { ask, upload } from '../service.ts';

export type Place = { channel: string; ts: string } | { view: string };
type Choice = string | string[] | null;

export interface ControlProps {
  readonly element: InteractiveElement;
  readonly blockId: string;
  readonly place: Place;
  readonly value: ElementValue | undefined;
  /** true: the app hears of each choice; false: the value waits for the form */
  readonly dispatch: boolean;
  readonly id?: string;
  readonly describedBy?: string | undefined;
  readonly invalid?: boolean;
  readonly required?: boolean;
  readonly label?: string;
}

export function Control(props: ControlProps) {
  const { element, blockId, place, value, dispatch } = props;
  const { snapshot, complain, confirm } = useLooking();
  const send = async (choice: Choice) => {
    try {
      if (dispatch && !(await confirm('confirm' in element ? element.confirm : undefined))) return;
      await ask({
        do: dispatch ? 'act' : 'fill',
        as: snapshot.me,
        target: place,
        actionId: element.action_id ?? '',
        blockId,
        choice,
      });
    } catch (problem) {
      complain(problem);
    }
  };
  const label = props.label ?? placeholderOf(element) ?? 'Choose';
  const common = {
    ...(props.id === undefined ? { 'aria-label': label } : { id: props.id }),
    'aria-describedby': props.describedBy,
    'aria-invalid': props.invalid ? true : undefined,
    'aria-required': props.required ? true : undefined,
    'data-action': element.action_id,
  };
  switch (element.type) {
    case 'button':
      return (
        <button
          type="button"
          class={`press ${element.style ?? ''}`}
          aria-label={element.accessibility_label}
          data-action={element.action_id}
          onClick={() => {
            if (element.url !== undefined && /^https?:/.test(element.url))
              window.open(element.url, '_blank', 'noopener');
            void send(null);
          }}
        >
          {element.text.text}
        </button>
      );
    case 'overflow':
      return (
        <details class="overflow">
          <summary aria-label="More choices">more</summary>
          {element.options.map((option) => (
            <button type="button" class="press" key={option.value} onClick={() => void send(option.value)}>
              {option.text.text}
            </button>
          ))}
        </details>
      );
    case 'static_select':
      return (
        <select
          {...common}
          value={value?.selected_option?.value ?? ''}
          onChange={(e) => void send(e.currentTarget.value || null)}
        >
          <Unchosen
            required={props.required}
            chosen={value?.selected_option?.value}
            words={element.placeholder?.text ?? 'Choose one'}
          />
          {element.options?.map(optionTag)}
          {element.option_groups?.map((group) => (
            <optgroup key={group.label.text} label={group.label.text}>
              {group.options.map(optionTag)}
            </optgroup>
          ))}
        </select>
      );
    case 'multi_static_select': {
      const options = [...(element.options ?? []), ...(element.option_groups ?? []).flatMap((g) => g.options)];
      return <Many {...props} options={options} kind="checkbox" send={send} />;
    }
    case 'checkboxes':
      return <Many {...props} options={element.options} kind="checkbox" send={send} />;
    case 'radio_buttons':
      return <Many {...props} options={element.options} kind="radio" send={send} />;
    case 'datepicker':
      return (
        <input
          {...common}
          type="date"
          value={value?.selected_date ?? ''}
          onChange={(e) => void send(e.currentTarget.value || null)}
        />
      );
    case 'timepicker':
      return (
        <input
          {...common}
          type="time"
          value={value?.selected_time ?? ''}
          onChange={(e) => void send(e.currentTarget.value || null)}
        />
      );
    case 'users_select':
      return (
        <select
          {...common}
          value={value?.selected_user ?? ''}
          onChange={(e) => void send(e.currentTarget.value || null)}
        >
          <Unchosen
            required={props.required}
            chosen={value?.selected_user}
            words={element.placeholder?.text ?? 'Choose someone'}
          />
          {snapshot.people.map((p) => (
            <option key={p.id} value={p.id}>
              {p.name}
            </option>
          ))}
        </select>
      );
    case 'conversations_select':
    case 'channels_select': {
      const held = element.type === 'channels_select' ? value?.selected_channel : value?.selected_conversation;
      return (
        <select {...common} value={held ?? ''} onChange={(e) => void send(e.currentTarget.value || null)}>
          <Unchosen required={props.required} chosen={held} words={element.placeholder?.text ?? 'Choose a channel'} />
          {snapshot.channels
            .filter((c) => element.type === 'conversations_select' || !c.isDirect)
            .map((c) => (
              <option key={c.id} value={c.id}>
                {c.name}
              </option>
            ))}
        </select>
      );
    }
    case 'plain_text_input': {
      const shared = {
        ...common,
        placeholder: element.placeholder?.text,
        maxLength: element.max_length,
        defaultValue: value?.value ?? '',
        onChange: (e: { currentTarget: { value: string } }) => void send(e.currentTarget.value),
      };
      return element.multiline ? (
        <textarea rows={4} {...shared} />
      ) : (
        <input type="text" autocomplete="off" {...shared} />
      );
    }
    case 'number_input':
      return (
        <input
          {...common}
          type="number"
          step={element.is_decimal_allowed ? 'any' : 1}
          min={element.min_value}
          max={element.max_value}
          placeholder={element.placeholder?.text}
          defaultValue={value?.value ?? ''}
          onChange={(e) => void send(e.currentTarget.value)}
        />
      );
    case 'file_input':
      return (
        <>
          <input
            {...common}
            type="file"
            multiple={(element.max_files ?? 10) > 1}
            accept={element.filetypes?.map((t) => `.${t}`).join(',')}
            onChange={async (e) => {
              try {
                const ids: string[] = [];
                for (const file of e.currentTarget.files ?? []) ids.push(await upload(snapshot.me, file));
                await send(ids);
              } catch (problem) {
                complain(problem);
              }
            }}
          />
          {value?.files?.map((file) => (
            <span class="chosen-file" key={file.id}>
              {file.name}
            </span>
          ))}
        </>
      );
  }
}

function placeholderOf(element: InteractiveElement): string | undefined {
  return 'placeholder' in element ? element.placeholder?.text : undefined;
}

/** The entry that stands for no choice; once there is one it takes the choice back, and is gone where one is needed. */
function Unchosen(props: { chosen: string | null | undefined; words: string; required: boolean | undefined }) {
  if (props.chosen && props.required !== false) return null;
  return <option value="">{props.chosen ? 'No choice' : props.words}</option>;
}

function optionTag(option: Option) {
  return (
    <option key={option.value} value={option.value}>
      {option.text.text}
    </option>
  );
}

function Many(
  props: ControlProps & { options: readonly Option[]; kind: 'radio' | 'checkbox'; send: (c: Choice) => void },
) {
  const { element, blockId, value, options, kind } = props;
  const held =
    kind === 'radio' ? [value?.selected_option?.value] : (value?.selected_options ?? []).map((option) => option.value);
  const toggle = (option: string, on: boolean) => {
    if (kind === 'radio') return props.send(option);
    const next = options.map((o) => o.value).filter((v) => (v === option ? on : held.includes(v)));
    props.send(next);
  };
  return (
    // A fieldset would need its legend inside; the label stands with the other fields' labels instead.
    // biome-ignore lint/a11y/useAriaPropsSupportedByRole: the role is one of two, and both take these
    <div
      class="many"
      role={kind === 'radio' ? 'radiogroup' : 'group'}
      aria-labelledby={props.id === undefined ? undefined : `${props.id}-label`}
      aria-describedby={props.describedBy}
      data-action={element.action_id}
    >
      {options.map((option) => (
        <label key={option.value}>
          <input
            type={kind}
            name={`${blockId}-${element.action_id ?? ''}`}
            value={option.value}
            checked={held.includes(option.value)}
            onChange={(e) => toggle(option.value, e.currentTarget.checked)}
          />
          <span>
            <TextObject text={option.text} />
            {option.description ? (
              <small>
                <TextObject text={option.description} />
              </small>
            ) : null}
          </span>
        </label>
      ))}
    </div>
  );
}
