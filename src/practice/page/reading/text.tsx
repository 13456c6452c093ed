/** Drawing text: the service's markup, plain text objects, and rich text. */
import { Fragment } from 'preact';
import type { RichText, RichTextElement } from '../../wire/richText.ts';
import type { AnyText } from '../../wire/text.ts';
import { nameOf, useLooking, zoneOf } from '../context.ts';
import { formatDate, type Inline, parseMrkdwn } from './mrkdwn.ts';

export function Markup({ text }: { text: string }) {
  return (
    <div class="markup">
      {parseMrkdwn(text).map((paragraph, i) => {
        if (paragraph.kind === 'code') return <pre key={i}>{paragraph.text}</pre>;
        if (paragraph.kind === 'list') {
          const items = paragraph.items.map((item, j) => (
            <li key={j}>
              <Parts parts={item} />
            </li>
          ));
          return paragraph.ordered ? <ol key={i}>{items}</ol> : <ul key={i}>{items}</ul>;
        }
        const lines = paragraph.lines.map((line, j) => (
          <Fragment key={j}>
            {j > 0 ? <br /> : null}
            <Parts parts={line} />
          </Fragment>
        ));
        return paragraph.kind === 'quote' ? <blockquote key={i}>{lines}</blockquote> : <p key={i}>{lines}</p>;
      })}
    </div>
  );
}

function Parts({ parts }: { parts: readonly Inline[] }) {
  return (
    <>
      {parts.map((part, i) => (
        <Part key={i} part={part} />
      ))}
    </>
  );
}

function Part({ part }: { part: Inline }) {
  const { snapshot } = useLooking();
  switch (part.kind) {
    case 'text':
      return <>{part.text}</>;
    case 'code':
      return <code>{part.text}</code>;
    case 'bold':
      return (
        <strong>
          <Parts parts={part.parts} />
        </strong>
      );
    case 'italic':
      return (
        <em>
          <Parts parts={part.parts} />
        </em>
      );
    case 'strike':
      return (
        <s>
          <Parts parts={part.parts} />
        </s>
      );
    case 'link':
      return <SafeLink url={part.url} label={part.label} />;
    case 'person':
      return <span class="mention">@{nameOf(snapshot, part.id)}</span>;
    case 'channel':
      return (
        <span class="mention">#{part.label ?? snapshot.channels.find((c) => c.id === part.id)?.name ?? part.id}</span>
      );
    case 'everyone':
      return <span class="mention">{part.label}</span>;
    case 'date': {
      const moment = new Date(part.unix * 1000);
      return (
        <time dateTime={moment.toISOString()} title={part.fallback}>
          {formatDate(part.unix, part.format, zoneOf(snapshot))}
        </time>
      );
    }
  }
}

function SafeLink({ url, label }: { url: string; label: string }) {
  return (
    <a href={url} target="_blank" rel="noreferrer noopener">
      {label}
    </a>
  );
}

export function TextObject({ text }: { text: AnyText }) {
  return text.type === 'mrkdwn' ? <Markup text={text.text} /> : <span class="plain">{text.text}</span>;
}

export function RichTextView({ block }: { block: RichText }) {
  return (
    <div class="markup">
      {block.elements.map((part, i) => {
        if (part.type === 'rich_text_list') {
          const items = part.elements.map((item, j) => (
            <li key={j}>
              <RichElements elements={item.elements} />
            </li>
          ));
          return part.style === 'ordered' ? <ol key={i}>{items}</ol> : <ul key={i}>{items}</ul>;
        }
        const inner = <RichElements elements={part.elements} />;
        if (part.type === 'rich_text_quote') return <blockquote key={i}>{inner}</blockquote>;
        if (part.type === 'rich_text_preformatted') return <pre key={i}>{inner}</pre>;
        return <p key={i}>{inner}</p>;
      })}
    </div>
  );
}

function RichElements({ elements }: { elements: readonly RichTextElement[] }) {
  return (
    <>
      {elements.map((element, i) => (
        <RichElement key={i} element={element} />
      ))}
    </>
  );
}

function RichElement({ element }: { element: RichTextElement }) {
  const { snapshot } = useLooking();
  let drawn = <>{richWords(element, snapshot)}</>;
  if (element.type === 'link' && /^https?:/.test(element.url)) {
    drawn = <SafeLink url={element.url} label={element.text ?? element.url} />;
  }
  if (element.style?.code) drawn = <code>{drawn}</code>;
  if (element.style?.bold) drawn = <strong>{drawn}</strong>;
  if (element.style?.italic) drawn = <em>{drawn}</em>;
  if (element.style?.strike) drawn = <s>{drawn}</s>;
  return drawn;
}

function richWords(element: RichTextElement, snapshot: ReturnType<typeof useLooking>['snapshot']): string {
  switch (element.type) {
    case 'text':
      return element.text;
    case 'link':
      return element.text ?? element.url;
    case 'user':
      return `@${nameOf(snapshot, element.user_id)}`;
    case 'channel':
      return `#${snapshot.channels.find((c) => c.id === element.channel_id)?.name ?? element.channel_id}`;
    case 'emoji':
      return `:${element.name}:`;
    case 'broadcast':
      return `@${element.range}`;
    case 'date':
      return formatDate(element.timestamp, element.format, zoneOf(snapshot));
  }
}
