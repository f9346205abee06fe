import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { carryRequest, type OpenItem } from '../../../../shared/periods/periods.schema.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../../api/form-errors.ts';
import { peopleQueries } from '../../../api/people.ts';
import { useCarryItems } from '../../../api/periods.ts';
import { usePermission, useSession } from '../../../api/session.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { newId } from '../../../lib/new-id.ts';
import { SelectField, TextField } from '../../../ui/field.tsx';
import { DialogForm } from '../dialog-form.tsx';
import { itemTitle } from './item-words.ts';

const SHOWN = ['/carriedBy', '/reason'];

/** Takes what is open along into the next month, under the name of somebody who looks after it. */
export function CarryDialog({
  month,
  items,
  onClose,
}: {
  month: string;
  items: readonly OpenItem[];
  onClose: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const session = useSession();
  const seesPeople = usePermission('people:read');
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  const carry = useCarryItems();
  const [ids] = useState(() => items.map(newId));
  const [carriedBy, setCarriedBy] = useState(() => lastHands(items) ?? session?.person.id ?? '');
  const [reason, setReason] = useState('');
  const [errors, setErrors] = useState<FormError[]>([]);
  const known = people.data?.filter(({ active, id }) => active || id === carriedBy) ?? [];
  const choices =
    known.length > 0
      ? known.map(({ id, name, van }) => ({ value: id, label: van ? `${name}, ${van}` : name }))
      : session
        ? [{ value: session.person.id, label: session.person.name }]
        : [];
  const name = known.find(({ id }) => id === carriedBy)?.name ?? session?.person.name ?? '';
  const send = () => {
    const body = {
      month,
      carriedBy,
      reason: reason.trim(),
      items: items.map(({ key }, index) => ({ id: ids[index] as string, key })),
    };
    const found = schemaErrors(carryRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    carry.mutate(body, { onSuccess: onClose, onError: (error) => setErrors(answerErrors(error)) });
  };
  return (
    <DialogForm
      title={t('books.carry.title', { count: items.length })}
      act={t('books.carry.act', { who: name })}
      busy={carry.isPending}
      errors={errors}
      shown={SHOWN}
      onSend={send}
      onClose={onClose}
    >
      <ul className="max-h-48 overflow-y-auto border-y border-rule">
        {items.map((item) => (
          <li key={item.key} className="border-b border-rule-faint py-1.5 last:border-0">
            {itemTitle(t, format, item)}
          </li>
        ))}
      </ul>
      <p className="text-[0.9375rem] text-ink-soft">{t('books.carry.lead')}</p>
      <SelectField
        label={t('books.carry.who')}
        value={carriedBy}
        choices={choices}
        error={errorAt(errors, '/carriedBy')}
        onChange={({ target }) => setCarriedBy(target.value)}
      />
      <TextField
        label={t('books.carry.reason')}
        maxLength={500}
        value={reason}
        error={errorAt(errors, '/reason') ? t('books.reasonNeeded') : undefined}
        onChange={({ target }) => setReason(target.value)}
      />
    </DialogForm>
  );
}

/** Of one difference: who had it last. */
function lastHands(items: readonly OpenItem[]): string | null {
  const [only] = items;
  if (items.length !== 1 || only?.kind !== 'difference') return null;
  return only.difference.heldBetween.findLast(({ personId }) => personId !== null)?.personId ?? null;
}
