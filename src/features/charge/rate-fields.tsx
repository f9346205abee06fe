import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { FieldError, SelectField, TextField } from '../../ui/field.tsx';
import { emptyQuantity } from '../../ui/quantity-draft.ts';
import { BOUNDS } from './bounds.ts';
import { fieldUnits, rowKey } from './charge-draft.ts';
import { useChargeForm } from './charge-form.ts';
import { ListRow } from './list-row.tsx';
import { pipeName, usePipeChoices } from './pipe-choices.ts';
import { QuantityField } from './quantity-field.tsx';

/** The manual's rate in the form in which this manual gives it. */
export function RateFields() {
  const { draft } = useChargeForm();
  switch (draft.rateKind) {
    case 'flat':
      return <FlatRate />;
    case 'byLiquidPipe':
      return <RateBySize />;
    case 'stepped':
      return <Brackets />;
    case 'formula':
      return <Formula />;
    case 'fixedMass':
      return <FixedMass />;
  }
}

function FlatRate() {
  const t = useMessages();
  const { draft, set } = useChargeForm();
  return (
    <QuantityField
      kind="massPerLength"
      label={t('chargeScreen.rate')}
      pointer="/basis/rate/gPerM"
      draft={draft.rate}
      onChange={(value) => set('rate', value)}
    />
  );
}

function RateBySize() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, setRow, addRow, removeRow, errorAt } = useChargeForm();
  const pipes = usePipeChoices();
  const units = fieldUnits(preferences);
  return (
    <RowList title={t('chargeScreen.rateBySize')} error={errorAt('/basis/rate/sizes')}>
      {draft.sizes.map((row, index) => (
        <ListRow
          key={row.key}
          title={row.od === '' ? t('chargeScreen.rateOfSize') : pipeName(Number(row.od), preferences)}
          what={t('chargeScreen.rateOfSize')}
          onRemove={() => removeRow('sizes', row.key)}
        >
          <SelectField
            layout="row"
            label={t('chargeScreen.liquidPipe')}
            name={`/basis/rate/sizes/${index}/liquidOdMm`}
            placeholder={t('chargeScreen.choose')}
            groups={pipes}
            value={row.od}
            error={errorAt(`/basis/rate/sizes/${index}/liquidOdMm`)}
            onChange={(event) => setRow('sizes', row.key, { od: event.target.value })}
          />
          <QuantityField
            kind="massPerLength"
            big={false}
            label={t('chargeScreen.rateOfSize')}
            pointer={`/basis/rate/sizes/${index}/gPerM`}
            draft={row.rate}
            onChange={(rate) => setRow('sizes', row.key, { rate })}
          />
        </ListRow>
      ))}
      <li>
        <Button
          kind="quiet"
          name="/basis/rate/sizes"
          onClick={() => addRow('sizes', { key: rowKey(), od: '', rate: emptyQuantity(units.rate) })}
        >
          {t('chargeScreen.addSize')}
        </Button>
      </li>
    </RowList>
  );
}

function Brackets() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, setRow, addRow, removeRow, errorAt } = useChargeForm();
  const units = fieldUnits(preferences);
  return (
    <RowList title={t('chargeScreen.brackets')} error={errorAt('/basis/rate/steps')}>
      {draft.brackets.map((row, index) => (
        <ListRow
          key={row.key}
          title={`${t('chargeScreen.bracket')} ${index + 1}`}
          what={`${t('chargeScreen.bracket')} ${index + 1}`}
          onRemove={() => removeRow('brackets', row.key)}
        >
          <QuantityField
            kind="length"
            big={false}
            label={t('chargeScreen.upTo')}
            pointer={`/basis/rate/steps/${index}/upToM`}
            draft={row.upTo}
            onChange={(upTo) => setRow('brackets', row.key, { upTo })}
          />
          <QuantityField
            kind="mass"
            big={false}
            allowNegative
            label={t('chargeScreen.bracketExtra')}
            pointer={`/basis/rate/steps/${index}/extraG`}
            draft={row.extra}
            onChange={(extra) => setRow('brackets', row.key, { extra })}
          />
        </ListRow>
      ))}
      <li>
        <Button
          kind="quiet"
          name="/basis/rate/steps"
          onClick={() =>
            addRow('brackets', {
              key: rowKey(),
              upTo: emptyQuantity(units.length),
              extra: emptyQuantity(units.mass),
            })
          }
        >
          {t('chargeScreen.addBracket')}
        </Button>
      </li>
    </RowList>
  );
}

function Formula() {
  const t = useMessages();
  const { draft, set, errorAt } = useChargeForm();
  return (
    <div className="py-1.5">
      <TextField
        big
        label={t('chargeScreen.formula')}
        hint={t('chargeScreen.formulaHint')}
        name="/basis/rate/expression"
        value={draft.expression}
        maxLength={BOUNDS.expressionLength}
        spellCheck={false}
        autoComplete="off"
        autoCapitalize="off"
        style={{ fontFamily: 'var(--font-mono)', fontSize: '1rem' }}
        error={errorAt('/basis/rate/expression')}
        onChange={(event) => set('expression', event.target.value)}
      />
    </div>
  );
}

function FixedMass() {
  const t = useMessages();
  const { draft, set } = useChargeForm();
  return (
    <QuantityField
      kind="mass"
      allowNegative
      label={t('chargeScreen.fixedMass')}
      pointer="/basis/rate/extraG"
      draft={draft.fixedMass}
      onChange={(value) => set('fixedMass', value)}
    />
  );
}

function RowList({ title, error, children }: { title: string; error?: string | undefined; children: React.ReactNode }) {
  return (
    <fieldset className="mt-2 border-t border-rule pt-2">
      <legend className="float-left w-full font-[600]">{title}</legend>
      <ul className="clear-left">{children}</ul>
      {error ? <FieldError>{error}</FieldError> : null}
    </fieldset>
  );
}
