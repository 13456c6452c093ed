/** Just enough of multipart/form-data (RFC 7578) to take what the API client sends: whole bodies, no nesting. */
export interface Part {
  readonly name: string;
  readonly filename: string | undefined;
  readonly data: Buffer;
}

/** @returns undefined when the boundary is missing or the body does not follow it */
export function splitMultipart(contentType: string, body: Buffer): Part[] | undefined {
  const boundary = /boundary="?([^";]+)"?/i.exec(contentType)?.[1];
  if (boundary === undefined) return undefined;
  const mark = Buffer.from(`--${boundary}`);
  const parts: Part[] = [];
  let at = body.indexOf(mark);
  while (at >= 0) {
    const start = at + mark.length;
    if (body.subarray(start, start + 2).toString('latin1') === '--') return parts;
    const next = body.indexOf(Buffer.concat([Buffer.from('\r\n'), mark]), start);
    const headEnd = body.indexOf('\r\n\r\n', start);
    if (next < 0 || headEnd < 0 || headEnd > next) return undefined;
    const head = body.subarray(start, headEnd).toString('utf8');
    parts.push({
      name: /\bname="([^"]*)"/i.exec(head)?.[1] ?? '',
      filename: /\bfilename="([^"]*)"/i.exec(head)?.[1],
      data: body.subarray(headEnd + 4, next),
    });
    at = next + 2;
  }
  return undefined;
}
