import {
  type RetryOptions,
  WebAPIHTTPError,
  WebAPIPlatformError,
  WebAPIRateLimitedError,
  WebAPIRequestError,
  WebClient,
} from '@slack/web-api';
import { boltLogger } from '../logging.ts';
import type { ChannelDeps } from '../types.ts';

/** Few and quick: the queue tries again later, and a call that hangs for half an hour helps nobody. */
const RETRIES: RetryOptions = { retries: 2, factor: 2, minTimeout: 250, maxTimeout: 2000, randomize: true };
const TIMEOUT_MS = 20_000;

/** Options for every client of the chat service. Never `headers`: the client writes the first token into that object. */
export function clientOptions(deps: Pick<ChannelDeps, 'slack'>) {
  return {
    retryConfig: RETRIES,
    timeout: TIMEOUT_MS,
    ...(deps.slack.apiUrl === undefined ? {} : { slackApiUrl: deps.slack.apiUrl }),
  };
}

export function webClient(deps: Pick<ChannelDeps, 'slack' | 'log'>): WebClient {
  return new WebClient(deps.slack.botToken, { ...clientOptions(deps), logger: boltLogger(deps.log) });
}

/** For posting only: a call whose answer was lost may have been carried out, so the client must not try it again by itself. */
export function onceOnlyClient(deps: Pick<ChannelDeps, 'slack' | 'log'>): WebClient {
  return new WebClient(deps.slack.botToken, {
    ...clientOptions(deps),
    retryConfig: { retries: 0 },
    logger: boltLogger(deps.log),
  });
}

/** The error code with which the service refused a call, or undefined for anything else. */
export function refusal(error: unknown): string | undefined {
  return error instanceof WebAPIPlatformError ? String(error.data.error) : undefined;
}

/** The reasons given beside the code: "invalid slack file [json-pointer:/blocks/2/slack_file]". */
export function refusalDetails(error: unknown): readonly string[] {
  if (!(error instanceof WebAPIPlatformError)) return [];
  const messages = (error.data as { response_metadata?: { messages?: unknown } }).response_metadata?.messages;
  return Array.isArray(messages) ? messages.map(String) : [];
}

/** Whether trying again later may help: the network, an overloaded service, or too many calls. */
export function mayPass(error: unknown): boolean {
  return (
    error instanceof WebAPIRequestError || error instanceof WebAPIHTTPError || error instanceof WebAPIRateLimitedError
  );
}
