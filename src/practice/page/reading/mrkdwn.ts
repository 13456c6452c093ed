/** Reading the service's text markup into a small tree. No drawing here, so it can be tested by itself. */

export type Inline =
  | { readonly kind: 'text'; readonly text: string }
  | { readonly kind: 'code'; readonly text: string }
  | { readonly kind: 'bold' | 'italic' | 'strike'; readonly parts: readonly Inline[] }
  | { readonly kind: 'link'; readonly url: string; readonly label: string }
  | { readonly kind: 'person' | 'channel'; readonly id: string; readonly label: string | undefined }
  | { readonly kind: 'everyone'; readonly label: string }
  | {
      readonly kind: 'date';
      readonly unix: number;
      readonly format: string;
      readonly fallback: string;
      readonly url: string | undefined;
    };

export type Paragraph =
  | { readonly kind: 'lines'; readonly lines: readonly (readonly Inline[])[] }
  | { readonly kind: 'quote'; readonly lines: readonly (readonly Inline[])[] }
  | { readonly kind: 'list'; readonly ordered: boolean; readonly items: readonly (readonly Inline[])[] }
  | { readonly kind: 'code'; readonly text: string };

export function unescapeText(text: string): string {
  return text.replaceAll('&lt;', '<').replaceAll('&gt;', '>').replaceAll('&amp;', '&');
}

export function parseMrkdwn(source: string): Paragraph[] {
  return source.split(/```/).flatMap((piece, index): Paragraph[] => {
    if (index % 2 === 1) return [{ kind: 'code', text: unescapeText(piece.replace(/^\n|\n$/g, '')) }];
    return piece === '' ? [] : paragraphs(piece);
  });
}

const BULLET = /^\s*[•◦\-*]\s+(.*)$/;
const NUMBER = /^\s*\d+[.)]\s+(.*)$/;
const QUOTE = /^(?:&gt;|>)\s?(.*)$/;

function paragraphs(text: string): Paragraph[] {
  const result: Paragraph[] = [];
  const add = (kind: 'lines' | 'quote', line: string) => {
    const last = result.at(-1);
    if (last?.kind === kind) result[result.length - 1] = { kind, lines: [...last.lines, parseInline(line)] };
    else result.push({ kind, lines: [parseInline(line)] });
  };
  const addItem = (ordered: boolean, line: string) => {
    const last = result.at(-1);
    const item = parseInline(line);
    if (last?.kind === 'list' && last.ordered === ordered) {
      result[result.length - 1] = { ...last, items: [...last.items, item] };
    } else result.push({ kind: 'list', ordered, items: [item] });
  };
  let gap = false;
  for (const line of text.replace(/^\n+|\n+$/g, '').split('\n')) {
    if (line.trim() === '') {
      gap = true;
      continue;
    }
    if (gap && result.at(-1)?.kind === 'lines') result.push({ kind: 'lines', lines: [] });
    gap = false;
    const quote = QUOTE.exec(line);
    const bullet = BULLET.exec(line);
    const number = NUMBER.exec(line);
    if (quote) add('quote', quote[1] ?? '');
    else if (bullet) addItem(false, bullet[1] ?? '');
    else if (number) addItem(true, number[1] ?? '');
    else add('lines', line);
  }
  return result.filter((p) => p.kind !== 'lines' || p.lines.length > 0);
}

const MARKS = { '*': 'bold', _: 'italic', '~': 'strike' } as const;
/** One of: code, an angle-bracket entity, or a pair of marks that stand at word edges. */
const TOKEN = /`([^`\n]+)`|<([^<>\n]+)>|(?<![\w*_~])([*_~])(?=\S)((?:(?!\3)[^\n])*?\S)\3(?![\w*_~])/;

export function parseInline(source: string): Inline[] {
  const parts: Inline[] = [];
  let rest = source;
  for (;;) {
    const match = TOKEN.exec(rest);
    if (!match) break;
    if (match.index > 0) parts.push({ kind: 'text', text: unescapeText(rest.slice(0, match.index)) });
    const [whole, code, entity, mark, inner] = match;
    if (code !== undefined) parts.push({ kind: 'code', text: unescapeText(code) });
    else if (entity !== undefined) parts.push(parseEntity(entity));
    else if (mark !== undefined && inner !== undefined) {
      parts.push({ kind: MARKS[mark as keyof typeof MARKS], parts: parseInline(inner) });
    }
    rest = rest.slice(match.index + whole.length);
  }
  if (rest !== '') parts.push({ kind: 'text', text: unescapeText(rest) });
  return parts;
}

function parseEntity(entity: string): Inline {
  const bar = entity.indexOf('|');
  const target = bar < 0 ? entity : entity.slice(0, bar);
  const label = bar < 0 ? undefined : unescapeText(entity.slice(bar + 1));
  if (target.startsWith('@')) return { kind: 'person', id: target.slice(1), label };
  if (target.startsWith('#')) return { kind: 'channel', id: target.slice(1), label };
  const date = /^!date\^(\d+)\^([^^]*)(?:\^(.*))?$/.exec(target);
  if (date) {
    const url = date[3];
    return { kind: 'date', unix: Number(date[1]), format: date[2] ?? '', fallback: label ?? '', url };
  }
  if (target.startsWith('!')) return { kind: 'everyone', label: label ?? `@${target.slice(1)}` };
  const url = unescapeText(target);
  // Anything but a web or mail address is shown as it is, never as something to press.
  if (!/^(?:https?:|mailto:)/.test(url)) return { kind: 'text', text: unescapeText(`<${entity}>`) };
  return { kind: 'link', url, label: label ?? url };
}

const DATE_STYLES: Record<string, Intl.DateTimeFormatOptions> = {
  date_num: { year: 'numeric', month: '2-digit', day: '2-digit' },
  date: { day: 'numeric', month: 'long', year: 'numeric' },
  date_short: { day: 'numeric', month: 'short', year: 'numeric' },
  date_long: { weekday: 'long', day: 'numeric', month: 'long', year: 'numeric' },
  time: { hour: '2-digit', minute: '2-digit' },
  time_secs: { hour: '2-digit', minute: '2-digit', second: '2-digit' },
};

/** @param format such as `{date_short} at {time}`; unknown fields stay as written */
export function formatDate(unix: number, format: string, timeZone: string): string {
  const moment = new Date(unix * 1000);
  return format.replace(/\{(\w+)\}/g, (whole, name: string) => {
    const style = DATE_STYLES[name.replace('_pretty', '')];
    return style ? new Intl.DateTimeFormat('en-GB', { ...style, timeZone }).format(moment) : whole;
  });
}
