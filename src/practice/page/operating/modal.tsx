/** The form the bot has opened. */
import { useEffect, useRef, useState } from 'preact/hooks';
import type { PageView } from '../../wire/snapshot.ts';
import { useLooking } from '../context.ts';
import { Blocks } from '../reading/blocks.tsx';
import { ask } from '../service.ts';
import { Dialog } from './dialog.tsx';

export function Modal({ view }: { view: PageView }) {
  const { snapshot, complain } = useLooking();
  const [errors, setErrors] = useState<Record<string, string>>({});
  const [trouble, setTrouble] = useState('');
  const [busy, setBusy] = useState(false);
  const form = useRef<HTMLFormElement>(null);

  // Another form, or the same one changed by the bot: what was wrong before no longer applies.
  useEffect(() => {
    setErrors({});
    setTrouble('');
  }, [view.id, view.hash]);

  useEffect(() => {
    const first = Object.keys(errors)[0];
    if (first === undefined) return;
    const field = form.current?.querySelector(`[data-block="${CSS.escape(first)}"]`);
    field?.querySelector<HTMLElement>('input, select, textarea')?.focus();
  }, [errors]);

  const close = (all: boolean) => {
    ask({ do: 'close', as: snapshot.me, view: view.id, all }).catch(complain);
  };
  const submit = async () => {
    setBusy(true);
    setTrouble('');
    try {
      const outcome = await ask({ do: 'submit', as: snapshot.me, view: view.id });
      setErrors(outcome.kind === 'errors' ? (outcome.errors as Record<string, string>) : {});
      if (outcome.kind === 'failed') setTrouble(String(outcome.message));
    } catch (problem) {
      complain(problem);
    } finally {
      setBusy(false);
    }
  };
  return (
    <Dialog label={view.title} class="modal" onCancel={() => close(true)}>
      <form
        ref={form}
        noValidate
        onSubmit={(event) => {
          event.preventDefault();
          if (view.submit !== null) void submit();
        }}
      >
        <h2>{view.title}</h2>
        <Blocks key={view.id} blocks={view.blocks} place={{ view: view.id }} state={view.state} errors={errors} />
        {trouble ? (
          <p class="error" role="alert">
            {trouble}
          </p>
        ) : null}
        <div class="modal-foot">
          <button type="button" class="press" onClick={() => close(false)}>
            {view.close ?? (view.depth > 1 ? 'Back' : 'Close')}
          </button>
          {view.submit === null ? null : (
            <button type="submit" class="press primary" disabled={busy}>
              {view.submit}
            </button>
          )}
        </div>
      </form>
    </Dialog>
  );
}
