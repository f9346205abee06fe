import { useFieldArray, useFormContext, useWatch } from 'react-hook-form';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { FormChoice, FormQuantity, FormSelect, FormText } from '../../ui/request-form.tsx';
import {
  type BasisValues,
  emptyAllowance,
  emptySize,
  emptyStep,
  LIMIT_NAMES,
  RATE_KINDS,
  SCOPES,
} from './basis-values.ts';
import { FormPart } from './form-part.tsx';
import { pipeSizeChoices } from './pipe-sizes.ts';

const MASS = { units: ['g', 'kg', 'oz', 'lb'], max: 10_000_000 } as const;
const LENGTH = { units: ['m', 'ft'], max: 10_000 } as const;
const RATE = { units: ['g/m', 'oz/ft'], max: 100_000, example: '20 g/m' } as const;

/** Factory charge, what it serves already, and what a metre more takes. */
export function RateFields() {
  const t = useMessages();
  const kind = useWatch<BasisValues>({ name: 'rateKind' });
  return (
    <FormPart title={t('units.basis.rule')}>
      <FormQuantity kind="mass" name="factoryCharge" label={t('units.basis.factory')} {...MASS} example="1200 g" />
      <FormSelect
        layout="stack"
        name="rateKind"
        label={t('units.basis.rateKind')}
        choices={RATE_KINDS.map((value) => ({ value, label: t(`units.basis.rateKind.${value}`) }))}
      />
      {kind === 'flat' ? (
        <FormQuantity kind="massPerLength" name="rate" label={t('units.basis.rate')} {...RATE} />
      ) : null}
      {kind === 'byLiquidPipe' ? <SizeRows /> : null}
      {kind === 'stepped' ? <StepRows /> : null}
      {kind === 'formula' ? (
        <FormText
          name="expression"
          label={t('units.basis.formula')}
          hint={t('units.basis.formulaHint')}
          maxLength={500}
          autoComplete="off"
          spellCheck={false}
        />
      ) : null}
      {kind === 'fixedMass' ? (
        <FormQuantity
          kind="mass"
          name="fixedMass"
          label={t('units.basis.fixedMass')}
          {...MASS}
          allowNegative
          min={-10_000_000}
        />
      ) : null}
      {kind === 'stepped' || kind === 'fixedMass' ? null : <Precharge />}
    </FormPart>
  );
}

function Precharge() {
  const t = useMessages();
  const scope = useWatch<BasisValues>({ name: 'scope' });
  return (
    <>
      <FormSelect
        layout="stack"
        name="scope"
        label={t('units.basis.precharge')}
        choices={SCOPES.map((value) => ({ value, label: t(`units.basis.scopeName.${value}`) }))}
      />
      {scope === 'mass' ? (
        <FormQuantity kind="mass" name="prechargeMass" label={t('units.basis.prechargeMass')} {...MASS} />
      ) : scope === 'none' ? null : (
        <>
          <FormQuantity
            kind="length"
            name="prechargeLength"
            label={t('units.basis.prechargeLength')}
            {...LENGTH}
            example="7.5 m"
          />
          {scope === 'branch' ? null : (
            <FormSelect
              layout="stack"
              name="allocation"
              label={t('units.basis.allocation')}
              placeholder={t('units.basis.allocation.none')}
              choices={(['proportional', 'largestFirst', 'smallestFirst'] as const).map((value) => ({
                value,
                label: t(`units.basis.allocation.${value}`),
              }))}
            />
          )}
        </>
      )}
    </>
  );
}

function SizeRows() {
  const t = useMessages();
  const preferences = usePreferences();
  const { control } = useFormContext<BasisValues>();
  const rows = useFieldArray({ control, name: 'sizes' });
  const sizes = pipeSizeChoices(preferences);
  return (
    <>
      {rows.fields.map((row, index) => (
        <Row key={row.id} number={index + 1} onRemove={rows.fields.length > 1 ? () => rows.remove(index) : null}>
          <FormSelect
            name={`sizes.${index}.od`}
            label={t('units.lineSet.liquidPipe')}
            placeholder={t('units.form.choose')}
            choices={sizes}
          />
          <FormQuantity kind="massPerLength" name={`sizes.${index}.rate`} label={t('units.basis.rate')} {...RATE} />
        </Row>
      ))}
      <Button className="self-start" onClick={() => rows.append(emptySize(preferences))}>
        {t('units.basis.addSize')}
      </Button>
    </>
  );
}

function StepRows() {
  const t = useMessages();
  const preferences = usePreferences();
  const { control } = useFormContext<BasisValues>();
  const rows = useFieldArray({ control, name: 'steps' });
  return (
    <>
      {rows.fields.map((row, index) => (
        <Row key={row.id} number={index + 1} onRemove={rows.fields.length > 1 ? () => rows.remove(index) : null}>
          <FormQuantity kind="length" name={`steps.${index}.upTo`} label={t('units.basis.upTo')} {...LENGTH} />
          <FormQuantity
            kind="mass"
            name={`steps.${index}.extra`}
            label={t('units.basis.stepExtra')}
            {...MASS}
            allowNegative
            min={-10_000_000}
          />
        </Row>
      ))}
      <Button className="self-start" onClick={() => rows.append(emptyStep(preferences))}>
        {t('units.basis.addStep')}
      </Button>
    </>
  );
}

/** What must not be gone past, all of it optional: what the manual does not say is left empty. */
export function LimitFields() {
  const t = useMessages();
  return (
    <FormPart title={t('units.basis.limitsHeading')}>
      <p className="text-[0.9375rem] text-ink-soft">{t('units.basis.limitsHint')}</p>
      {LIMIT_NAMES.map((name) => (
        <FormQuantity
          key={name}
          kind="length"
          name={`limits.${name}`}
          label={t(`units.basis.limitName.${name}`)}
          {...LENGTH}
        />
      ))}
      <FormQuantity kind="mass" name="maxTotal" label={t('units.basis.limitName.maxTotalChargeG')} {...MASS} />
    </FormPart>
  );
}

/** Allowances, rounding, short lines, where the metering sits. */
export function ManualRuleFields() {
  const t = useMessages();
  const preferences = usePreferences();
  const { control } = useFormContext<BasisValues>();
  const rows = useFieldArray({ control, name: 'allowances' });
  return (
    <FormPart title={t('units.basis.more')}>
      {rows.fields.map((row, index) => (
        <Row key={row.id} number={index + 1} onRemove={() => rows.remove(index)}>
          <FormText name={`allowances.${index}.label`} label={t('units.basis.allowanceFor')} maxLength={80} />
          <FormQuantity
            kind="mass"
            name={`allowances.${index}.each`}
            label={t('units.basis.allowanceEach')}
            {...MASS}
            allowNegative
            min={-10_000_000}
          />
          <FormText name={`allowances.${index}.count`} label={t('units.basis.allowanceCount')} inputMode="numeric" />
          <FormText
            name={`allowances.${index}.factor`}
            label={t('units.basis.allowanceFactor')}
            hint={t('units.form.optional')}
            inputMode="decimal"
          />
        </Row>
      ))}
      <Button className="self-start" onClick={() => rows.append(emptyAllowance(preferences))}>
        {t('units.basis.addAllowance')}
      </Button>
      <FormQuantity
        kind="mass"
        name="roundTo"
        label={t('units.basis.roundTo')}
        hint={t('units.basis.roundToHint')}
        units={['g', 'kg', 'oz']}
        min={0.001}
        max={10_000}
      />
      <FormChoice
        name="direction"
        label={t('units.basis.direction')}
        choices={(['nearest', 'up', 'down'] as const).map((value) => ({
          value,
          label: t(`units.basis.direction.${value}`),
        }))}
      />
      <FormChoice
        name="shortLine"
        label={t('units.basis.shortLine')}
        choices={(['none', 'remove'] as const).map((value) => ({
          value,
          label: t(`units.basis.shortLine.${value}`),
        }))}
      />
      <FormChoice
        name="metering"
        label={t('units.basis.metering')}
        choices={(['unknown', 'indoor', 'outdoor'] as const).map((value) => ({
          value,
          label: t(`units.basis.metering.${value}`),
        }))}
      />
    </FormPart>
  );
}

function Row({
  number,
  onRemove,
  children,
}: {
  number: number;
  onRemove: (() => void) | null;
  children: React.ReactNode;
}) {
  const t = useMessages();
  return (
    <fieldset className="border-t border-rule-faint py-1.5">
      <legend className="sr-only">{t('units.form.rowOf', { number })}</legend>
      {children}
      {onRemove ? (
        <Button kind="quiet" onClick={onRemove}>
          {t('units.form.removeRow', { number })}
        </Button>
      ) : null}
    </fieldset>
  );
}
