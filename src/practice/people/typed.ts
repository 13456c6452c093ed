/** From what a person types to the text the service stores: escaped, with names turned into mentions. */
import type { World } from '../world/world.ts';

export function escapeText(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;');
}

/**
 * @param text as typed; `@name` and `#channel` become mentions when they name someone or something in the workspace, and mentions
 *   already written as `<@U…>` or `<#C…>` stay
 */
export function storedText(world: World, team: string, text: string): string {
  const people = [...world.people.values()].filter((p) => p.team === team);
  const channels = [...world.channels.values()].filter((c) => c.team === team && c.kind !== 'direct');
  return escapeText(text)
    .replace(/(^|[\s(])(https?:\/\/[^\s<>]*[^\s<>.,;:!?)])/g, '$1<$2>')
    .replace(/&lt;(https?:\/\/[^\s<>]+?)&gt;/g, '<$1>')
    .replace(/&lt;([@#])([A-Z0-9]+)(?:\|[^&]*)?&gt;/g, (whole, sign: string, id: string) =>
      (sign === '@' ? world.people.get(id) : world.channels.get(id))?.team === team ? `<${sign}${id}>` : whole,
    )
    .replace(/(^|[^\w<&])@([\w-]+)/g, (whole, before: string, name: string) => {
      const person = people.find((p) => p.name === name.toLowerCase());
      return person ? `${before}<@${person.id}>` : whole;
    })
    .replace(/(^|[^\w<&])#([\w-]+)/g, (whole, before: string, name: string) => {
      const channel = channels.find((c) => c.name === name.toLowerCase());
      return channel ? `${before}<#${channel.id}|${channel.name}>` : whole;
    });
}
