/** One API call: from name, bearer and fields to the answer the service would give. */
import type { z } from 'zod';
import { issueMessages, Refusal } from '../wire/refusal.ts';
import { type MethodName, REQUESTS } from '../wire/requests.ts';
import type { Install, World } from '../world/world.ts';
import type { Call, Method } from './method.ts';
import { METHODS } from './table.ts';

export interface ApiCallRecord {
  readonly method: string;
  readonly team: string | undefined;
  readonly args: Readonly<Record<string, unknown>>;
  readonly response: Readonly<Record<string, unknown>>;
}

export interface Answer {
  readonly body: Record<string, unknown>;
  readonly install: Install | undefined;
}

export function dispatch(
  world: World,
  socketUrl: () => string,
  name: string,
  bearer: string | undefined,
  fields: Record<string, unknown>,
): Answer {
  let install: Install | undefined;
  try {
    if (!isMethod(name)) throw new Refusal('unknown_method', [], { req_method: name });
    install = authenticate(world, name, bearer ?? stringField(fields, 'token'));
    return { body: { ok: true, ...run(name, { world, install, socketUrl }, fields) }, install };
  } catch (error) {
    if (!(error instanceof Refusal)) throw error;
    const metadata = error.messages.length > 0 ? { response_metadata: { messages: error.messages } } : {};
    return { body: { ok: false, error: error.error, ...error.extra, ...metadata }, install };
  }
}

function isMethod(name: string): name is MethodName {
  return Object.hasOwn(METHODS, name);
}

function stringField(fields: Record<string, unknown>, key: string): string | undefined {
  const value = fields[key];
  return typeof value === 'string' ? value : undefined;
}

function authenticate(world: World, name: MethodName, token: string | undefined): Install {
  if (token === undefined || token === '') throw new Refusal('not_authed');
  const install = world.installs.get(token);
  if (!install) throw new Refusal('invalid_auth');
  const method = METHODS[name];
  if (method.token !== install.kind) throw new Refusal('not_allowed_token_type');
  if (method.scopes.length > 0 && !method.scopes.some((scope) => install.scopes.has(scope))) {
    throw new Refusal('missing_scope', [], { needed: method.scopes[0], provided: [...install.scopes].join(',') });
  }
  return install;
}

function run(name: MethodName, call: Call, fields: Record<string, unknown>): Record<string, unknown> {
  const schema: z.ZodType = REQUESTS[name];
  const parsed = schema.safeParse(fields, { reportInput: true });
  if (!parsed.success) {
    throw new Refusal('invalid_arguments', issueMessages(parsed.error.issues));
  }
  // The table pairs each name with its own schema; the compiler cannot follow that through a name that varies.
  const method = METHODS[name] as unknown as Method<'auth.test'>;
  return method.run(call, parsed.data as Parameters<typeof method.run>[1]);
}
