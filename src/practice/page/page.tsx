/** The practice page: who you are, which channel, the log, and where you write. */
import { useCallback, useEffect, useState } from 'preact/hooks';
import type { Confirm } from '../wire/text.ts';
import { type Looking, LookingContext, zoneOf } from './context.ts';
import { Composer } from './operating/composer.tsx';
import { Dialog } from './operating/dialog.tsx';
import { Modal } from './operating/modal.tsx';
import { Blocks } from './reading/blocks.tsx';
import { Log } from './reading/log.tsx';
import { ask, useSnapshot } from './service.ts';

const FIRST_PERSON = 'U0WREN00001';
const TRY = '@ebbline has churn moved?';

function fromAddress(key: string, otherwise: string): string {
  return new URLSearchParams(window.location.hash.slice(1)).get(key) ?? otherwise;
}

export function Page() {
  const [me, setMe] = useState(() => fromAddress('as', FIRST_PERSON));
  const [wanted, setWanted] = useState(() => fromAddress('in', ''));
  const [problem, setProblem] = useState('');
  const [large, setLarge] = useState<{ url: string; alt: string; title: string }>();
  const [question, setQuestion] = useState<{ confirm: Confirm; answer: (yes: boolean) => void }>();
  const [dropped, setDropped] = useState<readonly File[]>([]);
  const [over, setOver] = useState(false);
  const [suggestion, setSuggestion] = useState<string>();
  const { snapshot, connected, leftOpen } = useSnapshot(me);

  // A form belongs to the visit in which it was opened.
  useEffect(() => {
    if (leftOpen !== undefined) ask({ do: 'close', as: me, view: leftOpen, all: true }).catch(() => undefined);
  }, [me, leftOpen]);

  useEffect(() => {
    window.history.replaceState(null, '', `#${new URLSearchParams({ as: me, in: wanted })}`);
  }, [me, wanted]);

  const complain = useCallback((what: unknown) => setProblem(what instanceof Error ? what.message : String(what)), []);
  const confirm = useCallback(
    (asked: Confirm | undefined) =>
      asked === undefined
        ? Promise.resolve(true)
        : new Promise<boolean>((resolve) => {
            setQuestion({
              confirm: asked,
              answer: (yes) => {
                setQuestion(undefined);
                resolve(yes);
              },
            });
          }),
    [],
  );

  if (!snapshot || snapshot.me !== me) return <p class="opening">Opening the practice channel …</p>;
  const looking: Looking = { snapshot, complain, enlarge: setLarge, confirm };
  const atHome = wanted === 'home' && snapshot.home !== null;
  const channel = snapshot.channels.find((c) => c.id === wanted) ?? snapshot.channels[0];
  const bot = snapshot.people.find((p) => p.id === snapshot.bot)?.name ?? 'the bot';

  const fresh = channel?.messages.length === 0;
  const samples =
    channel?.botIsMember && snapshot.samples.length > 0 ? (
      <details class="samples" open={fresh}>
        <summary>Hand in a sample export</summary>
        <ul>
          {snapshot.samples.map((sample) => (
            <li key={sample.name}>
              <button
                type="button"
                class="press"
                onClick={() => ask({ do: 'sample', as: me, channel: channel.id, name: sample.name }).catch(complain)}
              >
                {sample.name}
              </button>
              <span>{sample.description}</span>
            </li>
          ))}
        </ul>
      </details>
    ) : null;

  return (
    <LookingContext.Provider value={looking}>
      {/* biome-ignore lint/a11y/noStaticElementInteractions: dropping has its keyboard way in "Choose a file" */}
      <div
        class={`sheet${over ? ' over' : ''}`}
        onDragOver={(event) => {
          event.preventDefault();
          setOver(true);
        }}
        onDragLeave={(event) => {
          if (event.relatedTarget === null) setOver(false);
        }}
        onDrop={(event) => {
          event.preventDefault();
          setOver(false);
          setDropped([...(event.dataTransfer?.files ?? [])]);
        }}
      >
        <header class="masthead">
          <div class="title">
            <h1>{snapshot.workspace}</h1>
            <p class="aside">practice channel, on this machine only; times in {zoneOf(snapshot)}</p>
          </div>
          <label class="who">
            You are
            <select value={me} onChange={(event) => setMe(event.currentTarget.value)}>
              {snapshot.people
                .filter((p) => !p.isBot)
                .map((p) => (
                  <option key={p.id} value={p.id}>
                    {p.name}, {p.role}
                  </option>
                ))}
            </select>
          </label>
          <nav aria-label="Channels">
            {snapshot.channels.map((c) => (
              <button
                type="button"
                key={c.id}
                aria-current={!atHome && c.id === channel?.id ? 'page' : undefined}
                onClick={() => setWanted(c.id)}
              >
                {c.name}
              </button>
            ))}
            {snapshot.home ? (
              <button
                type="button"
                aria-current={atHome ? 'page' : undefined}
                onClick={() => {
                  setWanted('home');
                  ask({ do: 'home', as: me }).catch(complain);
                }}
              >
                {bot}’s page
              </button>
            ) : null}
          </nav>
        </header>

        <main>
          {connected ? null : <p class="strip">The practice service does not answer. It may have been stopped.</p>}
          {snapshot.appIsReachable ? null : (
            <p class="strip">{bot} is not running yet; what you write is kept for it.</p>
          )}
          {atHome && snapshot.home ? (
            <section class="home" aria-label={`${bot}’s page`}>
              <Blocks blocks={snapshot.home.blocks} place={{ view: snapshot.home.id }} state={snapshot.home.state} />
            </section>
          ) : channel ? (
            <>
              <p class="purpose">{channel.purpose}</p>
              {channel.botIsMember ? null : (
                <p class="strip">
                  {bot} is not in this channel and sees nothing of it.{' '}
                  <button
                    type="button"
                    class="press"
                    onClick={() => ask({ do: 'invite', as: me, channel: channel.id }).catch(complain)}
                  >
                    Bring {bot} in
                  </button>
                </p>
              )}
              {fresh && channel.botIsMember ? (
                <section class="first" aria-label="First steps">
                  <h2>Ask whether churn has moved</h2>
                  <p class="try">Hand in one of these exports, or drop one of your own anywhere on this page.</p>
                  {samples}
                </section>
              ) : null}
              <Log channel={channel} />
              <div class="desk">
                {problem ? (
                  <p class="error" role="alert">
                    {problem}{' '}
                    <button type="button" class="quiet" onClick={() => setProblem('')}>
                      put away
                    </button>
                  </p>
                ) : null}
                {snapshot.hasWritten ? null : (
                  <p class="try">
                    Try{' '}
                    <button
                      type="button"
                      class="quiet example"
                      onClick={() => setSuggestion((held) => (held === TRY ? `${TRY} ` : TRY))}
                    >
                      {TRY}
                    </button>
                    {snapshot.commands[0] ? (
                      <>
                        {' '}
                        or <code>{snapshot.commands[0]} help</code>
                      </>
                    ) : null}
                  </p>
                )}
                {fresh ? null : samples}
                <Composer
                  key={channel.id}
                  channel={channel.id}
                  label={`Write in ${channel.name}`}
                  dropped={dropped}
                  suggestion={suggestion}
                />
              </div>
            </>
          ) : null}
        </main>

        {snapshot.modal && snapshot.modal.id !== leftOpen ? (
          <Modal key={`${snapshot.me}-modal`} view={snapshot.modal} />
        ) : null}
        {large ? (
          <Dialog label={large.title || 'Picture'} class="large" onCancel={() => setLarge(undefined)}>
            <button type="button" class="press" onClick={() => setLarge(undefined)}>
              Close the picture
            </button>
            <img src={large.url} alt={large.alt} />
          </Dialog>
        ) : null}
        {question ? (
          <Dialog label={question.confirm.title.text} class="modal" onCancel={() => question.answer(false)}>
            <h2>{question.confirm.title.text}</h2>
            <p>{question.confirm.text.text}</p>
            <div class="modal-foot">
              <button type="button" class="press" onClick={() => question.answer(false)}>
                {question.confirm.deny.text}
              </button>
              <button type="button" class="press primary" onClick={() => question.answer(true)}>
                {question.confirm.confirm.text}
              </button>
            </div>
          </Dialog>
        ) : null}
      </div>
    </LookingContext.Provider>
  );
}
