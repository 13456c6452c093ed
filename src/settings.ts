import { z } from 'zod';
import { EbbError } from './errors.ts';

export type LogLevel = 'trace' | 'debug' | 'info' | 'warn' | 'error' | 'fatal';

interface Common {
  readonly dataFolder: string;
  readonly databaseUrl: string | undefined;
  readonly logLevel: LogLevel;
  readonly maxUploadBytes: number;
}

/** A bot of its own against the stand-in on this machine: no secret is needed. */
export interface PracticeSettings extends Common {
  readonly mode: 'practice';
  /** port of the page; the next free one is taken when it is in use */
  readonly port: number;
  /** false when the port was named: then it is that one or none */
  readonly portMayMove: boolean;
}

interface Workspace extends Common {
  readonly botToken: string;
  readonly apiUrl: string | undefined;
}

export interface HttpSettings extends Workspace {
  readonly mode: 'http';
  readonly host: string;
  readonly port: number;
  readonly signingSecret: string;
}

export interface SocketSettings extends Workspace {
  readonly mode: 'socket';
  readonly appToken: string;
}

export type Settings = PracticeSettings | HttpSettings | SocketSettings;

/** Every setting: its name, what it means, and its default. The sample in deploy/ lists the same (a test compares). */
export const SETTINGS = {
  EBBLINE_MODE: 'practice (a stand-in workspace on this machine), http or socket',
  EBBLINE_HOST: 'address the bot listens on in http mode',
  EBBLINE_PORT: 'port of the bot in http mode, of the page in practice mode',
  EBBLINE_DATA: 'folder of the embedded store',
  EBBLINE_LOG_LEVEL: 'trace, debug, info, warn, error or fatal',
  EBBLINE_MAX_UPLOAD_MB: 'largest export read, in megabytes',
  EBBLINE_ALLOW_LOCAL_API: 'yes: SLACK_API_URL may name this machine',
  DATABASE_URL: 'a Postgres server, in place of the embedded store',
  SLACK_BOT_TOKEN: 'bot token (xoxb-…), from OAuth & Permissions',
  SLACK_SIGNING_SECRET: 'signing secret, from Basic Information; http mode',
  SLACK_APP_TOKEN: 'app-level token (xapp-…) with connections:write; socket mode',
  SLACK_API_URL: 'another address of the API; for tests on this machine only',
} as const;

type Name = keyof typeof SETTINGS;

const LEVELS = ['trace', 'debug', 'info', 'warn', 'error', 'fatal'] as const;
const PRACTICE_PORT = 7411;
const HTTP_PORT = 3000;
const LOOPBACK = new Set(['127.0.0.1', 'localhost', '[::1]']);

const wholeNumber = (least: number, most: number) =>
  z
    .string()
    .regex(/^\d+$/, 'is not a whole number')
    .transform(Number)
    .refine((value) => value >= least && value <= most, `must be from ${least} to ${most}`);

const url = (protocols: readonly string[]) =>
  z.string().refine(
    (text) => {
      try {
        return protocols.includes(new URL(text).protocol);
      } catch {
        return false;
      }
    },
    `must be an address that starts with ${protocols.map((one) => `${one}//`).join(' or ')}`,
  );

const schema = z
  .object({
    EBBLINE_MODE: z.enum(['practice', 'http', 'socket'], 'must be practice, http or socket').default('practice'),
    EBBLINE_HOST: z.string().default('127.0.0.1'),
    EBBLINE_PORT: wholeNumber(1, 65_535).optional(),
    EBBLINE_DATA: z.string().default('.ebbline'),
    EBBLINE_LOG_LEVEL: z.enum(LEVELS, `must be one of ${LEVELS.join(', ')}`).optional(),
    EBBLINE_MAX_UPLOAD_MB: wholeNumber(1, 4_000).default(500),
    EBBLINE_ALLOW_LOCAL_API: z.enum(['yes', 'no'], 'must be yes or no').default('no'),
    DATABASE_URL: url(['postgres:', 'postgresql:']).optional(),
    SLACK_BOT_TOKEN: z.string().startsWith('xoxb-', 'must start with xoxb-').optional(),
    SLACK_SIGNING_SECRET: z.string().min(16, 'is too short to be a signing secret').optional(),
    SLACK_APP_TOKEN: z.string().startsWith('xapp-', 'must start with xapp-').optional(),
    SLACK_API_URL: url(['http:', 'https:']).optional(),
  })
  .superRefine((given, check) => {
    const missing = (name: Name, where: string): void => {
      if (given[name] === undefined)
        check.addIssue({ code: 'custom', path: [name], message: `is missing; find it under ${where}` });
    };
    if (given.EBBLINE_MODE === 'practice') return;
    missing('SLACK_BOT_TOKEN', 'OAuth & Permissions of your app (it starts with xoxb-)');
    if (given.EBBLINE_MODE === 'http') missing('SLACK_SIGNING_SECRET', 'Basic Information of your app');
    if (given.EBBLINE_MODE === 'socket')
      missing('SLACK_APP_TOKEN', 'Basic Information, App-Level Tokens of your app (it starts with xapp-)');
    if (given.SLACK_API_URL === undefined) return;
    const local = LOOPBACK.has(new URL(given.SLACK_API_URL).hostname);
    if (!local || given.EBBLINE_ALLOW_LOCAL_API !== 'yes') {
      check.addIssue({
        code: 'custom',
        path: ['SLACK_API_URL'],
        message: local
          ? 'would send the tokens to this machine; set EBBLINE_ALLOW_LOCAL_API=yes if that is meant'
          : 'would send the tokens to another host than the chat service; leave it out',
      });
    }
  });

/**
 * The settings, from variables by name. Empty ones count as left out.
 * @throws EbbError SETTINGS_INVALID that lists every problem at once, and never repeats a value
 */
export function readSettings(variables: Readonly<Record<string, string | undefined>>): Settings {
  const given = Object.fromEntries(
    Object.entries(variables).filter(([name, value]) => name in SETTINGS && value !== undefined && value.trim() !== ''),
  );
  const unknown = Object.keys(variables).filter((name) => name.startsWith('EBBLINE_') && !(name in SETTINGS));
  const parsed = schema.safeParse(given);
  const problems = [
    ...(parsed.success ? [] : parsed.error.issues.map((issue) => `${String(issue.path[0])} ${issue.message}`)),
    ...unknown.map((name) => `${name} is no setting; there are ${namesLike(name)}`),
  ];
  if (!parsed.success || problems.length > 0) {
    throw new EbbError(
      'SETTINGS_INVALID',
      `${problems.length === 1 ? 'one setting' : `${problems.length} settings`} cannot be used:\n${problems.map((line) => `  ${line}`).join('\n')}`,
      'Set them in the environment; deploy/env.sample lists all of them. Without any, the practice workspace starts.',
      { kind: 'settings' },
    );
  }
  return settled(parsed.data);
}

/** The settings of this process. The one place that reads its environment. */
export function settingsOfProcess(): Settings {
  return readSettings(process.env);
}

function settled(given: z.output<typeof schema>): Settings {
  const common = {
    dataFolder: given.EBBLINE_DATA,
    databaseUrl: given.DATABASE_URL,
    logLevel: given.EBBLINE_LOG_LEVEL ?? (given.EBBLINE_MODE === 'practice' ? 'warn' : 'info'),
    maxUploadBytes: given.EBBLINE_MAX_UPLOAD_MB * 1_000_000,
  } as const;
  if (given.EBBLINE_MODE === 'practice') {
    const port = given.EBBLINE_PORT;
    return { ...common, mode: 'practice', port: port ?? PRACTICE_PORT, portMayMove: port === undefined };
  }
  const workspace = { ...common, botToken: given.SLACK_BOT_TOKEN!, apiUrl: given.SLACK_API_URL };
  if (given.EBBLINE_MODE === 'socket') return { ...workspace, mode: 'socket', appToken: given.SLACK_APP_TOKEN! };
  return {
    ...workspace,
    mode: 'http',
    host: given.EBBLINE_HOST,
    port: given.EBBLINE_PORT ?? HTTP_PORT,
    signingSecret: given.SLACK_SIGNING_SECRET!,
  };
}

function namesLike(name: string): string {
  const names = Object.keys(SETTINGS).filter((one) => one.startsWith('EBBLINE_'));
  const close = names.filter((one) => one.slice(8, 11) === name.slice(8, 11));
  return (close.length > 0 ? close : names).join(', ');
}
