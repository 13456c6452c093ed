/**
 * Getting things to the app and knowing how it went, over signed HTTP or socket mode. Events are tried again as the real service does;
 * commands and interactions are not.
 */
import { type FailureReason, postSigned } from './post.ts';
import type { SocketMode } from './socketMode.ts';

export interface Attempt {
  readonly retryNum: number;
  readonly retryReason: string | undefined;
  readonly outcome: 'acknowledged' | FailureReason | 'timeout';
  readonly status: number | undefined;
}

export interface Delivery {
  readonly id: string;
  readonly kind: 'event' | 'command' | 'interaction';
  readonly payload: Readonly<Record<string, unknown>>;
  readonly attempts: Attempt[];
  /** held: no app is connected yet; the event goes out when one is */
  state: 'held' | 'waiting' | 'acknowledged' | 'failed';
}

export type Outcome =
  | { readonly ok: true; readonly reply: unknown }
  | { readonly ok: false; readonly error: 'operation_timeout' | 'dispatch_failed' | 'app_unreachable' };

export interface AppLink {
  sendEvent(id: string, envelope: Record<string, unknown>): void;
  /** sends an envelope that was already sent once more, under the same event_id */
  redeliver(id: string): void;
  ask(kind: 'command' | 'interaction', payload: Record<string, unknown>): Promise<Outcome>;
  setUrl(url: string): void;
  flushHeld(): void;
  isReachable(): boolean;
  readonly deliveries: readonly Delivery[];
  close(): void;
}

/** The first retry comes almost at once, then after one and five minutes. Source: Events API page, docs.slack.dev. */
export const RETRY_DELAYS_MS = [100, 60_000, 300_000] as const;
const KEPT_DELIVERIES = 2000;
const HELD_EVENTS = 500;

export function createAppLink(options: {
  secret: string;
  now: () => number;
  newId: (prefix: string) => string;
  sockets: SocketMode;
  retryDelaysMs: readonly number[];
  ackTimeoutMs: number;
  onChange: () => void;
  log: (message: string, facts: Record<string, unknown>) => void;
}): AppLink {
  const { sockets } = options;
  const deliveries: Delivery[] = [];
  const timers = new Set<NodeJS.Timeout>();
  const stop = new AbortController();
  let url: string | undefined;

  function record(id: string, kind: Delivery['kind'], payload: Record<string, unknown>): Delivery {
    const delivery: Delivery = { id, kind, payload, attempts: [], state: 'waiting' };
    deliveries.push(delivery);
    if (deliveries.length > KEPT_DELIVERIES) deliveries.shift();
    return delivery;
  }

  function settle(delivery: Delivery, state: Delivery['state']): void {
    if (stop.signal.aborted) return;
    delivery.state = state;
    if (state === 'failed')
      options.log('the app did not take a delivery', { id: delivery.id, attempts: delivery.attempts });
    options.onChange();
  }

  const reachable = () => url !== undefined || sockets.connected() > 0;

  async function attempt(
    delivery: Delivery,
    retryNum: number,
    retryReason: string | undefined,
  ): Promise<Outcome & { noRetry?: boolean }> {
    const socketTypes = { event: 'events_api', command: 'slash_commands', interaction: 'interactive' } as const;
    if (sockets.connected() > 0) {
      const envelope = { type: socketTypes[delivery.kind], payload: delivery.payload, retryNum, retryReason };
      const ack = await sockets.send(envelope, options.ackTimeoutMs);
      delivery.attempts.push({ retryNum, retryReason, outcome: ack ? 'acknowledged' : 'timeout', status: undefined });
      return ack ? { ok: true, reply: socketReply(ack.payload) } : { ok: false, error: 'operation_timeout' };
    }
    if (url === undefined) return { ok: false, error: 'app_unreachable' };
    const { body, contentType } = encode(delivery);
    const result = await postSigned(
      url,
      {
        body,
        contentType,
        headers:
          retryNum > 0
            ? { 'x-slack-retry-num': String(retryNum), 'x-slack-retry-reason': retryReason ?? 'unknown_error' }
            : {},
      },
      { secret: options.secret, nowMs: options.now(), timeoutMs: options.ackTimeoutMs, signal: stop.signal },
    );
    if (result.ok) {
      delivery.attempts.push({ retryNum, retryReason, outcome: 'acknowledged', status: result.status });
      return { ok: true, reply: readReply(result.body) };
    }
    delivery.attempts.push({ retryNum, retryReason, outcome: result.reason, status: result.status });
    const error = result.reason === 'http_timeout' ? 'operation_timeout' : 'dispatch_failed';
    return { ok: false, error, noRetry: result.noRetry };
  }

  async function tryEvent(delivery: Delivery, retryNum: number): Promise<void> {
    if (!reachable()) return settle(delivery, 'held');
    const outcome = await attempt(delivery, retryNum, retryNum === 0 ? undefined : delivery.attempts.at(-1)?.outcome);
    if (stop.signal.aborted) return;
    if (outcome.ok) return settle(delivery, 'acknowledged');
    const delay = options.retryDelaysMs[retryNum];
    if (outcome.noRetry === true || delay === undefined) return settle(delivery, 'failed');
    options.onChange();
    const timer = setTimeout(() => {
      timers.delete(timer);
      void tryEvent(delivery, retryNum + 1);
    }, delay);
    timers.add(timer);
  }

  return {
    deliveries,
    sendEvent: (id, envelope) => {
      void tryEvent(record(id, 'event', envelope), 0);
    },
    redeliver: (id) => {
      const earlier = deliveries.find((d) => d.id === id && d.kind === 'event');
      if (!earlier) throw new RangeError(`no event ${id} has been sent`);
      const again = record(id, 'event', earlier.payload);
      again.attempts.push({ retryNum: 0, retryReason: undefined, outcome: 'http_timeout', status: undefined });
      void tryEvent(again, 1);
    },
    ask: async (kind, payload) => {
      const delivery = record(options.newId('I'), kind, payload);
      options.onChange();
      const outcome = await attempt(delivery, 0, undefined);
      settle(delivery, outcome.ok ? 'acknowledged' : 'failed');
      return outcome.ok ? outcome : { ok: false, error: outcome.error };
    },
    setUrl: (next) => {
      url = next;
    },
    flushHeld: () => {
      const held = deliveries.filter((d) => d.state === 'held').slice(-HELD_EVENTS);
      for (const delivery of held) {
        delivery.state = 'waiting';
        void tryEvent(delivery, 0);
      }
    },
    isReachable: reachable,
    close: () => {
      stop.abort();
      for (const timer of timers) clearTimeout(timer);
    },
  };
}

/** Events go as JSON; a command as flat form fields; an interaction as one form field that holds JSON. */
function encode(delivery: Delivery): { body: string; contentType: string } {
  if (delivery.kind === 'event') return { body: JSON.stringify(delivery.payload), contentType: 'application/json' };
  const fields =
    delivery.kind === 'command'
      ? (delivery.payload as Record<string, string>)
      : { payload: JSON.stringify(delivery.payload) };
  return { body: new URLSearchParams(fields).toString(), contentType: 'application/x-www-form-urlencoded' };
}

function readReply(body: string): unknown {
  if (body === '') return undefined;
  try {
    return JSON.parse(body) as unknown;
  } catch {
    return body;
  }
}

/** An acknowledgement without content carries an empty object or nothing; both mean: no reply. */
function socketReply(payload: unknown): unknown {
  if (payload === null || payload === undefined) return undefined;
  return typeof payload === 'object' && Object.keys(payload).length === 0 ? undefined : payload;
}
