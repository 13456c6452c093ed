/** What a person wrote, without the platform's mark-up: mentions go, links and channels leave their label, entities are read. */
export function plainWords(raw: string): string {
  return raw
    .replace(/<[@!][^>]*>/g, ' ')
    .replace(/<#[A-Z0-9]+(?:\|([^>]*))?>/g, ' $1 ')
    .replace(/<[^>|]*\|([^>]*)>/g, '$1')
    .replace(/<((?:https?|mailto):[^>]*)>/g, '$1')
    .replace(/[*_~`]/g, ' ')
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&amp;', '&')
    .replace(/\s+/g, ' ')
    .trim();
}
