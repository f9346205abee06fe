import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Disclosure } from '../../ui/disclosure.tsx';
import { SelectField, TextField } from '../../ui/field.tsx';
import { emptyQuantity } from '../../ui/quantity-draft.ts';
import { BOUNDS } from './bounds.ts';
import { type ChargeDraft, fieldUnits, rowKey } from './charge-draft.ts';
import { useChargeForm, useOpen } from './charge-form.ts';
import { CountField } from './count-field.tsx';
import { RATE_KIND_CHOICES, SCOPE_CHOICES } from './fixed-choices.ts';
import { ListRow } from './list-row.tsx';
import { QuantityField } from './quantity-field.tsx';

/** How this manual gives its rule: kind of rate, what the pre-charge serves, allowances, rounding, and where it says so. */
export function RuleSection() {
  const t = useMessages();
  const { draft, set, errorAt } = useChargeForm();
  const wrong = draft.allowances.some((_, index) => errorAt(`/basis/allowances/${index}/gEach`) !== undefined);
  const [open, setOpen] = useOpen(wrong);
  const choices = (prefix: string, values: readonly string[]) =>
    values.map((value) => ({ value, label: t(`${prefix}.${value}`) }));
  const hasPrecharge = draft.rateKind !== 'stepped' && draft.rateKind !== 'fixedMass';
  return (
    <Disclosure
      title={t('chargeScreen.rule')}
      summary={t(`chargeScreen.rateKind.${draft.rateKind}`)}
      open={open}
      onToggle={setOpen}
    >
      <SelectField
        layout="row"
        label={t('chargeScreen.rateKind')}
        choices={choices('chargeScreen.rateKind', RATE_KIND_CHOICES)}
        value={draft.rateKind}
        onChange={(event) => set('rateKind', event.target.value as ChargeDraft['rateKind'])}
      />
      {hasPrecharge ? (
        <SelectField
          layout="row"
          label={t('chargeScreen.scope')}
          choices={choices('chargeScreen.scope', SCOPE_CHOICES)}
          value={draft.prechargeScope}
          onChange={(event) => set('prechargeScope', event.target.value as ChargeDraft['prechargeScope'])}
        />
      ) : null}
      <SelectField
        layout="row"
        label={t('chargeScreen.shortLine')}
        choices={choices('chargeScreen.shortLine', ['none', 'remove'])}
        value={draft.shortLine}
        onChange={(event) => set('shortLine', event.target.value as ChargeDraft['shortLine'])}
      />
      <Allowances />
      <QuantityField
        kind="mass"
        big={false}
        min={BOUNDS.leastRoundingG}
        max={BOUNDS.roundingG}
        label={t('chargeScreen.roundTo')}
        hint={t('chargeScreen.roundToHint')}
        pointer="/basis/rounding/toG"
        draft={draft.roundTo}
        onChange={(value) => set('roundTo', value)}
      />
      <SelectField
        layout="row"
        label={t('chargeScreen.roundDirection')}
        choices={choices('chargeScreen.roundDirection', ['nearest', 'up', 'down'])}
        value={draft.roundDirection}
        onChange={(event) => set('roundDirection', event.target.value as ChargeDraft['roundDirection'])}
      />
      <SelectField
        layout="row"
        label={t('chargeScreen.metering')}
        choices={choices('chargeScreen.metering', ['unknown', 'outdoor', 'indoor'])}
        value={draft.metering}
        onChange={(event) => set('metering', event.target.value as ChargeDraft['metering'])}
      />
      <TextField
        layout="row"
        label={t('chargeScreen.document')}
        value={draft.document}
        maxLength={160}
        autoComplete="off"
        onChange={(event) => set('document', event.target.value)}
      />
      <TextField
        layout="row"
        label={t('chargeScreen.page')}
        value={draft.page}
        maxLength={20}
        autoComplete="off"
        onChange={(event) => set('page', event.target.value)}
      />
    </Disclosure>
  );
}

function Allowances() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, addRow, setRow, removeRow } = useChargeForm();
  return (
    <fieldset className="my-2 border-y border-rule py-1">
      <legend className="sr-only">{t('chargeScreen.allowances')}</legend>
      <ul>
        {draft.allowances.map((row, index) => {
          const at = `/basis/allowances/${index}`;
          return (
            <ListRow
              key={row.key}
              title={row.label.trim() || `${t('chargeScreen.allowance')} ${index + 1}`}
              what={row.label.trim() || `${t('chargeScreen.allowance')} ${index + 1}`}
              onRemove={() => removeRow('allowances', row.key)}
            >
              <TextField
                layout="row"
                label={t('chargeScreen.allowance.label')}
                name={`${at}/label`}
                value={row.label}
                maxLength={BOUNDS.labelLength}
                autoComplete="off"
                onChange={(event) => setRow('allowances', row.key, { label: event.target.value })}
              />
              <QuantityField
                kind="mass"
                big={false}
                allowNegative
                label={t('chargeScreen.allowance.each')}
                pointer={`${at}/gEach`}
                draft={row.each}
                onChange={(each) => setRow('allowances', row.key, { each })}
              />
              <CountField
                label={t('chargeScreen.allowance.count')}
                pointer={`${at}/count`}
                value={row.count}
                max={BOUNDS.count}
                onChange={(count) => setRow('allowances', row.key, { count })}
              />
              <CountField
                label={t('chargeScreen.allowance.factor')}
                hint={t('chargeScreen.allowance.factorHint')}
                pointer={`${at}/factor`}
                value={row.factor}
                max={BOUNDS.factor}
                whole={false}
                onChange={(factor) => setRow('allowances', row.key, { factor })}
              />
            </ListRow>
          );
        })}
      </ul>
      <Button
        kind="quiet"
        onClick={() =>
          addRow('allowances', {
            key: rowKey(),
            label: '',
            each: emptyQuantity(fieldUnits(preferences).mass),
            count: '1',
            factor: '',
          })
        }
      >
        {t('chargeScreen.addAllowance')}
      </Button>
    </fieldset>
  );
}
