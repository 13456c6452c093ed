import { type Logger as BoltLogger, LogLevel } from '@slack/bolt';
import type { Logger } from 'pino';

/** Bolt's log lines go where ours go. It names tokens only in what it calls debug, which is left out. */
export function boltLogger(log: Logger): BoltLogger {
  const scoped = log.child({ part: 'bolt' });
  const words = (parts: unknown[]): string =>
    parts
      .map((part) => (part instanceof Error ? part.message : typeof part === 'string' ? part : JSON.stringify(part)))
      .join(' ');
  return {
    debug: () => undefined,
    info: (...parts) => scoped.debug(words(parts)),
    warn: (...parts) => scoped.warn(words(parts)),
    error: (...parts) => scoped.error(words(parts)),
    setLevel: () => undefined,
    getLevel: () => LogLevel.INFO,
    setName: () => undefined,
  };
}
