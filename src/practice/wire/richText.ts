/** Rich text: what the typing box of the real service produces, and what table cells may hold. */
import { z } from 'zod';
import { identifier } from './text.ts';

const style = z
  .strictObject({
    bold: z.boolean().optional(),
    italic: z.boolean().optional(),
    strike: z.boolean().optional(),
    code: z.boolean().optional(),
    underline: z.boolean().optional(),
    highlight: z.boolean().optional(),
    client_highlight: z.boolean().optional(),
    unlink: z.boolean().optional(),
  })
  .optional();

export const richTextElementSchema = z.discriminatedUnion('type', [
  z.strictObject({ type: z.literal('text'), text: z.string().min(1), style }),
  z.strictObject({
    type: z.literal('link'),
    url: z.string(),
    text: z.string().optional(),
    unsafe: z.boolean().optional(),
    style,
  }),
  z.strictObject({ type: z.literal('user'), user_id: z.string(), style }),
  z.strictObject({ type: z.literal('channel'), channel_id: z.string(), style }),
  z.strictObject({
    type: z.literal('emoji'),
    name: z.string(),
    unicode: z.string().optional(),
    url: z.string().optional(),
    style,
  }),
  z.strictObject({ type: z.literal('broadcast'), range: z.enum(['here', 'channel', 'everyone']), style }),
  z.strictObject({
    type: z.literal('date'),
    timestamp: z.number().int(),
    format: z.string(),
    url: z.string().optional(),
    fallback: z.string().optional(),
    style,
  }),
]);

const sectionSchema = z.strictObject({
  type: z.literal('rich_text_section'),
  elements: z.array(richTextElementSchema),
});

const border = { border: z.union([z.literal(0), z.literal(1)]).optional() };

export const richTextPartSchema = z.discriminatedUnion('type', [
  sectionSchema,
  z.strictObject({
    type: z.literal('rich_text_list'),
    elements: z.array(sectionSchema),
    style: z.enum(['bullet', 'ordered']),
    indent: z.number().int().min(0).max(8).optional(),
    offset: z.number().int().min(0).optional(),
    ...border,
  }),
  z.strictObject({ type: z.literal('rich_text_quote'), elements: z.array(richTextElementSchema), ...border }),
  z.strictObject({
    type: z.literal('rich_text_preformatted'),
    elements: z.array(richTextElementSchema),
    language: z.string().optional(),
    ...border,
  }),
]);

export const richTextSchema = z.strictObject({
  type: z.literal('rich_text'),
  block_id: identifier,
  elements: z.array(richTextPartSchema).min(1),
});

export type RichText = z.infer<typeof richTextSchema>;
export type RichTextElement = z.infer<typeof richTextElementSchema>;
