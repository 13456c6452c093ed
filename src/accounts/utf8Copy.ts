import { open } from 'node:fs/promises';
import type { Encoding } from './fileStart.ts';

const CHUNK_BYTES = 1 << 20;

/**
 * Copies a file as UTF-8 with plain line feeds, so that every later step knows one encoding and one line end.
 * The number of lines stays the same. Reads a megabyte at a time.
 */
export async function utf8Copy(from: string, to: string, encoding: Encoding, markBytes: number): Promise<void> {
  const source = await open(from, 'r');
  try {
    const target = await open(to, 'wx', 0o600);
    try {
      const decoder = new TextDecoder(encoding);
      const buffer = Buffer.alloc(CHUNK_BYTES);
      let position = markBytes;
      let heldReturn = false;
      for (;;) {
        const { bytesRead } = await source.read(buffer, 0, CHUNK_BYTES, position);
        position += bytesRead;
        let text = decoder.decode(buffer.subarray(0, bytesRead), { stream: bytesRead > 0 });
        if (heldReturn) text = `\r${text}`;
        // A return at the very end may be the first half of a pair.
        heldReturn = bytesRead > 0 && text.endsWith('\r');
        if (heldReturn) text = text.slice(0, -1);
        await target.write(text.replace(/\r\n?/g, '\n'));
        if (bytesRead === 0) return;
      }
    } finally {
      await target.close();
    }
  } finally {
    await source.close();
  }
}
