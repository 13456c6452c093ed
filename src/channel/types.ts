import type { Logger } from 'pino';
import type { Answers } from '../answers/useCases.ts';
import type { Store } from '../store/types.ts';

/*
 * The nouns of the channel.
 *
 * entry     one thing that came in, written down before it is acknowledged; worked from the queue
 * place     a channel and the message whose thread the reply goes to
 * step      one post of an entry's work; remembered, so that a repeated job does not post twice
 */

export interface SlackSettings {
  readonly botToken: string;
  /** another address of the chat service's API; only the practice service has one */
  readonly apiUrl?: string;
}

/** Everything the channel is given; it opens nothing itself. */
export interface ChannelDeps {
  readonly store: Store;
  readonly answers: Answers;
  readonly log: Logger;
  /** milliseconds since 1970 */
  readonly now: () => number;
  /** in [0, 1) */
  readonly random: () => number;
  readonly slack: SlackSettings;
  readonly maxUploadBytes: number;
  /** true in the practice workspace: replies may point to its samples */
  readonly practice: boolean;
  /** entries worked at a time; those of one channel are worked one after the other */
  readonly concurrency?: number;
  /** socket mode: the connection is gone and will not be tried again */
  readonly onConnectionLost?: () => void;
}
