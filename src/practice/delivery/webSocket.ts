/**
 * The server's half of a WebSocket: enough of RFC 6455 for text messages, pings and an orderly end. No extensions, no subprotocols.
 * Written here because the practice service needs nothing more, and a dependency would come along into production.
 */
import { createHash } from 'node:crypto';
import type { IncomingMessage } from 'node:http';
import type { Duplex } from 'node:stream';

const GUID = '258EAFA5-E914-47DA-95CA-C5AB0DC85B11';
const MAX_MESSAGE_BYTES = 16 * 1024 * 1024;
const OP = { continuation: 0, text: 1, binary: 2, close: 8, ping: 9, pong: 10 } as const;

export interface ServerSocket {
  send(text: string): void;
  ping(): void;
  close(code: number, reason: string): void;
  destroy(): void;
  onMessage: (text: string) => void;
  onClose: () => void;
}

export function acceptKey(key: string): string {
  return createHash('sha1')
    .update(key + GUID)
    .digest('base64');
}

/** Answers the upgrade; @returns undefined (and ends the connection) when the request is no WebSocket handshake */
export function acceptWebSocket(request: IncomingMessage, stream: Duplex, head: Buffer): ServerSocket | undefined {
  const key = request.headers['sec-websocket-key'];
  if (request.headers.upgrade?.toLowerCase() !== 'websocket' || key === undefined) {
    stream.end('HTTP/1.1 400 Bad Request\r\nconnection: close\r\n\r\n');
    return undefined;
  }
  stream.write(
    `HTTP/1.1 101 Switching Protocols\r\nupgrade: websocket\r\nconnection: Upgrade\r\nsec-websocket-accept: ${acceptKey(key)}\r\n\r\n`,
  );
  let buffered: Buffer = head;
  let fragments: Buffer[] = [];
  let ended = false;
  const write = (opcode: number, payload: Buffer) => {
    if (!stream.destroyed && stream.writable) stream.write(frame(opcode, payload));
  };
  const end = () => {
    if (ended) return;
    ended = true;
    socket.onClose();
  };
  const socket: ServerSocket = {
    onMessage: () => undefined,
    onClose: () => undefined,
    send: (text) => write(OP.text, Buffer.from(text)),
    ping: () => write(OP.ping, Buffer.alloc(0)),
    close: (code, reason) => {
      const payload = Buffer.alloc(2 + Buffer.byteLength(reason));
      payload.writeUInt16BE(code, 0);
      payload.write(reason, 2);
      write(OP.close, payload);
      stream.end();
    },
    destroy: () => stream.destroy(),
  };
  const take = (opcode: number, final: boolean, payload: Buffer) => {
    if (opcode === OP.ping) write(OP.pong, payload);
    else if (opcode === OP.close) {
      write(OP.close, payload.subarray(0, 2));
      stream.end();
      end();
    } else if (opcode === OP.text || opcode === OP.binary || opcode === OP.continuation) {
      fragments.push(payload);
      if (fragments.reduce((sum, f) => sum + f.byteLength, 0) > MAX_MESSAGE_BYTES) return void stream.destroy();
      if (!final) return;
      const text = Buffer.concat(fragments).toString('utf8');
      fragments = [];
      socket.onMessage(text);
    }
  };
  const drain = () => {
    for (;;) {
      const parsed = readFrame(buffered);
      if (parsed === 'too-large') return void stream.destroy();
      if (parsed === undefined) return;
      buffered = buffered.subarray(parsed.length);
      take(parsed.opcode, parsed.final, parsed.payload);
    }
  };
  stream.on('data', (chunk: Buffer) => {
    buffered = Buffer.concat([buffered, chunk]);
    drain();
  });
  stream.on('close', end);
  stream.on('error', () => stream.destroy());
  // The first frames may have come with the handshake; the caller gets a turn to set its handlers.
  queueMicrotask(drain);
  return socket;
}

function frame(opcode: number, payload: Buffer): Buffer {
  const size = payload.byteLength;
  const header = size < 126 ? Buffer.from([0x80 | opcode, size]) : Buffer.alloc(size < 65_536 ? 4 : 10);
  if (size >= 126) {
    header[0] = 0x80 | opcode;
    header[1] = size < 65_536 ? 126 : 127;
    if (size < 65_536) header.writeUInt16BE(size, 2);
    else header.writeBigUInt64BE(BigInt(size), 2);
  }
  return Buffer.concat([header, payload]);
}

/** @returns undefined while the frame has not arrived whole */
export function readFrame(
  data: Buffer,
): { opcode: number; final: boolean; payload: Buffer; length: number } | 'too-large' | undefined {
  if (data.byteLength < 2) return undefined;
  const first = data.readUInt8(0);
  const second = data.readUInt8(1);
  const masked = (second & 0x80) !== 0;
  let size = second & 0x7f;
  let at = 2;
  if (size === 126) {
    if (data.byteLength < 4) return undefined;
    size = data.readUInt16BE(2);
    at = 4;
  } else if (size === 127) {
    if (data.byteLength < 10) return undefined;
    const large = data.readBigUInt64BE(2);
    if (large > BigInt(MAX_MESSAGE_BYTES)) return 'too-large';
    size = Number(large);
    at = 10;
  }
  const maskAt = at;
  if (masked) at += 4;
  if (data.byteLength < at + size) return undefined;
  const payload = Buffer.from(data.subarray(at, at + size));
  if (masked) {
    for (let i = 0; i < size; i++) payload.writeUInt8(payload.readUInt8(i) ^ data.readUInt8(maskAt + (i & 3)), i);
  }
  return { opcode: first & 0x0f, final: (first & 0x80) !== 0, payload, length: at + size };
}
