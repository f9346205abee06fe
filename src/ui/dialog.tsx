import { type ReactNode, useEffect, useId, useRef } from 'react';
import { useMessages } from '../lib/messages.ts';

interface Props {
  open: boolean;
  onClose: () => void;
  title: ReactNode;
  children: ReactNode;
  /** Buttons at the foot; the consequence stands on the button that causes it. */
  actions?: ReactNode;
}

/** A native modal dialog: focus is kept inside and goes back where it came from; Escape and the ground close it. */
export function Dialog({ open, onClose, title, children, actions }: Props) {
  const { ref, titleId } = useModal(open, onClose);
  return (
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      className="m-auto max-h-[90dvh] w-[min(34rem,calc(100vw-2rem))] bg-ground p-0 text-ink shadow-raised"
    >
      {open ? (
        <div className="flex max-h-[90dvh] flex-col">
          <SheetHead titleId={titleId} title={title} onClose={onClose} />
          <div className="relative overflow-y-auto px-5 py-4">{children}</div>
          {actions ? <div className="flex flex-wrap gap-3 border-t border-rule px-5 py-4">{actions}</div> : null}
        </div>
      ) : null}
    </dialog>
  );
}

/**
 * Details beside a list. On a desk it stands at the right and the list stays in view and in use; on a phone it covers
 * the screen as a modal dialog. Give `desk` from `useMedia('(width >= 64rem)')`.
 */
export function Sheet({ open, onClose, title, children, actions, desk }: Props & { desk: boolean }) {
  const titleId = useId();
  if (desk) {
    if (!open) return null;
    return (
      <aside
        aria-labelledby={titleId}
        className="sticky top-14 flex h-[calc(100dvh-3.5rem)] w-[25rem] shrink-0 flex-col border-l border-rule bg-sheet"
      >
        <SheetHead titleId={titleId} title={title} onClose={onClose} />
        <div className="relative flex-1 overflow-y-auto px-5 py-4">{children}</div>
        {actions ? <div className="flex flex-wrap gap-3 border-t border-rule px-5 py-3">{actions}</div> : null}
      </aside>
    );
  }
  return (
    <ModalSheet open={open} onClose={onClose} title={title} actions={actions}>
      {children}
    </ModalSheet>
  );
}

function ModalSheet({ open, onClose, title, children, actions }: Props) {
  const { ref, titleId } = useModal(open, onClose);
  return (
    <dialog
      ref={ref}
      aria-labelledby={titleId}
      className="m-0 mt-auto h-dvh max-h-dvh w-full max-w-full bg-sheet p-0 text-ink"
    >
      {open ? (
        <div className="flex h-full flex-col">
          <SheetHead titleId={titleId} title={title} onClose={onClose} />
          <div className="page-gutter relative flex-1 overflow-y-auto py-4">{children}</div>
          {actions ? (
            <div className="page-gutter pb-safe flex flex-wrap gap-3 border-t border-rule py-3">{actions}</div>
          ) : null}
        </div>
      ) : null}
    </dialog>
  );
}

function SheetHead({ titleId, title, onClose }: { titleId: string; title: ReactNode; onClose: () => void }) {
  const t = useMessages();
  return (
    <div className="flex min-h-14 items-center justify-between gap-4 border-b-2 border-ink pl-5">
      <h2 id={titleId} className="type-narrow min-w-0 truncate text-[1.125rem] font-[650]">
        {title}
      </h2>
      <button
        type="button"
        aria-label={t('ui.close')}
        onClick={onClose}
        className="grid size-14 shrink-0 place-items-center"
      >
        <svg aria-hidden="true" viewBox="0 0 16 16" className="size-4 stroke-current stroke-2">
          <path d="M2 2l12 12M14 2L2 14" />
        </svg>
      </button>
    </div>
  );
}

function useModal(open: boolean, onClose: () => void) {
  const ref = useRef<HTMLDialogElement>(null);
  const titleId = useId();
  const close = useRef(onClose);
  close.current = onClose;
  useEffect(() => {
    const dialog = ref.current;
    if (!dialog || !open) return;
    const closed = () => close.current();
    const onGround = (event: MouseEvent) => {
      if (event.target === dialog) dialog.close();
    };
    if (!dialog.open) dialog.showModal();
    dialog.addEventListener('close', closed);
    dialog.addEventListener('click', onGround);
    return () => {
      dialog.removeEventListener('close', closed);
      dialog.removeEventListener('click', onGround);
      if (dialog.open) dialog.close();
    };
  }, [open]);
  return { ref, titleId };
}
