/** Reading a request's body and turning it into fields: form, JSON or multipart, as the real service takes them. */
import type { IncomingMessage } from 'node:http';
import { splitMultipart } from './multipart.ts';

export class BodyTooLarge extends Error {}

export async function readBody(request: IncomingMessage, limitBytes: number): Promise<Buffer> {
  const chunks: Buffer[] = [];
  let size = 0;
  for await (const chunk of request as AsyncIterable<Buffer>) {
    size += chunk.byteLength;
    if (size > limitBytes) throw new BodyTooLarge(`the body is larger than ${limitBytes} bytes`);
    chunks.push(chunk);
  }
  return Buffer.concat(chunks);
}

export function mediaType(request: IncomingMessage): string {
  return (request.headers['content-type'] ?? '').split(';')[0]?.trim().toLowerCase() ?? '';
}

/** @returns undefined when the body is not what its content type says */
export function fieldsOf(request: IncomingMessage, body: Buffer): Record<string, unknown> | undefined {
  const type = mediaType(request);
  if (body.byteLength === 0) return {};
  if (type === 'application/json') {
    try {
      const value: unknown = JSON.parse(body.toString('utf8'));
      return value !== null && typeof value === 'object' && !Array.isArray(value)
        ? (value as Record<string, unknown>)
        : undefined;
    } catch {
      return undefined;
    }
  }
  if (type === 'multipart/form-data') {
    const parts = splitMultipart(request.headers['content-type'] ?? '', body);
    return parts && Object.fromEntries(parts.map((part) => [part.name, part.data.toString('utf8')]));
  }
  return Object.fromEntries(new URLSearchParams(body.toString('utf8')));
}
