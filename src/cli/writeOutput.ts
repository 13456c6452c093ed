import { writeFile } from 'node:fs/promises';
import { EbbError } from '../errors.ts';

/** Writes a file somebody asked for by option. */
export async function writeOutput(option: string, path: string, content: string | Uint8Array): Promise<void> {
  try {
    await writeFile(path, content);
  } catch (error) {
    const reason = error instanceof Error ? error.message : String(error);
    throw new EbbError(
      'PICTURE_UNWRITABLE',
      `${option}: ${path} cannot be written (${reason})`,
      'Name a file in a folder that exists and may be written to.',
      { cause: error },
    );
  }
}
