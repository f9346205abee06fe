import { useMessages } from '../../lib/messages.ts';
import { SelectField } from '../../ui/field.tsx';
import type { Allocation } from './charge-draft.ts';
import { useChargeForm } from './charge-form.ts';
import { QuantityField } from './quantity-field.tsx';

/** What the factory charge already serves: a length or a mass. Brackets and a maker's letter ask for none. */
export function PrechargeField() {
  const t = useMessages();
  const { draft, set, errorAt } = useChargeForm();
  if (draft.rateKind === 'stepped' || draft.rateKind === 'fixedMass') return null;
  if (draft.prechargeScope === 'mass') {
    return (
      <QuantityField
        kind="mass"
        label={t('chargeScreen.prechargeMass')}
        pointer="/basis/precharge/massG"
        draft={draft.prechargeMass}
        onChange={(value) => set('prechargeMass', value)}
      />
    );
  }
  const label = t(
    draft.prechargeScope === 'system' ? 'chargeScreen.precharge' : `chargeScreen.precharge.${draft.prechargeScope}`,
  );
  return (
    <>
      <QuantityField
        kind="length"
        label={label}
        pointer="/basis/precharge/lengthM"
        draft={draft.prechargeLength}
        hint={t('chargeScreen.prechargeHint')}
        onChange={(value) => set('prechargeLength', value)}
      />
      {needsAllocation(draft.pipes.map((pipe) => pipe.liquidOd)) && draft.prechargeScope !== 'branch' ? (
        <SelectField
          big
          layout="row"
          label={t('chargeScreen.allocation')}
          name="/basis/precharge/allocation"
          placeholder={t('chargeScreen.choose')}
          choices={(['largestFirst', 'smallestFirst', 'proportional'] as const).map((value) => ({
            value,
            label: t(`chargeScreen.allocation.${value}`),
          }))}
          value={draft.allocation}
          error={errorAt('/basis/precharge/allocation')}
          onChange={(event) => set('allocation', event.target.value as Allocation | '')}
        />
      ) : null}
    </>
  );
}

/** One shared length over different sizes: the manual has to say which it credits first. */
const needsAllocation = (ods: readonly string[]) => new Set(ods.filter((od) => od !== '')).size > 1;
