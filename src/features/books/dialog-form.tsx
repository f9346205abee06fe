import type { ReactNode } from 'react';
import { errorsElsewhere, type FormError } from '../../api/form-errors.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Dialog } from '../../ui/dialog.tsx';
import { FieldError } from '../../ui/field.tsx';
import { useFocusFirstError } from '../../ui/focus-first-error.ts';
import { useOpens } from './use-opens.ts';

interface Props {
  title: ReactNode;
  /** What sends it says what it does; `instead` stands in its place where there is nothing to send. */
  act: string;
  busy: boolean;
  instead?: ReactNode;
  errors: readonly FormError[];
  /** Pointers whose errors stand at their field; all others stand at the foot. */
  shown: readonly string[];
  onSend: () => void;
  onClose: () => void;
  children: ReactNode;
}

/** A few questions in a dialog, sent by its button or the Enter key. */
export function DialogForm({ title, act, busy, instead, errors, shown, onSend, onClose, children }: Props) {
  const t = useMessages();
  const opens = useOpens();
  useFocusFirstError(errors);
  return (
    <Dialog
      open={opens}
      onClose={onClose}
      title={title}
      actions={
        instead ?? (
          <>
            <Button kind="act" busy={busy} onClick={onSend}>
              {act}
            </Button>
            <Button onClick={onClose}>{t('books.cancel')}</Button>
          </>
        )
      }
    >
      <form
        noValidate
        className="flex flex-col gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          onSend();
        }}
      >
        {children}
        {errorsElsewhere(errors, shown).map((message) => (
          <FieldError key={message}>{message}</FieldError>
        ))}
      </form>
    </Dialog>
  );
}
