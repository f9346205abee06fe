import { useState } from 'react';
import { CONTENT_STATES, type Cylinder, updateCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import { useUpdateCylinder } from '../../api/cylinders.ts';
import { answerErrors, errorAt, type FormError, schemaErrors } from '../../api/form-errors.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { SelectField, TextField } from '../../ui/field.tsx';
import { emptyQuantity, type QuantityDraft, quantityOf, readQuantity } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { FormFoot, MASS_UNITS, massUnitOf } from './form-parts.tsx';

const SHOWN = ['/tag', '/batch', '/retestDue', '/waterCapacity', '/servicePressureKPaGauge', '/contentState'];
const PRESSURE_UNITS = ['psi', 'bar', 'kPa'] as const;

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
  const [tag, setTag] = useState(cylinder.tag);
  const [batch, setBatch] = useState(cylinder.batch ?? '');
  const [state, setState] = useState<string>(cylinder.contentState);
  const [retestDue, setRetestDue] = useState(cylinder.retestDue ?? '');
  const [capacity, setCapacity] = useState<QuantityDraft<'mass'>>(() =>
    cylinder.waterCapacityG === null
      ? emptyQuantity(massUnitOf(mass))
      : quantityOf('mass', cylinder.waterCapacityG, massUnitOf(mass), locale),
  );
  const [service, setService] = useState<QuantityDraft<'pressureGauge'>>(() => {
    const unit = pressure === 'psig' ? 'psi' : pressure;
    return cylinder.servicePressureKPaGauge === null
      ? emptyQuantity<'pressureGauge'>(unit)
      : quantityOf('pressureGauge', cylinder.servicePressureKPaGauge, unit, locale);
  });
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
      onSuccess: () => onDone(t('cylinders.change.done')),
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
        onChange={(event) => setTag(event.target.value)}
      />
      <TextField
        layout="row"
        type="date"
        label={t('cylinders.retest')}
        value={retestDue}
        error={errorAt(errors, '/retestDue')}
        onChange={(event) => setRetestDue(event.target.value)}
      />
      <QuantityInput
        kind="pressureGauge"
        label={t('cylinders.pressure')}
        units={PRESSURE_UNITS}
        draft={service}
        error={errorAt(errors, '/servicePressureKPaGauge') ? t('cylinders.form.pressureNeeded') : undefined}
        onChange={setService}
      />
      <QuantityInput
        kind="mass"
        label={t('cylinders.waterCapacity')}
        units={MASS_UNITS}
        draft={capacity}
        error={errorAt(errors, '/waterCapacity') ? t('cylinders.form.massNeeded') : undefined}
        onChange={setCapacity}
      />
      <SelectField
        layout="row"
        label={t('cylinders.contentState')}
        choices={CONTENT_STATES.map((value) => ({ value, label: t(`cylinders.state.${value}`) }))}
        value={state}
        onChange={(event) => setState(event.target.value)}
      />
      <TextField
        layout="row"
        label={t('cylinders.batch')}
        value={batch}
        maxLength={60}
        error={errorAt(errors, '/batch')}
        onChange={(event) => setBatch(event.target.value)}
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
