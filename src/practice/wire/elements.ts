/** Interactive elements, each with its published limits. */
import { z } from 'zod';
import { LIMITS } from './limits.ts';
import { confirmSchema, identifier, optionSchema, plainOptionSchema, plainText } from './text.ts';

const common = { action_id: identifier };
const confirmable = { confirm: confirmSchema.optional() };
const focusable = { focus_on_load: z.boolean().optional() };
const placeholder = { placeholder: plainText(LIMITS.placeholder).optional() };
const dispatchable = {
  dispatch_action_config: z
    .strictObject({ trigger_actions_on: z.array(z.enum(['on_enter_pressed', 'on_character_entered'])).optional() })
    .optional(),
};
const menu = { ...common, ...confirmable, ...focusable, ...placeholder };
const isoDay = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'must be a date written YYYY-MM-DD');
const clockTime = z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, 'must be a time written HH:mm');

const optionGroup = z.strictObject({
  label: plainText(LIMITS.optionText),
  options: z.array(plainOptionSchema).min(1).max(LIMITS.selectOptions),
});
const selectSource = {
  options: z.array(plainOptionSchema).min(1).max(LIMITS.selectOptions).optional(),
  option_groups: z.array(optionGroup).min(1).max(LIMITS.optionGroups).optional(),
};
const oneSource = (e: { options?: unknown; option_groups?: unknown }) =>
  (e.options === undefined) !== (e.option_groups === undefined);
const oneSourceMessage = 'exactly one of options and option_groups is required';

export const buttonSchema = z.strictObject({
  type: z.literal('button'),
  ...common,
  ...confirmable,
  text: plainText(LIMITS.buttonText),
  value: z.string().max(LIMITS.buttonValue).optional(),
  url: z.string().max(LIMITS.url).optional(),
  style: z.enum(['primary', 'danger']).optional(),
  accessibility_label: z.string().max(75).optional(),
});

export const staticSelectSchema = z
  .strictObject({
    type: z.literal('static_select'),
    ...menu,
    ...selectSource,
    initial_option: plainOptionSchema.optional(),
  })
  .refine(oneSource, oneSourceMessage);

export const multiStaticSelectSchema = z
  .strictObject({
    type: z.literal('multi_static_select'),
    ...menu,
    ...selectSource,
    initial_options: z.array(plainOptionSchema).optional(),
    max_selected_items: z.number().int().min(1).optional(),
  })
  .refine(oneSource, oneSourceMessage);

export const usersSelectSchema = z.strictObject({
  type: z.literal('users_select'),
  ...menu,
  initial_user: z.string().optional(),
});

const conversationFilter = z.strictObject({
  include: z.array(z.enum(['im', 'mpim', 'private', 'public'])).optional(),
  exclude_external_shared_channels: z.boolean().optional(),
  exclude_bot_users: z.boolean().optional(),
});

export const conversationsSelectSchema = z.strictObject({
  type: z.literal('conversations_select'),
  ...menu,
  initial_conversation: z.string().optional(),
  default_to_current_conversation: z.boolean().optional(),
  response_url_enabled: z.boolean().optional(),
  filter: conversationFilter.optional(),
});

export const channelsSelectSchema = z.strictObject({
  type: z.literal('channels_select'),
  ...menu,
  initial_channel: z.string().optional(),
  response_url_enabled: z.boolean().optional(),
});

export const overflowSchema = z.strictObject({
  type: z.literal('overflow'),
  ...common,
  ...confirmable,
  options: z.array(plainOptionSchema).min(1).max(LIMITS.overflowOptions),
});

export const radioButtonsSchema = z.strictObject({
  type: z.literal('radio_buttons'),
  ...common,
  ...confirmable,
  ...focusable,
  options: z.array(optionSchema).min(1).max(LIMITS.choiceOptions),
  initial_option: optionSchema.optional(),
});

export const checkboxesSchema = z.strictObject({
  type: z.literal('checkboxes'),
  ...common,
  ...confirmable,
  ...focusable,
  options: z.array(optionSchema).min(1).max(LIMITS.choiceOptions),
  initial_options: z.array(optionSchema).min(1).optional(),
});

export const datepickerSchema = z.strictObject({
  type: z.literal('datepicker'),
  ...menu,
  initial_date: isoDay.optional(),
});

export const timepickerSchema = z.strictObject({
  type: z.literal('timepicker'),
  ...menu,
  initial_time: clockTime.optional(),
  timezone: z.string().optional(),
});

export const plainTextInputSchema = z.strictObject({
  type: z.literal('plain_text_input'),
  ...common,
  ...focusable,
  ...placeholder,
  ...dispatchable,
  initial_value: z.string().max(LIMITS.inputMaxLength).optional(),
  multiline: z.boolean().optional(),
  min_length: z.number().int().min(0).max(LIMITS.inputMaxLength).optional(),
  max_length: z.number().int().min(1).max(LIMITS.inputMaxLength).optional(),
});

export const numberInputSchema = z.strictObject({
  type: z.literal('number_input'),
  ...common,
  ...focusable,
  ...placeholder,
  ...dispatchable,
  is_decimal_allowed: z.boolean(),
  initial_value: z.string().optional(),
  min_value: z.string().optional(),
  max_value: z.string().optional(),
});

export const fileInputSchema = z.strictObject({
  type: z.literal('file_input'),
  ...common,
  filetypes: z.array(z.string()).min(1).optional(),
  max_files: z.number().int().min(1).max(LIMITS.fileInputFiles).optional(),
});

const menus = [
  staticSelectSchema,
  multiStaticSelectSchema,
  usersSelectSchema,
  conversationsSelectSchema,
  channelsSelectSchema,
  radioButtonsSchema,
  checkboxesSchema,
  datepickerSchema,
  timepickerSchema,
] as const;

export const actionElementSchema = z.discriminatedUnion('type', [buttonSchema, overflowSchema, ...menus]);
export const inputElementSchema = z.discriminatedUnion('type', [
  plainTextInputSchema,
  numberInputSchema,
  fileInputSchema,
  ...menus,
]);

export type ActionElement = z.infer<typeof actionElementSchema>;
export type InputElement = z.infer<typeof inputElementSchema>;
export type InteractiveElement = ActionElement | InputElement;
