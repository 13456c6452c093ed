/**
 * The practice workspace in memory. Plain state and one list of listeners: whatever changes the state publishes what happened, and the
 * parts that tell the app (delivery) and the page (desk) listen. No network, no clock of its own.
 *
 * install:    one app in one workspace, known by its bearer token
 * ticket:     a trigger_id (short-lived, single use) or a response_url (few uses, longer life)
 * only for:   an ephemeral message's single reader
 */
import type { Block } from '../wire/blocks.ts';
import type { ElementValues, WireMessage } from '../wire/objects.ts';
import type { ViewInput } from '../wire/views.ts';

export interface Team {
  readonly id: string;
  readonly name: string;
  readonly domain: string;
}

export interface Person {
  readonly id: string;
  readonly team: string;
  readonly name: string;
  readonly realName: string;
  readonly role: string;
  readonly timeZone: string;
  readonly isBot: boolean;
}

export interface Channel {
  readonly id: string;
  readonly team: string;
  readonly name: string;
  readonly purpose: string;
  readonly kind: 'public' | 'private' | 'direct';
  readonly members: Set<string>;
  archived: boolean;
}

export interface Message {
  readonly channel: string;
  readonly ts: string;
  readonly threadTs: string | undefined;
  readonly user: string;
  readonly botId: string | undefined;
  readonly subtype: string | undefined;
  text: string;
  blocks: readonly Block[] | undefined;
  readonly fileIds: readonly string[];
  readonly onlyFor: string | undefined;
  readonly notice: boolean;
  editedTs: string | undefined;
  readonly metadata: WireMessage['metadata'];
  /** reaction name to the people who gave it */
  readonly reactions: Map<string, Set<string>>;
  /** what each person has put into the message's own elements */
  readonly states: Map<string, ElementValues>;
}

export interface StoredFile {
  readonly id: string;
  readonly team: string;
  readonly name: string;
  title: string;
  readonly size: number;
  readonly mimetype: string;
  readonly filetype: string;
  readonly altText: string | undefined;
  readonly user: string;
  readonly createdMs: number;
  readonly content: { readonly bytes: Uint8Array } | { readonly path: string };
  /** calls of files.info left before the service has "processed" it */
  pollsLeft: number;
  deleted: boolean;
  readonly shares: { readonly channel: string; readonly ts: string; readonly threadTs: string | undefined }[];
}

export interface View {
  readonly id: string;
  readonly team: string;
  readonly user: string;
  content: ViewInput;
  hash: string;
  state: ElementValues;
  readonly rootId: string;
  readonly previousId: string | null;
}

export interface Install {
  readonly token: string;
  readonly kind: 'bot' | 'app';
  readonly team: string;
  readonly botUser: string;
  readonly botId: string;
  readonly scopes: ReadonlySet<string>;
}

export interface Trigger {
  readonly id: string;
  readonly team: string;
  readonly user: string;
  readonly issuedMs: number;
  used: boolean;
}

export interface ResponseUrl {
  readonly id: string;
  readonly user: string;
  readonly channel: string;
  readonly issuedMs: number;
  /** the message the interaction came from, for replace_original and delete_original */
  readonly source: { readonly ts: string } | undefined;
  readonly threadTs: string | undefined;
  uses: number;
}

export interface UploadTicket {
  readonly fileId: string;
  readonly team: string;
  readonly user: string;
  readonly name: string;
  readonly length: number;
  readonly altText: string | undefined;
  bytes: Uint8Array | undefined;
  completed: boolean;
}

export type Change =
  | { readonly kind: 'posted'; readonly message: Message }
  | { readonly kind: 'edited'; readonly message: Message; readonly before: WireMessage }
  | { readonly kind: 'deleted'; readonly message: Message; readonly before: WireMessage }
  | {
      readonly kind: 'shared';
      readonly file: StoredFile;
      readonly channel: Channel;
      readonly user: string;
      readonly ts: string;
    }
  | { readonly kind: 'file-deleted'; readonly file: StoredFile }
  | { readonly kind: 'joined'; readonly channel: Channel; readonly user: string; readonly inviter: string | undefined }
  | { readonly kind: 'left'; readonly channel: Channel; readonly user: string }
  | {
      readonly kind: 'reacted';
      readonly message: Message;
      readonly user: string;
      readonly reaction: string;
      readonly added: boolean;
    }
  | { readonly kind: 'home-opened'; readonly user: string; readonly tab: 'home' | 'messages' }
  | { readonly kind: 'view'; readonly user: string }
  | { readonly kind: 'state' }
  | { readonly kind: 'delivery' };

export interface World {
  readonly appId: string;
  readonly teams: Map<string, Team>;
  readonly installs: Map<string, Install>;
  readonly people: Map<string, Person>;
  readonly channels: Map<string, Channel>;
  /** in the order posted, replies and ephemerals among them */
  readonly messages: Message[];
  readonly files: Map<string, StoredFile>;
  readonly uploads: Map<string, UploadTicket>;
  readonly views: Map<string, View>;
  /** open modals of a person, bottom first: ids into `views` */
  readonly stacks: Map<string, string[]>;
  /** published Home tab of a person: id into `views` */
  readonly homes: Map<string, string>;
  /** people who have written something on the page themselves */
  readonly writers: Set<string>;
  readonly triggers: Map<string, Trigger>;
  readonly responseUrls: Map<string, ResponseUrl>;
  /** where files and permalinks are said to live; set once the server listens */
  baseUrl: string;
  readonly fileProcessingPolls: number;
  readonly now: () => number;
  readonly newId: (prefix: string) => string;
  readonly nextTs: () => string;
  readonly publish: (change: Change) => void;
  /** @returns a function that stops listening */
  readonly subscribe: (listener: (change: Change) => void) => () => void;
}

const LETTERS = 'ABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789';

export function createWorld(options: {
  appId: string;
  now: () => number;
  random: () => number;
  fileProcessingPolls: number;
}): World {
  const listeners = new Set<(change: Change) => void>();
  let lastMicros = 0;
  return {
    appId: options.appId,
    teams: new Map(),
    installs: new Map(),
    people: new Map(),
    channels: new Map(),
    messages: [],
    files: new Map(),
    uploads: new Map(),
    views: new Map(),
    stacks: new Map(),
    homes: new Map(),
    writers: new Set(),
    triggers: new Map(),
    responseUrls: new Map(),
    baseUrl: '',
    fileProcessingPolls: options.fileProcessingPolls,
    now: options.now,
    newId: (prefix) => {
      let id = prefix;
      for (let i = 0; i < 10; i++) id += LETTERS[Math.floor(options.random() * LETTERS.length)] ?? 'A';
      return id;
    },
    // A message's ts is its key, so two in the same microsecond must still differ.
    nextTs: () => {
      lastMicros = Math.max(Math.round(options.now() * 1000), lastMicros + 1);
      const digits = String(lastMicros).padStart(7, '0');
      return `${digits.slice(0, -6)}.${digits.slice(-6)}`;
    },
    publish: (change) => {
      for (const listener of [...listeners]) listener(change);
    },
    subscribe: (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
  };
}
