/** One signed request to the app, with the service's patience: a time limit and at most two redirects. */
import { signatureHeaders } from './signature.ts';

export type FailureReason = 'http_timeout' | 'connection_failed' | 'http_error' | 'too_many_redirects';

export type PostResult =
  | { readonly ok: true; readonly status: number; readonly body: string }
  | {
      readonly ok: false;
      readonly reason: FailureReason;
      readonly status: number | undefined;
      readonly noRetry: boolean;
    };

const REDIRECTS = 2;

export async function postSigned(
  url: string,
  request: { body: string; contentType: string; headers?: Record<string, string> },
  options: { secret: string; nowMs: number; timeoutMs: number; signal: AbortSignal },
): Promise<PostResult> {
  const limit = AbortSignal.timeout(options.timeoutMs);
  let target = url;
  try {
    for (let hop = 0; hop <= REDIRECTS; hop++) {
      const response = await fetch(target, {
        method: 'POST',
        redirect: 'manual',
        // The bare type: with a charset appended the app's framework would read the form as JSON.
        headers: {
          'content-type': request.contentType,
          ...signatureHeaders(options.secret, request.body, options.nowMs),
          ...request.headers,
        },
        body: request.body,
        signal: AbortSignal.any([limit, options.signal]),
      });
      const body = await response.text();
      const next = response.headers.get('location');
      if (response.status >= 300 && response.status < 400 && next !== null) {
        target = new URL(next, target).href;
        continue;
      }
      if (response.ok) return { ok: true, status: response.status, body };
      const noRetry = response.headers.get('x-slack-no-retry') === '1';
      return { ok: false, reason: 'http_error', status: response.status, noRetry };
    }
    return { ok: false, reason: 'too_many_redirects', status: undefined, noRetry: false };
  } catch {
    return {
      ok: false,
      reason: limit.aborted ? 'http_timeout' : 'connection_failed',
      status: undefined,
      noRetry: false,
    };
  }
}
