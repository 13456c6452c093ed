/** Trigger ids and response URLs: permissions that run out. */
import { LIMITS } from '../wire/limits.ts';
import { Refusal } from '../wire/refusal.ts';
import type { ResponseUrl, Trigger, World } from './world.ts';

export function issueTrigger(world: World, team: string, user: string): Trigger {
  const micros = Math.round(world.now() * 1000);
  const trigger: Trigger = {
    id: `${micros}.${world.newId('').toLowerCase()}`,
    team,
    user,
    issuedMs: world.now(),
    used: false,
  };
  world.triggers.set(trigger.id, trigger);
  return trigger;
}

/** @throws Refusal `invalid_trigger_id`, `expired_trigger_id` or `exchanged_trigger_id` */
export function exchangeTrigger(world: World, id: string, team: string): Trigger {
  const trigger = world.triggers.get(id);
  if (!trigger || trigger.team !== team) throw new Refusal('invalid_trigger_id');
  if (trigger.used) throw new Refusal('exchanged_trigger_id');
  if (world.now() - trigger.issuedMs > LIMITS.triggerLifeMs) throw new Refusal('expired_trigger_id');
  trigger.used = true;
  return trigger;
}

export function issueResponseUrl(
  world: World,
  ticket: Pick<ResponseUrl, 'user' | 'channel' | 'source' | 'threadTs'>,
): { id: string; url: string } {
  const id = world.newId('') + world.newId('');
  world.responseUrls.set(id, { ...ticket, id, issuedMs: world.now(), uses: 0 });
  return { id, url: `${world.baseUrl}/response/${id}` };
}

/** @throws Refusal `invalid_response_url`, `expired_url` or `used_url` */
export function useResponseUrl(world: World, id: string): ResponseUrl {
  const ticket = world.responseUrls.get(id);
  if (!ticket) throw new Refusal('invalid_response_url');
  if (world.now() - ticket.issuedMs > LIMITS.responseUrlLifeMs) throw new Refusal('expired_url');
  if (ticket.uses >= LIMITS.responseUrlUses) throw new Refusal('used_url');
  ticket.uses += 1;
  return ticket;
}
