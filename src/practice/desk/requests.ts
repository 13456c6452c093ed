/** What the page may ask of the practice service. */
import { z } from 'zod';

const as = z.string();
const target = z.union([z.object({ channel: z.string(), ts: z.string() }), z.object({ view: z.string() })]);
const choice = z.union([z.string(), z.array(z.string()), z.null()]);
const threadTs = z.string().optional();

export const pageRequestSchema = z.discriminatedUnion('do', [
  z.object({ do: z.literal('say'), as, channel: z.string(), text: z.string(), threadTs }),
  z.object({
    do: z.literal('share'),
    as,
    channel: z.string(),
    files: z.array(z.string()).min(1),
    text: z.string(),
    threadTs,
  }),
  z.object({ do: z.literal('sample'), as, channel: z.string(), name: z.string() }),
  z.object({ do: z.literal('act'), as, target, actionId: z.string(), blockId: z.string(), choice }),
  z.object({ do: z.literal('fill'), as, target, actionId: z.string(), blockId: z.string(), choice }),
  z.object({ do: z.literal('submit'), as, view: z.string() }),
  z.object({ do: z.literal('close'), as, view: z.string(), all: z.boolean() }),
  z.object({ do: z.literal('shortcut'), as, channel: z.string(), ts: z.string(), callbackId: z.string() }),
  z.object({
    do: z.literal('react'),
    as,
    channel: z.string(),
    ts: z.string(),
    reaction: z.string(),
    added: z.boolean(),
  }),
  z.object({ do: z.literal('remove'), as, channel: z.string(), ts: z.string() }),
  z.object({ do: z.literal('invite'), as, channel: z.string() }),
  z.object({ do: z.literal('home'), as }),
]);

export type PageRequest = z.infer<typeof pageRequestSchema>;
