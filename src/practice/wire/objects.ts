/** The objects that travel in responses and events, as the app sees them. Types only. */
import type { Block } from './blocks.ts';

export interface WireFile {
  readonly id: string;
  readonly created: number;
  readonly timestamp: number;
  readonly name: string;
  readonly title: string;
  /** '' while the service is still processing the file */
  readonly mimetype: string;
  readonly filetype: string;
  readonly pretty_type: string;
  readonly size: number;
  readonly mode: 'hosted' | 'snippet' | 'tombstone' | 'external';
  readonly user: string;
  readonly user_team: string;
  readonly is_external: boolean;
  readonly external_type: string;
  readonly is_public: boolean;
  readonly url_private: string;
  readonly url_private_download: string;
  readonly permalink: string;
  readonly alt_txt?: string;
  readonly channels: readonly string[];
  readonly groups: readonly string[];
  readonly ims: readonly string[];
  readonly shares: {
    readonly public?: Readonly<Record<string, readonly WireShare[]>>;
    readonly private?: Readonly<Record<string, readonly WireShare[]>>;
  };
}

export interface WireShare {
  readonly ts: string;
  readonly thread_ts?: string;
  readonly channel_name: string;
  readonly team_id: string;
  readonly share_user_id: string;
}

export interface WireReaction {
  readonly name: string;
  readonly users: readonly string[];
  readonly count: number;
}

export interface WireMessage {
  readonly type: 'message';
  readonly subtype?: string;
  readonly user: string;
  readonly text: string;
  readonly ts: string;
  readonly team: string;
  readonly thread_ts?: string;
  readonly bot_id?: string;
  readonly app_id?: string;
  readonly blocks?: readonly Block[];
  readonly files?: readonly WireFile[];
  readonly upload?: boolean;
  readonly edited?: { readonly user: string; readonly ts: string };
  readonly reactions?: readonly WireReaction[];
  readonly reply_count?: number;
  readonly metadata?: { readonly event_type: string; readonly event_payload: Readonly<Record<string, unknown>> };
}

export interface WireView {
  readonly id: string;
  readonly team_id: string;
  readonly type: 'modal' | 'home';
  readonly callback_id: string;
  readonly private_metadata: string;
  readonly hash: string;
  readonly state: { readonly values: ElementValues };
  readonly blocks: readonly Block[];
  readonly external_id: string;
  readonly root_view_id: string;
  readonly previous_view_id: string | null;
  readonly app_id: string;
  readonly bot_id: string;
  readonly app_installed_team_id: string;
  readonly title?: { readonly type: 'plain_text'; readonly text: string };
  readonly submit?: { readonly type: 'plain_text'; readonly text: string } | null;
  readonly close?: { readonly type: 'plain_text'; readonly text: string } | null;
  readonly clear_on_close: boolean;
  readonly notify_on_close: boolean;
}

/** What a person has put into one element; which keys are there depends on the element's type. */
export interface ElementValue {
  readonly type: string;
  readonly value?: string | null;
  readonly selected_option?: ChosenOption | null;
  readonly selected_options?: readonly ChosenOption[];
  readonly selected_date?: string | null;
  readonly selected_time?: string | null;
  readonly selected_user?: string | null;
  readonly selected_conversation?: string | null;
  readonly selected_channel?: string | null;
  readonly files?: readonly WireFile[];
}

export interface ChosenOption {
  readonly text: { readonly type: 'plain_text' | 'mrkdwn'; readonly text: string };
  readonly value: string;
}

/** block_id, then action_id */
export type ElementValues = Readonly<Record<string, Readonly<Record<string, ElementValue>>>>;
