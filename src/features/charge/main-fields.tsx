import { useMemo } from 'react';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { SelectField } from '../../ui/field.tsx';
import { emptyPipe, fieldUnits, nextPipeName } from './charge-draft.ts';
import { useChargeForm } from './charge-form.ts';
import { usePipeChoices } from './pipe-choices.ts';
import { PipeList } from './pipe-list.tsx';
import { PrechargeField } from './precharge-field.tsx';
import { QuantityField } from './quantity-field.tsx';
import { RateFields } from './rate-fields.tsx';
import { allRefrigerants } from './reference-tables.ts';

/** What ductless work meets; the others follow. */
const USUAL = ['R-32', 'R-410A', 'R-454B', 'R-452B', 'R-22', 'R-407C', 'R-290'];

/** The six figures that most jobs need, in the order in which they are found: nameplate, tape, manual. */
export function MainFields() {
  const t = useMessages();
  const preferences = usePreferences();
  const { draft, set, setRow, addRow, errorAt } = useChargeForm();
  const pipes = usePipeChoices();
  const refrigerants = useMemo(() => refrigerantGroups(t), [t]);
  const pipe = draft.pipes[0];
  return (
    <section aria-label={t('chargeScreen.inputs')} className="border-t border-rule pt-1">
      <SelectField
        big
        layout="row"
        label={t('chargeScreen.refrigerant')}
        name="/basis/refrigerant"
        placeholder={t('chargeScreen.choose')}
        groups={refrigerants}
        value={draft.refrigerant}
        error={errorAt('/basis/refrigerant')}
        onChange={(event) => set('refrigerant', event.target.value)}
      />
      <QuantityField
        kind="mass"
        label={t('chargeScreen.factoryCharge')}
        pointer="/basis/factoryChargeG"
        draft={draft.factoryCharge}
        onChange={(value) => set('factoryCharge', value)}
      />
      {draft.pipes.length === 1 && pipe ? (
        <>
          <SelectField
            big
            layout="row"
            label={t('chargeScreen.liquidPipe')}
            name="/lineSet/branches/0/liquidOdMm"
            placeholder={t('chargeScreen.choose')}
            groups={pipes}
            value={pipe.liquidOd}
            error={errorAt('/lineSet/branches/0/liquidOdMm')}
            onChange={(event) => setRow('pipes', pipe.key, { liquidOd: event.target.value })}
          />
          <QuantityField
            kind="length"
            label={t('chargeScreen.run')}
            pointer="/lineSet/branches/0/lengthM"
            draft={pipe.length}
            onChange={(length) => setRow('pipes', pipe.key, { length })}
          />
        </>
      ) : (
        <PipeList list="pipes" at="/lineSet" title={t('chargeScreen.pipes')} />
      )}
      <PrechargeField />
      <RateFields />
      {draft.pipes.length === 1 ? (
        <Button
          kind="quiet"
          onClick={() => {
            const name = nextPipeName(draft.pipes);
            const next = emptyPipe(name, fieldUnits(preferences));
            addRow('pipes', { ...next, liquidOd: pipe?.liquidOd ?? '' });
          }}
        >
          {t('chargeScreen.morePipes')}
        </Button>
      ) : null}
    </section>
  );
}

function refrigerantGroups(t: ReturnType<typeof useMessages>) {
  const choice = (designation: string) => {
    const row = allRefrigerants.find((candidate) => candidate.designation === designation);
    return { value: designation, label: `${designation}  ${row?.safetyClass ?? ''}` };
  };
  const others = allRefrigerants.map((row) => row.designation).filter((name) => !USUAL.includes(name));
  return [
    { label: t('chargeScreen.usualRefrigerants'), choices: USUAL.map(choice) },
    { label: t('chargeScreen.otherRefrigerants'), choices: others.map(choice) },
  ];
}
