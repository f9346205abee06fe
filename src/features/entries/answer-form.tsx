import { useState } from 'react';
import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import { useAnswerGroup } from '../../api/entries.ts';
import { answerErrors } from '../../api/form-errors.ts';
import { useDraft } from '../../lib/draft.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { Button } from '../../ui/button.tsx';
import { ChoiceField, FieldError } from '../../ui/field.tsx';

const ANSWERS = ['full', 'notFull', 'moreThanFull', 'notKnown'] as const;
type Answer = (typeof ANSWERS)[number];

/** A mass went into a unit and nobody has said how full that left it, or only that it is not known. */
export function isUnanswered(group: GroupView): boolean {
  if (!group.unitId || group.reversedByGroupId || group.reversesGroupId) return false;
  const adds = group.entries.some(
    ({ to, from, addedByServer }) =>
      !addedByServer && to.place === 'unit' && from.place !== 'factory' && from.place !== 'opening',
  );
  return adds && group.statements.every(({ is }) => is === 'notKnown');
}

/** The answer to the one question of an addition, given later: a record of its own. */
export function AnswerForm({
  group,
  onDone,
  onCancel,
}: {
  group: GroupView;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const post = useAnswerGroup(group.id);
  const [draft, setDraft, clear] = useDraft<{ recordId: string; is: Answer }>(`answer.${group.id}`, () => ({
    recordId: newId(),
    is: 'full',
  }));
  const [failed, setFailed] = useState<string | null>(null);
  const send = () => {
    setFailed(null);
    post.mutate(
      {
        groupId: draft.recordId,
        schema: 1,
        deviceSentAt: deviceNow().toISOString(),
        statement: { about: 'unit', id: group.unitId ?? '', is: draft.is },
      },
      {
        onSuccess: ({ entries }) => {
          clear();
          onDone(
            [
              t('log.answer.done'),
              ...(entries.length > 0 ? [t('log.answer.added', { count: entries.length })] : []),
            ].join(' '),
          );
        },
        onError: (error) =>
          setFailed(
            answerErrors(error)
              .map(({ message }) => message)
              .join(' '),
          ),
      },
    );
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
      <h3 className="type-title text-[1.25rem]">{t('log.answer.title')}</h3>
      <p className="text-[0.9375rem] text-ink-soft">{t('log.answer.lead')}</p>
      <ChoiceField
        label={t('log.group.state')}
        name="answer"
        value={draft.is}
        choices={ANSWERS.map((value) => ({ value, label: t(`log.answer.${value}`) }))}
        onChange={(is) => setDraft((now) => ({ ...now, is: is as Answer }))}
      />
      {failed ? <FieldError>{failed}</FieldError> : null}
      <Button kind="act" wide type="submit" busy={post.isPending}>
        {t('log.answer.do', { answer: t(`log.answer.${draft.is}`).toLowerCase() })}
      </Button>
      <Button onClick={onCancel}>{t('log.answer.cancel')}</Button>
    </form>
  );
}
