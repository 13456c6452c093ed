import { type DestinationStream, type Logger, pino } from 'pino';
import type { LogLevel } from './settings.ts';

/** Fields that hold what people wrote, what their files hold, or a secret: never written out. */
const HIDDEN = [
  'token',
  'botToken',
  'appToken',
  'signingSecret',
  'authorization',
  'payload',
  'text',
  'accountId',
  'err.detail',
  'err.config',
  'err.original.config',
  '*.token',
  '*.authorization',
  '*.text',
  '*.accountId',
];

/** Tokens of the chat service, and the secret part of a database address, wherever in a line they stand. */
const SECRETS: readonly (readonly [RegExp, string])[] = [
  [/\bx(?:ox[a-z]|app)(?:\.[a-z]+)?-[\w-]+/g, '[token]'],
  [/(postgres(?:ql)?:\/\/[^:/@\s"]+:)[^@\s"]+@/g, '$1[password]@'],
  [/(https:\/\/hooks\.slack\.com\/)[^\s"\\]+/g, '$1[address]'],
];

/**
 * The one log: JSON lines. Secrets and what people's files hold do not get into it.
 * Messages of deliberate errors may quote a value from a file, so only their code is kept.
 */
export function createLog(level: LogLevel, destination: DestinationStream): Logger {
  return pino(
    {
      level,
      redact: { paths: HIDDEN, censor: '[hidden]' },
      serializers: { err: describeError },
      hooks: {
        streamWrite: (line) => SECRETS.reduce((text, [pattern, instead]) => text.replace(pattern, instead), line),
      },
    },
    destination,
  );
}

function describeError(error: unknown): unknown {
  if (!(error instanceof Error)) return { type: typeof error };
  const { code, kind } = error as { code?: unknown; kind?: unknown };
  // A deliberate error about a file quotes it.
  const quotes = error.name === 'EbbError' && kind === 'input';
  return {
    type: error.name,
    ...(code === undefined ? {} : { code }),
    message: quotes ? '[about the file]' : error.message,
    ...(quotes ? {} : { stack: error.stack }),
    ...(error.cause instanceof Error ? { cause: describeError(error.cause) } : {}),
  };
}
