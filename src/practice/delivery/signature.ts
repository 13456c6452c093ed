/** Signing what goes to the app. */
import { createHmac } from 'node:crypto';

/**
 * Headers that let the app check who sent the body.
 * @param body the exact bytes that are sent, as text
 * Source: "Verifying requests from Slack", docs.slack.dev: HMAC-SHA256 over `v0:{timestamp}:{body}`, hex, prefixed `v0=`.
 */
export function signatureHeaders(secret: string, body: string, nowMs: number): Record<string, string> {
  const timestamp = String(Math.floor(nowMs / 1000));
  const digest = createHmac('sha256', secret).update(`v0:${timestamp}:${body}`).digest('hex');
  return { 'x-slack-request-timestamp': timestamp, 'x-slack-signature': `v0=${digest}` };
}
