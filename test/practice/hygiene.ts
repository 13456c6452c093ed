/**
 * What the service accepts and a reviewer would not: text that reached mrkdwn unescaped, blocks without a text for notifications and
 * screen readers. A helper for tests; it refuses nothing.
 */
export interface Finding {
  readonly what: 'broadcast' | 'masked-link' | 'text-missing';
  readonly where: string;
  readonly excerpt: string;
}

const BROADCAST = /<!(?:channel|here|everyone|subteam)[^>]*>/;
const MASKED_LINK = /<https?:[^>|]*\|[^>]*>/;

/** @param allowedLinks link prefixes the bot posts on purpose */
export function hygieneOf(
  message: { text?: string | undefined; blocks?: unknown },
  allowedLinks: readonly string[] = [],
): Finding[] {
  const findings: Finding[] = [];
  const blocks = Array.isArray(message.blocks) ? message.blocks : [];
  if (blocks.length > 0 && !message.text?.trim()) findings.push({ what: 'text-missing', where: '/text', excerpt: '' });
  visit({ text: message.text, blocks }, '', findings, allowedLinks);
  return findings;
}

function visit(value: unknown, where: string, findings: Finding[], allowedLinks: readonly string[]): void {
  if (typeof value === 'string') {
    const broadcast = BROADCAST.exec(value);
    if (broadcast) findings.push({ what: 'broadcast', where, excerpt: broadcast[0] });
    const link = MASKED_LINK.exec(value);
    if (link && !allowedLinks.some((prefix) => link[0].startsWith(`<${prefix}`))) {
      findings.push({ what: 'masked-link', where, excerpt: link[0] });
    }
    return;
  }
  if (value === null || typeof value !== 'object') return;
  if ((value as { type?: unknown }).type === 'plain_text') return;
  for (const [key, item] of Object.entries(value)) visit(item, `${where}/${key}`, findings, allowedLinks);
}
