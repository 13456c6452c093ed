/** Text objects, options and confirm dialogs: the small pieces that blocks and elements share. */
import { z } from 'zod';
import { LIMITS } from './limits.ts';

export function plainText(max: number) {
  return z.strictObject({
    type: z.literal('plain_text'),
    text: z.string().min(1).max(max),
    emoji: z.boolean().optional(),
  });
}

export function mrkdwnText(max: number) {
  return z.strictObject({
    type: z.literal('mrkdwn'),
    text: z.string().min(1).max(max),
    verbatim: z.boolean().optional(),
  });
}

export function anyText(max: number) {
  return z.discriminatedUnion('type', [plainText(max), mrkdwnText(max)]);
}

export const identifier = z.string().max(LIMITS.id).optional();

export const optionSchema = z.strictObject({
  text: anyText(LIMITS.optionText),
  value: z.string().max(LIMITS.optionValue),
  description: anyText(LIMITS.optionText).optional(),
});

export const plainOptionSchema = z.strictObject({
  text: plainText(LIMITS.optionText),
  value: z.string().max(LIMITS.optionValue),
  description: plainText(LIMITS.optionText).optional(),
  url: z.string().max(LIMITS.url).optional(),
});

export const confirmSchema = z.strictObject({
  title: plainText(LIMITS.confirmTitle),
  text: anyText(LIMITS.confirmText),
  confirm: plainText(LIMITS.confirmButton),
  deny: plainText(LIMITS.confirmButton),
  style: z.enum(['primary', 'danger']).optional(),
});

export type AnyText = z.infer<ReturnType<typeof anyText>>;
export type Option = z.infer<typeof optionSchema>;
export type Confirm = z.infer<typeof confirmSchema>;
