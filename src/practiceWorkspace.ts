import { readFile } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { z } from 'zod';
import type { ChannelApp } from './channel/buildApp.ts';
import type { PracticeService, PracticeServiceOptions } from './practice/service.ts';
import { startPracticeService } from './practice/service.ts';
import type { Store } from './store/types.ts';

// From src as from dist, the exports lie beside it.
const EXPORTS = new URL('../fixtures/exports/', import.meta.url);
const LOADED = 'marrowby-recipe-cards.csv';
const CHANNEL = 'retention';

const truthSchema = z.object({ exports: z.array(z.object({ file: z.string(), story: z.string() })) });

/** The sample exports the page offers, each with what is true about it. */
export async function samples(): Promise<{ name: string; description: string; path: string }[]> {
  const truth = truthSchema.parse(JSON.parse(await readFile(new URL('truth.json', EXPORTS), 'utf8')));
  return truth.exports.map(({ file, story }) => ({
    name: file,
    description: story,
    path: fileURLToPath(new URL(file, EXPORTS)),
  }));
}

/** How many ports after the first are tried. */
const PORTS_TRIED = 20;

/** Starts the stand-in on its port, or, when that may move, on the next free one. */
export async function startOnFreePort(
  options: PracticeServiceOptions & { readonly port: number },
  mayMove: boolean,
): Promise<PracticeService> {
  for (let port = options.port; ; port++) {
    try {
      return await startPracticeService({ ...options, port });
    } catch (error) {
      const taken = (error as NodeJS.ErrnoException).code === 'EADDRINUSE';
      if (!taken || !mayMove || port >= options.port + PORTS_TRIED) throw error;
    }
  }
}

/**
 * Drops the invented business into its channel, as a person would, when nothing was handed in there yet; else says what is still there.
 */
export async function furnish(
  service: PracticeService,
  store: Store,
  app: Pick<ChannelApp, 'sayStillHere'>,
): Promise<void> {
  const channel = service.world.channel(CHANNEL);
  const workspace = await store.workspace(channel.team);
  const dataset = await workspace.currentDataset(channel.id);
  if (dataset) {
    await app.sayStillHere(channel.id, dataset);
    return;
  }
  service.as('wren').drop(CHANNEL, [{ path: fileURLToPath(new URL(LOADED, EXPORTS)) }], {
    text: 'Our accounts up to the end of June. Did anything change?',
  });
}
