/** One entry of the log, with what stands under it. */
import { useState } from 'preact/hooks';
import type { PageMessage } from '../../wire/snapshot.ts';
import { nameOf, sizeOf, useLooking, zoneOf } from '../context.ts';
import { Composer } from '../operating/composer.tsx';
import { ask } from '../service.ts';
import { Blocks } from './blocks.tsx';
import { Picture } from './picture.tsx';
import { Markup } from './text.tsx';

export function Entry({ message, replies }: { message: PageMessage; replies: readonly PageMessage[] }) {
  const { snapshot } = useLooking();
  const [folded, setFolded] = useState(false);
  const [writing, setWriting] = useState(false);
  const name = nameOf(snapshot, message.user);
  const canReply = !message.onlyForYou;
  return (
    <li class="entry">
      <Leaf message={message}>
        {canReply ? (
          <button type="button" class="quiet" aria-expanded={writing} onClick={() => setWriting(!writing)}>
            {writing ? 'stop writing' : 'write under this'}
          </button>
        ) : null}
        {replies.length > 0 ? (
          <button type="button" class="quiet" aria-expanded={!folded} onClick={() => setFolded(!folded)}>
            {folded ? 'unfold' : 'fold'} {replies.length === 1 ? 'the note' : `the ${replies.length} notes`} under this
          </button>
        ) : null}
      </Leaf>
      {replies.length > 0 && !folded ? (
        <ol class="under" aria-label={`Notes under what ${name} wrote`}>
          {replies.map((reply) => (
            <li class="entry" key={reply.ts}>
              <Leaf message={reply} />
            </li>
          ))}
        </ol>
      ) : null}
      {writing ? (
        <div class="under">
          <Composer
            channel={message.channel}
            threadTs={message.ts}
            label={`Write under what ${name} wrote`}
            focusOnOpen
          />
        </div>
      ) : null}
    </li>
  );
}

function Leaf({ message, children }: { message: PageMessage; children?: preact.ComponentChildren }) {
  const { snapshot, complain } = useLooking();
  const writer = snapshot.people.find((p) => p.id === message.user);
  const moment = new Date(Number(message.ts) * 1000);
  const clock = new Intl.DateTimeFormat('en-GB', { hour: '2-digit', minute: '2-digit', timeZone: zoneOf(snapshot) });
  const index = snapshot.people.findIndex((p) => p.id === message.user);
  const hasFile = message.files.some((file) => !file.deleted && !file.isImage);
  return (
    <article
      id={`at-${message.ts.replace('.', '-')}`}
      class={`leaf${message.onlyForYou ? ' private' : ''}${message.notice ? ' notice' : ''}`}
      data-ts={message.ts}
    >
      <time dateTime={moment.toISOString()}>{clock.format(moment)}</time>
      <div class="words">
        <header>
          <span class={`writer ink-${writer?.isBot ? 'bot' : index}`}>
            {message.notice && message.onlyForYou ? 'practice' : writer?.name}
          </span>
          {writer?.isBot ? <span class="aside">bot</span> : null}
          {message.onlyForYou ? <span class="only-you">only you can see this</span> : null}
          {message.edited ? <span class="aside">changed since</span> : null}
        </header>
        {message.blocks.length > 0 ? (
          <Blocks blocks={message.blocks} place={{ channel: message.channel, ts: message.ts }} state={message.state} />
        ) : (
          <Markup text={message.text} />
        )}
        {message.files.map((file) =>
          file.deleted ? (
            <p class="aside" key={file.id}>
              A file was here and has been removed.
            </p>
          ) : file.isImage ? (
            <Picture key={file.id} url={file.url} alt={file.altText} title={file.title} />
          ) : (
            <a class="slip" key={file.id} href={file.url} download={file.name}>
              <span class="slip-name">{file.name}</span>
              <span class="aside">{sizeOf(file)}</span>
            </a>
          ),
        )}
        {message.reactions.length > 0 ? (
          <ul class="marks" aria-label="Marks">
            {message.reactions.map(({ name, users }) => (
              <li key={name}>
                {name.replaceAll('_', ' ')}, from {users.map((id) => nameOf(snapshot, id)).join(' and ')}
              </li>
            ))}
          </ul>
        ) : null}
        <footer>
          {children}
          {message.onlyForYou ? (
            <button
              type="button"
              class="quiet"
              onClick={() => {
                ask({ do: 'remove', as: snapshot.me, channel: message.channel, ts: message.ts }).catch(complain);
              }}
            >
              put away
            </button>
          ) : (
            snapshot.shortcuts
              .filter(() => hasFile)
              .map((shortcut) => (
                <button
                  type="button"
                  class="quiet"
                  key={shortcut.callbackId}
                  onClick={() => {
                    const { channel, ts } = message;
                    ask({ do: 'shortcut', as: snapshot.me, channel, ts, callbackId: shortcut.callbackId }).catch(
                      complain,
                    );
                  }}
                >
                  {shortcut.name.toLowerCase()}
                </button>
              ))
          )}
        </footer>
      </div>
    </article>
  );
}
