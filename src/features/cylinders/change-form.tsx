import { useState } from 'react';
import { CONTENT_STATES, type Cylinder, updateCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import { useUpdateCylinder } from '../../api/cylinders.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useDraft } from '../../lib/draft.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { SelectField, TextField } from '../../ui/field.tsx';
import { emptyQuantity, type QuantityDraft, quantityOf, readQuantity } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { FormFoot, MASS_UNITS, massUnitOf } from './form-parts.tsx';

const SHOWN = ['/tag', '/batch', '/retestDue', '/waterCapacity', '/servicePressureKPaGauge', '/contentState'];
const PRESSURE_UNITS = ['psi', 'bar', 'kPa'] as const;

interface Draft {
  tag: string;
  batch: string;
  state: string;
  retestDue: string;
  capacity: QuantityDraft<'mass'>;
  service: QuantityDraft<'pressureGauge'>;
}

function draftOf(
  cylinder: Cylinder,
  massUnit: (typeof MASS_UNITS)[number],
  pressureUnit: (typeof PRESSURE_UNITS)[number],
  locale: string,
): Draft {
  const { waterCapacityG, servicePressureKPaGauge } = cylinder;
  return {
    tag: cylinder.tag,
    batch: cylinder.batch ?? '',
    state: cylinder.contentState,
    retestDue: cylinder.retestDue ?? '',
    capacity: waterCapacityG === null ? emptyQuantity(massUnit) : quantityOf('mass', waterCapacityG, massUnit, locale),
    service:
      servicePressureKPaGauge === null
        ? emptyQuantity<'pressureGauge'>(pressureUnit)
        : quantityOf('pressureGauge', servicePressureKPaGauge, pressureUnit, locale),
  };
}

/** What stands on the collar, corrected or renewed (a re-test, a new tag). What stays blank stays as it is. */
export function ChangeForm({
  cylinder,
  onDone,
  onCancel,
}: {
  cylinder: Cylinder;
  onDone: (message: string) => void;
  onCancel: () => void;
}) {
  const t = useMessages();
  const { mass, pressure, locale } = usePreferences();
  const update = useUpdateCylinder(cylinder);
  const [errors, setErrors] = useState<FormError[]>([]);
  const [draft, setDraft, clear] = useDraft<Draft>(`cylinder.${cylinder.id}.change.${cylinder.version}`, () =>
    draftOf(cylinder, massUnitOf(mass), pressure === 'psig' ? 'psi' : pressure, locale),
  );
  const set = (change: Partial<Draft>) => setDraft((now) => ({ ...now, ...change }));
  const { tag, batch, state, retestDue, capacity, service } = draft;
  const send = () => {
    const typedCapacity = readQuantity('mass', capacity, { locale });
    const typedService = readQuantity('pressureGauge', service, { locale });
    const change = {
      ...(tag.trim() === cylinder.tag ? {} : { tag }),
      ...(batch.trim() === (cylinder.batch ?? '') ? {} : { batch: batch.trim() || null }),
      ...(state === cylinder.contentState ? {} : { contentState: state as Cylinder['contentState'] }),
      ...(retestDue === (cylinder.retestDue ?? '') ? {} : { retestDue: retestDue || null }),
      ...capacityChange(),
      ...serviceChange(),
    };
    function capacityChange() {
      if (typedCapacity.is === 'empty') return cylinder.waterCapacityG === null ? {} : { waterCapacity: null };
      if (typedCapacity.is !== 'read') return { waterCapacity: { value: '', unit: 'g' as const } };
      return typedCapacity.base === cylinder.waterCapacityG ? {} : { waterCapacity: typedCapacity.typed };
    }
    function serviceChange() {
      if (typedService.is === 'empty') {
        return cylinder.servicePressureKPaGauge === null ? {} : { servicePressureKPaGauge: null };
      }
      if (typedService.is !== 'read') return { servicePressureKPaGauge: Number.NaN };
      return typedService.base === cylinder.servicePressureKPaGauge
        ? {}
        : { servicePressureKPaGauge: typedService.base };
    }
    const found = schemaErrors(updateCylinderRequest, change);
    setErrors(found);
    if (found.length > 0) return;
    if (Object.keys(change).length === 0) {
      onCancel();
      return;
    }
    update.mutate(change, {
      onSuccess: () => {
        clear();
        onDone(t('cylinders.change.done'));
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
      <TextField
        layout="row"
        label={t('cylinders.tag')}
        value={tag}
        maxLength={40}
        error={errorAt(errors, '/tag')}
        onChange={(event) => set({ tag: event.target.value })}
      />
      <TextField
        layout="row"
        type="date"
        label={t('cylinders.retest')}
        value={retestDue}
        error={errorAt(errors, '/retestDue')}
        onChange={(event) => set({ retestDue: event.target.value })}
      />
      <QuantityInput
        kind="pressureGauge"
        label={t('cylinders.pressure')}
        units={PRESSURE_UNITS}
        draft={service}
        min={0.1}
        max={30_000}
        error={errorAt(errors, '/servicePressureKPaGauge') ? t('cylinders.form.pressureNeeded') : undefined}
        onChange={(changed) => set({ service: changed })}
      />
      <QuantityInput
        kind="mass"
        label={t('cylinders.waterCapacity')}
        units={MASS_UNITS}
        draft={capacity}
        min={0.001}
        error={errorAt(errors, '/waterCapacity') ? t('cylinders.form.massNeeded') : undefined}
        onChange={(changed) => set({ capacity: changed })}
      />
      <SelectField
        layout="row"
        label={t('cylinders.contentState')}
        choices={CONTENT_STATES.map((value) => ({ value, label: t(`cylinders.state.${value}`) }))}
        value={state}
        onChange={(event) => set({ state: event.target.value })}
      />
      <TextField
        layout="row"
        label={t('cylinders.batch')}
        value={batch}
        maxLength={60}
        error={errorAt(errors, '/batch')}
        onChange={(event) => set({ batch: event.target.value })}
      />
      <FormFoot
        errors={errors}
        shown={SHOWN}
        busy={update.isPending}
        act={t('cylinders.change.act')}
        onCancel={onCancel}
      />
    </form>
  );
}
