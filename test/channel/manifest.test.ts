import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { COMMAND, EVENTS, SHORTCUT_READ } from '../../src/channel/names.ts';
import { SETTINGS } from '../../src/settings.ts';

const deploy = new URL('../../deploy/', import.meta.url).pathname;
const manifest = readFileSync(join(deploy, 'manifest.yaml'), 'utf8');

/** The plain items of the list under a key: enough of YAML for this one file. */
function listUnder(key: string): string[] {
  const lines = manifest.split('\n');
  const at = lines.findIndex((line) => line.trim() === `${key}:`);
  const items: string[] = [];
  for (const line of lines.slice(at + 1)) {
    const item = /^\s+- ([\w.:]+)$/.exec(line);
    if (!item) break;
    items.push(item[1]!);
  }
  return items;
}

/** Everything the listeners subscribe to and the methods they and the worker call, read from the source. */
function sourceOf(folder: string): string {
  return readdirSync(folder, { withFileTypes: true })
    .map((entry) =>
      entry.isDirectory() ? sourceOf(join(folder, entry.name)) : readFileSync(join(folder, entry.name), 'utf8'),
    )
    .join('\n');
}
const source = sourceOf(new URL('../../src/channel/', import.meta.url).pathname);

describe('the manifest', () => {
  it('subscribes to the events that are listened to, and to no other', () => {
    const listened = [...source.matchAll(/app\.event\('(\w+)'/g)].map((match) => match[1]);
    expect(listened.sort()).toEqual([...EVENTS].sort());
    const subscribed = listUnder('bot_events').map((event) => event.replace(/^message\..*/, 'message'));
    expect([...new Set(subscribed)].sort()).toEqual([...EVENTS].sort());
  });

  it('registers the command and the shortcut', () => {
    expect([...manifest.matchAll(/- command: (\S+)/g)].map((match) => match[1])).toEqual([COMMAND]);
    expect([...manifest.matchAll(/callback_id: (\S+)/g)].map((match) => match[1])).toEqual([SHORTCUT_READ]);
  });

  it('asks for the scopes that its events and calls need, and for no other', () => {
    // Source: the method and event pages on docs.slack.dev.
    const needs: Record<string, string[]> = {
      "app.event('app_mention'": ['app_mentions:read'],
      "app.event('message'": ['channels:history', 'groups:history', 'im:history'],
      "app.event('file_shared'": ['files:read'],
      "app.event('member_joined_channel'": ['channels:read', 'groups:read'],
      'app.command(': ['commands'],
      'app.shortcut': ['commands'],
      'chat.postMessage': ['chat:write'],
      'files.info': ['files:read'],
      'users.info': ['users:read'],
      'conversations.history': ['channels:history', 'groups:history', 'im:history'],
      'files.getUploadURLExternal': ['files:write'],
    };
    const needed = Object.entries(needs).flatMap(([call, scopes]) => (source.includes(call) ? scopes : []));
    expect(listUnder('bot').sort()).toEqual([...new Set(needed)].sort());
  });
});

describe('the sample of the environment', () => {
  it('lists every setting, and no other', () => {
    const listed = [...readFileSync(join(deploy, 'env.sample'), 'utf8').matchAll(/^#?([A-Z_]+)=/gm)].map(
      (match) => match[1],
    );
    expect(listed.sort()).toEqual(Object.keys(SETTINGS).sort());
  });
});
