/** Blocks for messages, modals and the Home tab, each with its published limits. */
import { z } from 'zod';
import { actionElementSchema, inputElementSchema } from './elements.ts';
import { LIMITS } from './limits.ts';
import { richTextSchema } from './richText.ts';
import { anyText, identifier, mrkdwnText, plainText } from './text.ts';

const id = { block_id: identifier };

/** Either an id as the platform writes them, or the file's address; never both. */
export const slackFileSchema = z
  .strictObject({
    id: z
      .string()
      .regex(/^F[A-Z0-9]{8,}$/, 'must match the pattern ^F[A-Z0-9]{8,}$')
      .optional(),
    url: z.string().max(LIMITS.url).optional(),
  })
  .refine((f) => (f.id === undefined) !== (f.url === undefined), 'exactly one of id and url is required');

const imageFields = {
  type: z.literal('image'),
  alt_text: z.string().min(1).max(LIMITS.imageAlt),
  image_url: z.string().max(LIMITS.url).optional(),
  slack_file: slackFileSchema.optional(),
};
const imageSource = (i: { image_url?: unknown; slack_file?: unknown }) =>
  (i.image_url === undefined) !== (i.slack_file === undefined);
const imageSourceMessage = 'exactly one of image_url and slack_file is required';

export const imageElementSchema = z.strictObject(imageFields).refine(imageSource, imageSourceMessage);

export const imageBlockSchema = z
  .strictObject({ ...imageFields, ...id, title: plainText(LIMITS.imageTitle).optional() })
  .refine(imageSource, imageSourceMessage);

export const sectionSchema = z
  .strictObject({
    type: z.literal('section'),
    ...id,
    text: anyText(LIMITS.sectionText).optional(),
    fields: z.array(anyText(LIMITS.fieldText)).min(1).max(LIMITS.sectionFields).optional(),
    accessory: z.discriminatedUnion('type', [...actionElementSchema.options, imageElementSchema]).optional(),
    expand: z.boolean().optional(),
  })
  .refine((s) => s.text !== undefined || s.fields !== undefined, 'one of text and fields is required');

export const headerSchema = z.strictObject({
  type: z.literal('header'),
  ...id,
  text: plainText(LIMITS.headerText),
});

export const contextSchema = z.strictObject({
  type: z.literal('context'),
  ...id,
  elements: z
    .array(
      z.discriminatedUnion('type', [plainText(LIMITS.fieldText), mrkdwnText(LIMITS.fieldText), imageElementSchema]),
    )
    .min(1)
    .max(LIMITS.contextElements),
});

export const actionsSchema = z.strictObject({
  type: z.literal('actions'),
  ...id,
  elements: z.array(actionElementSchema).min(1).max(LIMITS.actionsElements),
});

export const dividerSchema = z.strictObject({ type: z.literal('divider'), ...id });

export const inputSchema = z.strictObject({
  type: z.literal('input'),
  ...id,
  label: plainText(LIMITS.label),
  hint: plainText(LIMITS.hint).optional(),
  optional: z.boolean().optional(),
  dispatch_action: z.boolean().optional(),
  element: inputElementSchema,
});

export const markdownSchema = z.strictObject({
  type: z.literal('markdown'),
  ...id,
  text: z.string().min(1).max(LIMITS.markdownText),
});

const cellSchema = z.discriminatedUnion('type', [
  richTextSchema,
  z.strictObject({ type: z.literal('raw_text'), text: z.string() }),
  z.strictObject({ type: z.literal('raw_number'), value: z.number(), text: z.string().optional() }),
]);

export const tableSchema = z.strictObject({
  type: z.literal('table'),
  ...id,
  rows: z.array(z.array(cellSchema).min(1).max(LIMITS.tableCells)).min(1).max(LIMITS.tableRows),
  column_settings: z
    .array(
      z
        .strictObject({ align: z.enum(['left', 'center', 'right']).optional(), is_wrapped: z.boolean().optional() })
        .nullable(),
    )
    .max(LIMITS.tableCells)
    .optional(),
});

export const blockSchema = z.discriminatedUnion('type', [
  sectionSchema,
  headerSchema,
  contextSchema,
  actionsSchema,
  dividerSchema,
  imageBlockSchema,
  inputSchema,
  markdownSchema,
  tableSchema,
  richTextSchema,
]);

export type Block = z.infer<typeof blockSchema>;
export type ImageElement = z.infer<typeof imageElementSchema>;
export type TableCell = z.infer<typeof cellSchema>;
export type TableBlock = z.infer<typeof tableSchema>;
export type SlackFileRef = z.infer<typeof slackFileSchema>;
