import { useFieldArray, useFormContext, useWatch } from 'react-hook-form';
import { APPLIANCE_KINDS, SUBSECTORS } from '../../../shared/unit-register/unit.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { FormCheck, FormQuantity, FormSelect, FormText } from '../../ui/request-form.tsx';
import type { PlateValues } from './unit-values.ts';

const PARTS = ['outdoor', 'indoor', 'module', 'other'] as const;

/** Tag, name and what the law calls it. */
export function NameFields() {
  const t = useMessages();
  return (
    <>
      <FormText name="tag" label={t('units.tag')} hint={t('units.form.tagHint')} maxLength={40} autoComplete="off" />
      <FormText
        name="name"
        label={t('units.name')}
        hint={t('units.form.nameHint')}
        maxLength={160}
        autoComplete="off"
      />
    </>
  );
}

export function ApplianceFields({ kindFixed = false }: { kindFixed?: boolean }) {
  const t = useMessages();
  const kind = useWatch({ name: 'applianceKind' });
  return (
    <>
      {kindFixed ? null : (
        <FormSelect
          name="applianceKind"
          label={t('units.applianceKind')}
          choices={APPLIANCE_KINDS.map((value) => ({ value, label: t(`units.applianceKind.${value}`) }))}
        />
      )}
      {kind === 'comfortCooling' ? (
        <FormSelect
          name="subsector"
          label={t('units.subsector')}
          placeholder={t('units.form.notSaid')}
          choices={SUBSECTORS.map((value) => ({ value, label: t(`units.subsector.${value}`) }))}
        />
      ) : null}
    </>
  );
}

/** What the nameplate says, or that it cannot be read: both are facts. */
export function NameplateFields() {
  const t = useMessages();
  const { control } = useFormContext<PlateValues>();
  const serials = useFieldArray({ control, name: 'serials' });
  return (
    <>
      <FormCheck
        name="nameplateReadable"
        label={t('units.form.nameplateReadable')}
        hint={t('units.form.nameplateHint')}
      />
      {serials.fields.map((row, index) => (
        <fieldset key={row.id} className="border-t border-rule-faint py-1.5">
          <legend className="sr-only">{t('units.form.serialOf', { number: index + 1 })}</legend>
          <FormSelect
            name={`serials.${index}.part`}
            label={t('units.form.part')}
            choices={PARTS.map((value) => ({ value, label: t(`units.serial.${value}`) }))}
          />
          <FormText name={`serials.${index}.serial`} label={t('units.form.serial')} maxLength={60} autoComplete="off" />
          <FormText name={`serials.${index}.model`} label={t('units.form.model')} maxLength={80} autoComplete="off" />
          <Button kind="quiet" onClick={() => serials.remove(index)}>
            {t('units.form.removeSerial', { number: index + 1 })}
          </Button>
        </fieldset>
      ))}
      <Button
        className="self-start"
        onClick={() =>
          serials.append({ part: serials.fields.length === 0 ? 'outdoor' : 'indoor', serial: '', model: '' })
        }
      >
        {t('units.form.addSerial')}
      </Button>
      <FormQuantity
        kind="pressureGauge"
        name="designHigh"
        label={t('units.form.designHigh')}
        hint={t('units.form.optional')}
        units={['psi', 'bar', 'kPa']}
        min={0.001}
        max={20_000}
        example="605 psi"
      />
      <FormQuantity
        kind="pressureGauge"
        name="designLow"
        label={t('units.form.designLow')}
        hint={t('units.form.optional')}
        units={['psi', 'bar', 'kPa']}
        min={0.001}
        max={20_000}
        example="300 psi"
      />
      <FormText type="date" name="installedOn" label={t('units.installedOn')} hint={t('units.form.optional')} />
    </>
  );
}
