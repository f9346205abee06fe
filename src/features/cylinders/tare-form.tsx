import { useState } from 'react';
import { addTareRequest, type Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { useReviseTare } from '../../api/cylinders.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, instantOfLocal, toLocalInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { TextField } from '../../ui/field.tsx';
import { emptyQuantity, type QuantityDraft, readQuantity } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { FormFoot, MASS_UNITS, massUnitOf, WhenField } from './form-parts.tsx';

interface Draft {
  id: string;
  tare: QuantityDraft<'mass'>;
  from: string;
  reason: string;
}

const SHOWN = ['/tare', '/validFrom', '/reason'];

/** A tare that was stamped or read wrong, or has changed. Readings from then on are judged again by it. */
export function TareForm({
  cylinder,
  onRevised,
  onCancel,
}: {
  cylinder: Cylinder;
  onRevised: (entries: EntryGroupResponse['entries'], tareG: number) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const revise = useReviseTare(cylinder.id);
  const [draft, setDraft, clear] = useDraft<Draft>(`cylinder.${cylinder.id}.tare`, () => ({
    id: newId(),
    tare: emptyQuantity(massUnitOf(preferences.mass)),
    from: toLocalInput(deviceNow()),
    reason: '',
  }));
  const [errors, setErrors] = useState<FormError[]>([]);
  const tare = readQuantity('mass', draft.tare, { locale: preferences.locale });
  const set = (change: Partial<Draft>) => setDraft((now) => ({ ...now, ...change }));
  const send = () => {
    const body = {
      id: draft.id,
      tare: tare.is === 'read' ? tare.typed : { value: '', unit: 'g' as const },
      validFrom: instantOfLocal(draft.from) ?? '',
      reason: draft.reason.trim(),
    };
    const found = schemaErrors(addTareRequest, body);
    setErrors(found);
    if (found.length > 0) return;
    revise.mutate(body, {
      onSuccess: ({ entries }) => {
        clear();
        onRevised(entries, tare.is === 'read' ? tare.base : 0);
      },
      onError: (error) => setErrors(answerErrors(error)),
    });
  };
  return (
    <form
      noValidate
      className="flex flex-col"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <p className="pb-2 text-[0.9375rem] text-ink-soft">
        {t('cylinders.tare.lead', { tare: format.mass(cylinder.tareG) })}
      </p>
      <QuantityInput
        kind="mass"
        label={t('cylinders.tare.new')}
        units={MASS_UNITS}
        draft={draft.tare}
        min={0.001}
        error={errorAt(errors, '/tare') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(value) => set({ tare: value })}
      />
      <WhenField
        label={t('cylinders.tare.from')}
        value={draft.from}
        error={errorAt(errors, '/validFrom')}
        onChange={(from) => set({ from })}
      />
      <TextField
        label={t('cylinders.form.reason')}
        value={draft.reason}
        maxLength={500}
        error={errorAt(errors, '/reason') ? t('cylinders.form.reasonNeeded') : undefined}
        onChange={(event) => set({ reason: event.target.value })}
      />
      <FormFoot
        errors={errors}
        shown={SHOWN}
        busy={revise.isPending}
        act={
          tare.is === 'read' ? t('cylinders.tare.actMass', { mass: format.mass(tare.base) }) : t('cylinders.tare.act')
        }
        onCancel={onCancel}
      />
    </form>
  );
}
