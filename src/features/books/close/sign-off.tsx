import { useState } from 'react';
import { type Checklist, type CloseResponse, closeRequest } from '../../../../shared/periods/periods.schema.ts';
import { answerErrors, errorAt, errorsElsewhere, type FormError, schemaErrors } from '../../../api/form-errors.ts';
import { useCloseMonth } from '../../../api/periods.ts';
import { usePermission } from '../../../api/session.ts';
import { useDraft } from '../../../lib/draft.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { newId } from '../../../lib/new-id.ts';
import { Button } from '../../../ui/button.tsx';
import { FieldError, TextField } from '../../../ui/field.tsx';
import { Notice } from '../../../ui/notice.tsx';
import { bookMass, longMonth } from '../book-words.ts';
import { Section } from '../section.tsx';

/** The owner's word under the month, about the very sums that were read here. There is no reopening. */
export function SignOff({ checklist, onClosed }: { checklist: Checklist; onClosed: (closed: CloseResponse) => void }) {
  const t = useMessages();
  const format = useFormat();
  const isOwner = usePermission('periods:close');
  const close = useCloseMonth();
  const [draft, setDraft, clear] = useDraft(`close.${checklist.month}`, () => ({ id: newId(), note: '' }));
  const [errors, setErrors] = useState<FormError[]>([]);
  const { month, sumsHash, undecided, carried, equation, settled } = checklist;
  const name = longMonth(format.locale, month);
  const partOf = (part: string) => equation.wentOut.find((each) => each.part === part)?.massG ?? 0;
  const send = () => {
    const body = { id: draft.id, month, sumsHash, note: draft.note.trim() || null };
    const found = schemaErrors(closeRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    // The month is read again before this answers, and what is closed has no sign-off any more: told all the same.
    close.mutateAsync(body).then(
      (closed) => {
        clear();
        onClosed(closed);
      },
      (error: unknown) => setErrors(answerErrors(error)),
    );
  };
  return (
    <Section title={t('books.signOff')}>
      <form
        noValidate
        className="flex max-w-2xl flex-col gap-4 pt-3"
        onSubmit={(event) => {
          event.preventDefault();
          send();
        }}
      >
        <p className="text-[1.125rem] leading-snug">
          {t('books.signOff.says', {
            month: name,
            total: bookMass(format, equation.totalG),
            into: bookMass(format, partOf('intoUnits')),
            end: bookMass(format, partOf('onHandEnd')),
          })}{' '}
          {t('books.signOff.decided', {
            settled: settled.length,
            carried,
          })}
        </p>
        {undecided > 0 ? <Notice title={t('books.signOff.open', { count: undecided })} /> : null}
        {isOwner ? (
          <>
            <TextField
              label={t('books.signOff.note')}
              hint={t('ui.optional')}
              maxLength={1000}
              value={draft.note}
              error={errorAt(errors, '/note')}
              onChange={({ target }) => setDraft((now) => ({ ...now, note: target.value }))}
            />
            <div>
              <Button kind="grave" type="submit" busy={close.isPending} disabled={undecided > 0}>
                {t('books.signOff.act', { month: name })}
              </Button>
              <p className="pt-2 text-[0.9375rem] text-ink-soft">{t('books.signOff.consequence')}</p>
            </div>
            {errorsElsewhere(errors, ['/note']).map((message) => (
              <FieldError key={message}>{message}</FieldError>
            ))}
          </>
        ) : (
          <p className="text-ink-soft">{t('books.signOff.owner')}</p>
        )}
      </form>
    </Section>
  );
}
