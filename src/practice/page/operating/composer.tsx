/** Where a person writes and hands in files: under the channel, and under a thread. */
import { useEffect, useRef, useState } from 'preact/hooks';
import { useLooking } from '../context.ts';
import { ask, upload } from '../service.ts';

export function Composer(props: {
  channel: string;
  label: string;
  threadTs?: string;
  /** files dropped anywhere on the page */
  dropped?: readonly File[];
  suggestion?: string | undefined;
  focusOnOpen?: boolean;
}) {
  const { snapshot, complain } = useLooking();
  const [text, setText] = useState('');
  const [files, setFiles] = useState<readonly File[]>([]);
  const [busy, setBusy] = useState(false);
  const box = useRef<HTMLTextAreaElement>(null);
  const { dropped, suggestion } = props;

  useEffect(() => {
    if (dropped && dropped.length > 0) setFiles((held) => [...held, ...dropped]);
  }, [dropped]);
  useEffect(() => {
    if (suggestion === undefined) return;
    setText(suggestion);
    box.current?.focus();
  }, [suggestion]);
  useEffect(() => {
    if (props.focusOnOpen) box.current?.focus();
  }, [props.focusOnOpen]);

  const send = async () => {
    if (busy || (text.trim() === '' && files.length === 0)) return;
    setBusy(true);
    const place = { channel: props.channel, ...(props.threadTs === undefined ? {} : { threadTs: props.threadTs }) };
    try {
      if (files.length > 0) {
        const ids: string[] = [];
        for (const file of files) ids.push(await upload(snapshot.me, file));
        await ask({ do: 'share', as: snapshot.me, files: ids, text: text.trim(), ...place });
      } else await ask({ do: 'say', as: snapshot.me, text: text.trim(), ...place });
      setText('');
      setFiles([]);
    } catch (problem) {
      complain(problem);
    } finally {
      setBusy(false);
      box.current?.focus();
    }
  };

  return (
    <form
      class="composer"
      onSubmit={(event) => {
        event.preventDefault();
        void send();
      }}
    >
      {files.length > 0 ? (
        <ul class="waiting-files" aria-label="Files that go with it">
          {files.map((file, i) => (
            <li key={`${file.name}${i}`}>
              {file.name}
              <button
                type="button"
                class="bare"
                aria-label={`Leave out ${file.name}`}
                onClick={() => setFiles(files.filter((_, j) => j !== i))}
              >
                leave out
              </button>
            </li>
          ))}
        </ul>
      ) : null}
      <textarea
        ref={box}
        aria-label={props.label}
        placeholder={props.label}
        rows={1}
        value={text}
        onInput={(event) => setText(event.currentTarget.value)}
        onKeyDown={(event) => {
          // Enter sends, Shift+Enter begins a new line; while an input method is composing, Enter belongs to it.
          if (event.key !== 'Enter' || event.shiftKey || event.isComposing) return;
          event.preventDefault();
          void send();
        }}
      />
      <div class="composer-foot">
        <label class="press file-press">
          Choose a file
          <input
            type="file"
            multiple
            class="unseen"
            onChange={(event) => {
              setFiles([...files, ...(event.currentTarget.files ?? [])]);
              event.currentTarget.value = '';
            }}
          />
        </label>
        <button type="submit" class="press primary" disabled={busy}>
          {busy ? 'Sending' : 'Send'}
        </button>
      </div>
    </form>
  );
}
