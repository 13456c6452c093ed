/** A dialog over the page. The browser keeps the focus inside and gives it back afterwards. */
import type { ComponentChildren } from 'preact';
import { useEffect, useRef } from 'preact/hooks';

export function Dialog(props: { label: string; class?: string; onCancel: () => void; children: ComponentChildren }) {
  const ref = useRef<HTMLDialogElement>(null);
  const cancel = useRef(props.onCancel);
  cancel.current = props.onCancel;
  useEffect(() => {
    const dialog = ref.current;
    const leave = (event: Event) => {
      event.preventDefault();
      cancel.current();
    };
    dialog?.addEventListener('cancel', leave);
    const before = document.activeElement;
    dialog?.showModal();
    return () => {
      dialog?.close();
      if (before instanceof HTMLElement && before.isConnected) before.focus();
    };
  }, []);
  return (
    <dialog ref={ref} class={props.class} aria-label={props.label}>
      {props.children}
    </dialog>
  );
}
