/** Modals and the Home tab. */
import { z } from 'zod';
import { blockSchema } from './blocks.ts';
import { LIMITS } from './limits.ts';
import { identifier, plainText } from './text.ts';

const viewFields = {
  blocks: z.array(blockSchema).max(LIMITS.viewBlocks),
  callback_id: identifier,
  external_id: identifier,
  private_metadata: z.string().max(LIMITS.privateMetadata).optional(),
};

export const modalSchema = z
  .strictObject({
    type: z.literal('modal'),
    ...viewFields,
    title: plainText(LIMITS.modalTitle),
    submit: plainText(LIMITS.modalTitle).optional(),
    close: plainText(LIMITS.modalTitle).optional(),
    clear_on_close: z.boolean().optional(),
    notify_on_close: z.boolean().optional(),
    submit_disabled: z.boolean().optional(),
  })
  .refine((v) => v.submit !== undefined || !v.blocks.some((b) => b.type === 'input'), {
    path: ['submit'],
    message: 'must define submit to use an input block in modals',
  });

export const homeSchema = z.strictObject({ type: z.literal('home'), ...viewFields });

export const viewSchema = z.discriminatedUnion('type', [modalSchema, homeSchema]);

export type ViewInput = z.infer<typeof viewSchema>;
