/** Socket mode: the app connects to us, and what would have been a request becomes an envelope it must acknowledge. */
import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';
import { acceptWebSocket, type ServerSocket } from './webSocket.ts';

export interface Envelope {
  readonly type: 'events_api' | 'slash_commands' | 'interactive';
  readonly payload: unknown;
  readonly retryNum: number;
  readonly retryReason: string | undefined;
}

export interface SocketMode {
  /** a fresh single-use address for apps.connections.open */
  newUrl(baseUrl: string): string;
  upgrade(request: IncomingMessage, stream: Duplex, head: Buffer): void;
  connected(): number;
  /** @returns the acknowledgement's payload, or undefined when none came in time or the socket went away */
  send(envelope: Envelope, timeoutMs: number): Promise<{ payload: unknown } | undefined>;
  disconnectAll(reason: 'warning' | 'refresh_requested'): void;
  close(): void;
}

const MAX_SOCKETS = 10;

export function createSocketMode(options: {
  appId: string;
  newId: (prefix: string) => string;
  onConnected: () => void;
}): SocketMode {
  const tickets = new Set<string>();
  const sockets: ServerSocket[] = [];
  const waiting = new Map<string, { socket: ServerSocket; settle: (ack: { payload: unknown } | undefined) => void }>();
  let turn = 0;

  function forget(socket: ServerSocket): void {
    const index = sockets.indexOf(socket);
    if (index >= 0) sockets.splice(index, 1);
    for (const entry of [...waiting.values()]) if (entry.socket === socket) entry.settle(undefined);
  }

  function acknowledge(text: string): void {
    try {
      const message = JSON.parse(text) as { envelope_id?: unknown; payload?: unknown };
      if (typeof message.envelope_id === 'string')
        waiting.get(message.envelope_id)?.settle({ payload: message.payload });
    } catch {
      // Not ours to judge: the real service ignores what it cannot read, and the envelope times out.
    }
  }

  return {
    newUrl: (baseUrl) => {
      const ticket = options.newId('') + options.newId('');
      tickets.add(ticket);
      return `${baseUrl.replace(/^http/, 'ws')}/socket?ticket=${ticket}&app_id=${options.appId}`;
    },
    upgrade: (request, stream, head) => {
      const ticket = new URL(request.url ?? '/', 'http://127.0.0.1').searchParams.get('ticket') ?? '';
      if (!tickets.delete(ticket) || sockets.length >= MAX_SOCKETS) {
        stream.end('HTTP/1.1 403 Forbidden\r\nconnection: close\r\n\r\n');
        return;
      }
      const socket = acceptWebSocket(request, stream, head);
      if (!socket) return;
      sockets.push(socket);
      socket.onMessage = acknowledge;
      socket.onClose = () => forget(socket);
      socket.send(
        JSON.stringify({
          type: 'hello',
          num_connections: sockets.length,
          connection_info: { app_id: options.appId },
          debug_info: { host: 'practice', approximate_connection_time: 18_060 },
        }),
      );
      options.onConnected();
    },
    connected: () => sockets.length,
    send: (envelope, timeoutMs) => {
      // Any one of an app's sockets gets the payload.
      const socket = sockets[turn++ % Math.max(sockets.length, 1)];
      if (!socket) return Promise.resolve(undefined);
      const envelopeId = options.newId('E');
      return new Promise((resolve) => {
        const settle = (ack: { payload: unknown } | undefined) => {
          clearTimeout(timer);
          waiting.delete(envelopeId);
          resolve(ack);
        };
        const timer = setTimeout(() => settle(undefined), timeoutMs);
        waiting.set(envelopeId, { socket, settle });
        socket.send(
          JSON.stringify({
            envelope_id: envelopeId,
            type: envelope.type,
            accepts_response_payload: envelope.type !== 'events_api',
            payload: envelope.payload,
            ...(envelope.type === 'events_api'
              ? { retry_attempt: envelope.retryNum, retry_reason: envelope.retryReason ?? '' }
              : {}),
          }),
        );
      });
    },
    disconnectAll: (reason) => {
      for (const socket of [...sockets]) socket.send(JSON.stringify({ type: 'disconnect', reason, debug_info: {} }));
    },
    close: () => {
      for (const socket of [...sockets]) {
        socket.close(1001, 'going away');
        socket.destroy();
      }
      for (const entry of [...waiting.values()]) entry.settle(undefined);
    },
  };
}
