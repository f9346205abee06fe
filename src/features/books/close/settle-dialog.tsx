import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { type OpenItem, SETTLED_TO, settleRequest } from '../../../../shared/periods/periods.schema.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../../api/form-errors.ts';
import { partyQueries } from '../../../api/parties.ts';
import { useSettleDifference } from '../../../api/periods.ts';
import { useDraft } from '../../../lib/draft.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { newId } from '../../../lib/new-id.ts';
import { ButtonLink } from '../../../ui/button.tsx';
import { SelectField, TextField } from '../../../ui/field.tsx';
import { DialogForm } from '../dialog-form.tsx';
import { itemDetail, itemTitle } from './item-words.ts';
import { RadioList } from './radio-list.tsx';

type DifferenceOpen = Extract<OpenItem, { kind: 'difference' }>;
/** A wrong tare is no settlement: the tare is revised, and the readings are judged again. */
type Answer = (typeof SETTLED_TO)[number] | 'wrongTare';

interface Draft {
  id: string;
  answer: Answer | '';
  supplierId: string;
  reason: string;
}

const SHOWN = ['/to/id', '/to', '/reason'];

/** What a difference turned out to be. It is posted as a group of month close; what is explained later takes it back. */
export function SettleDialog({ month, item, onClose }: { month: string; item: DifferenceOpen; onClose: () => void }) {
  const t = useMessages();
  const format = useFormat();
  const settle = useSettleDifference();
  const { difference } = item;
  const isSurplus = difference.standsG > 0;
  const answers: readonly Answer[] = [
    ...SETTLED_TO.filter((place) => !(isSurplus && place === 'atmosphere')),
    ...(difference.subject.kind === 'cylinder' ? (['wrongTare'] as const) : []),
  ];
  const [draft, setDraft, clear] = useDraft<Draft>(`settle.${month}.${item.key}`, () => ({
    id: newId(),
    answer: difference.kind === 'supplierShortFill' ? 'supplier' : '',
    supplierId: '',
    reason: '',
  }));
  const set = (change: Partial<Draft>) => setDraft((now) => ({ ...now, ...change }));
  const { answer, supplierId } = draft;
  const [errors, setErrors] = useState<FormError[]>([]);
  const suppliers = useQuery({ ...partyQueries.choice('supplier'), enabled: answer === 'supplier' });
  const mass = format.mass(Math.abs(difference.standsG));
  const send = () => {
    if (answer === '' || answer === 'wrongTare') {
      setErrors([{ pointer: '/to', code: 'required', message: t('books.settle.needed') }]);
      return;
    }
    const to = { place: answer, ...(answer === 'supplier' && supplierId ? { id: supplierId } : {}) };
    const body = { id: draft.id, month, key: item.key, to, reason: draft.reason.trim() };
    const found = schemaErrors(settleRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    settle.mutate(body, {
      onSuccess: () => {
        clear();
        onClose();
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <DialogForm
      title={itemTitle(t, format, item)}
      act={answer === '' || answer === 'wrongTare' ? t('books.settle.act') : t(`books.settle.act.${answer}`, { mass })}
      busy={settle.isPending}
      instead={
        answer === 'wrongTare' ? (
          <ButtonLink kind="act" to={`/cylinders/${difference.subject.id}`}>
            {t('books.settle.toTare', { cylinder: difference.subject.label })}
          </ButtonLink>
        ) : null
      }
      errors={errors}
      shown={SHOWN}
      onSend={send}
      onClose={onClose}
    >
      <p className="text-ink-soft">{itemDetail(t, format, item, difference.timeZone)}</p>
      <RadioList
        name="settled-to"
        legend={t('books.settle.what')}
        value={answer}
        error={errorAt(errors, '/to/place') ?? errors.find(({ pointer }) => pointer === '/to')?.message}
        choices={answers.map((value) => ({
          value,
          label: t(`books.settle.to.${value}`),
          hint: t(`books.settle.to.${value}.hint`),
        }))}
        onChange={(value) => {
          set({ answer: value as Answer });
          setErrors([]);
        }}
      />
      {answer === 'supplier' ? (
        <SelectField
          label={t('books.settle.supplier')}
          placeholder={t('books.settle.supplier.choose')}
          value={supplierId}
          choices={suppliers.data?.map((party) => ({ value: party.id, label: party.name })) ?? []}
          error={errorAt(errors, '/to/id')}
          onChange={({ target }) => set({ supplierId: target.value })}
        />
      ) : null}
      {answer === 'wrongTare' ? null : (
        <TextField
          label={t('books.settle.reason')}
          maxLength={500}
          value={draft.reason}
          error={errorAt(errors, '/reason') ? t('books.reasonNeeded') : undefined}
          onChange={({ target }) => set({ reason: target.value })}
        />
      )}
    </DialogForm>
  );
}
