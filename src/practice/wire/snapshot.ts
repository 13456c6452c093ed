/** What the page is told: everything that one person may see, whole, each time something changes. Types only. */
import type { Block } from './blocks.ts';
import type { ElementValues } from './objects.ts';

export interface PagePerson {
  readonly id: string;
  readonly name: string;
  readonly role: string;
  readonly timeZone: string;
  readonly isBot: boolean;
}

export interface PageFile {
  readonly id: string;
  readonly name: string;
  readonly title: string;
  readonly size: number;
  readonly isImage: boolean;
  readonly altText: string;
  readonly url: string;
  readonly deleted: boolean;
}

export interface PageMessage {
  readonly channel: string;
  readonly ts: string;
  readonly threadTs: string | null;
  readonly user: string;
  readonly text: string;
  readonly blocks: readonly Block[];
  readonly files: readonly PageFile[];
  readonly edited: boolean;
  readonly onlyForYou: boolean;
  /** a line from the practice service itself, not from a person or the bot */
  readonly notice: boolean;
  readonly reactions: readonly { readonly name: string; readonly users: readonly string[] }[];
  readonly state: ElementValues;
}

export interface PageChannel {
  readonly id: string;
  readonly name: string;
  readonly purpose: string;
  readonly isDirect: boolean;
  readonly botIsMember: boolean;
  readonly messages: readonly PageMessage[];
}

export interface PageView {
  readonly id: string;
  readonly hash: string;
  readonly type: 'modal' | 'home';
  readonly title: string;
  readonly submit: string | null;
  readonly close: string | null;
  readonly blocks: readonly Block[];
  readonly state: ElementValues;
  readonly depth: number;
}

export interface PageSnapshot {
  readonly workspace: string;
  readonly me: string;
  /** whether this person has written something on the page, rather than been written for */
  readonly hasWritten: boolean;
  readonly bot: string;
  readonly people: readonly PagePerson[];
  readonly channels: readonly PageChannel[];
  readonly modal: PageView | null;
  readonly home: PageView | null;
  readonly samples: readonly { readonly name: string; readonly description: string }[];
  readonly shortcuts: readonly { readonly callbackId: string; readonly name: string }[];
  readonly commands: readonly string[];
  /** files named by `slack_file` in any block the person can see */
  readonly pictures: Readonly<Record<string, PageFile>>;
  readonly appIsReachable: boolean;
  /** deliveries to the app that have not been answered yet */
  readonly waiting: number;
}
