import { useState } from 'react';
import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import { reversalRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { useReverseGroup } from '../../api/entries.ts';
import { answerErrors, errorAt, errorsElsewhere, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useDraft } from '../../lib/draft.ts';
import { placeWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { CheckField, FieldError, TextField } from '../../ui/field.tsx';
import { useFocusFirstError } from '../../ui/focus-first-error.ts';
import { Notice } from '../../ui/notice.tsx';
import { simpleGroup } from './replacement.ts';
import { emptyReplacement, type ReplacementDraft, ReplacementFields, useReplacement } from './replacement-fields.tsx';

interface ReversalDraft {
  reversalId: string;
  reason: string;
  corrects: boolean;
  replacement: ReplacementDraft | null;
}

const SHOWN = ['/reason', '/replacement/entries/0/mass', '/replacement/readings', '/replacement/reason'];

/** Withdraws a group with its reason; where it is one mass, the right one can be entered with it. */
export function ReverseForm({
  group,
  onDone,
  onCancel,
}: {
  group: GroupView;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const { locale } = usePreferences();
  const simple = simpleGroup(group);
  const reverse = useReverseGroup(group.id);
  const [draft, setDraft, clear] = useDraft<ReversalDraft>(`reverse.${group.id}`, () => ({
    reversalId: newId(),
    reason: '',
    corrects: false,
    replacement: simple ? emptyReplacement(simple, locale) : null,
  }));
  const [errors, setErrors] = useState<FormError[]>([]);
  useFocusFirstError(errors);
  const right = useReplacement(group, simple, draft.corrects ? draft.replacement : null);
  const own = group.entries.filter(({ addedByServer }) => !addedByServer);
  const massG = own.reduce((sum, entry) => sum + entry.massG, 0);
  const elsewhere = errorsElsewhere(errors, SHOWN);
  const reasonError =
    errorAt(errors, '/reason') && draft.reason.trim() === ''
      ? t('log.reverse.reasonNeeded')
      : errorAt(errors, '/reason');

  const send = () => {
    const body = {
      groupId: draft.reversalId,
      schema: 1 as const,
      deviceSentAt: deviceNow().toISOString(),
      reason: draft.reason.trim(),
      replacement: right.is === 'ready' ? right.request : null,
    };
    const found = [
      ...schemaErrors(reversalRequest, body),
      ...(right.is === 'wrong' ? [{ pointer: right.pointer, code: 'replacement', message: right.message }] : []),
    ];
    setErrors(found);
    if (found.length > 0) return;
    reverse.mutate(body, {
      onSuccess: () => {
        clear();
        onDone(t(right.is === 'ready' ? 'log.reverse.doneCorrected' : 'log.reverse.done'));
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <form
      noValidate
      className="flex flex-col gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <h3 className="type-title text-[1.25rem]">{t('log.reverse.title')}</h3>
      <p className="text-[0.9375rem] text-ink-soft">{t('log.reverse.lead')}</p>
      <section aria-label={t('log.reverse.what')}>
        <ul className="border-t border-rule text-[0.9375rem]">
          {group.entries.map((entry) => (
            <li key={entry.id} className="flex justify-between gap-3 border-b border-rule-faint py-1.5">
              <span>
                {placeWords(t, entry.from)} {'\u2192'} {placeWords(t, entry.to)}
              </span>
              <strong className="font-[650] whitespace-nowrap">{format.mass(entry.massG)}</strong>
            </li>
          ))}
        </ul>
      </section>
      <TextField
        label={t('log.reverse.reason')}
        value={draft.reason}
        maxLength={1000}
        error={reasonError}
        onChange={(event) => {
          const reason = event.target.value;
          setDraft((now) => ({ ...now, reason }));
        }}
      />
      {simple && draft.replacement ? (
        <>
          <CheckField
            label={t('log.reverse.withReplacement')}
            hint={t('log.reverse.withReplacementHint')}
            checked={draft.corrects}
            onChange={(event) => {
              const corrects = event.target.checked;
              setDraft((now) => ({ ...now, corrects }));
            }}
          />
          {draft.corrects ? (
            <ReplacementFields
              group={group}
              simple={simple}
              draft={draft.replacement}
              result={right}
              errors={errors}
              onChange={(replacement) => setDraft((now) => ({ ...now, replacement }))}
            />
          ) : null}
        </>
      ) : (
        <Notice>{t('log.reverse.notSimple')}</Notice>
      )}
      {elsewhere.map((message) => (
        <FieldError key={message}>{message}</FieldError>
      ))}
      <Button kind="grave" wide type="submit" busy={reverse.isPending}>
        {right.is === 'ready'
          ? t('log.reverse.doAndCorrect', { mass: format.mass(massG), right: format.mass(right.massG) })
          : draft.corrects
            ? t('log.reverse.doAndCorrectNotYet', { mass: format.mass(massG) })
            : t('log.reverse.do', { count: own.length, mass: format.mass(massG) })}
      </Button>
      <Button onClick={onCancel}>{t('log.reverse.cancel')}</Button>
    </form>
  );
}
