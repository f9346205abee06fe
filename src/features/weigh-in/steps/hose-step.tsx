import { useEffect, useState } from 'react';
import type { TypedMass } from '../../../../shared/ledger/entry-group.schema.ts';
import type { SaturationTable } from '../../../../shared/reference/saturation-table.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { Disclosure } from '../../../ui/disclosure.tsx';
import { ChoiceField } from '../../../ui/field.tsx';
import { Notice } from '../../../ui/notice.tsx';
import {
  baseOf,
  emptyQuantity,
  type QuantityDraft,
  quantityOfTyped,
  readQuantity,
} from '../../../ui/quantity-draft.ts';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import { keepHabits, readHabits } from '../habits.ts';
import { hoseContentG, loadSaturation, type Phase } from '../refrigerant-facts.ts';
import { StepPage } from '../step-page.tsx';
import { type StepProps, useStepDraft } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';

/** Nobody charges against a scale by more than a few metres of hose. */
const MOST_HOSE_G = 5000;
/** Under it the hose is less than a scale of this trade shows. */
const LEAST_HOSE_G = 0.5;

/** The hose: full and purged at the start or not, and what it holds, which may be a third of a small extra charge. */
export function HoseStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const { locale, mass } = usePreferences();
  const leg = weighIn.legs.at(-1);
  const [full, setFull] = useStepDraft(weighIn, 'hose-full', () => leg?.hose.full ?? true);
  const [content, setContent] = useStepDraft<QuantityDraft<'mass'>>(weighIn, 'hose-content', () =>
    leg?.hose.content
      ? quantityOfTyped('mass', leg.hose.content, locale)
      : emptyQuantity(mass === 'oz' || mass === 'lbOz' ? 'oz' : 'g'),
  );
  const [asked, setAsked] = useState(false);
  const reading = readQuantity('mass', content, { locale });
  const counts = reading.is === 'read' && reading.base >= LEAST_HOSE_G;
  const goOn = (hose: TypedMass | null) => {
    // A second cylinder's hose is a fresh connection: it is no habit.
    keepHabits({ hose: { full: weighIn.legs.length > 1 ? readHabits().hose.full : full, content: hose } });
    dispatch({ type: 'hose', hose: { full, content: hose } });
  };
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.hose.title')}
      lead={t('weighIn.hose.lead')}
      next={
        <Button
          kind="act"
          wide
          onClick={() => (counts && reading.base <= MOST_HOSE_G ? goOn(reading.typed as TypedMass) : setAsked(true))}
        >
          {t('weighIn.goOn')}
        </Button>
      }
    >
      <ChoiceField
        label={t('weighIn.hose.full')}
        name="full"
        value={full ? 'yes' : 'no'}
        choices={[
          { value: 'yes', label: t('weighIn.hose.full.yes') },
          { value: 'no', label: t('weighIn.hose.full.no') },
        ]}
        onChange={(value) => setFull(value === 'yes')}
      />
      <p className="-mt-2 text-[0.9375rem] leading-snug text-ink-soft">
        {t(full ? 'weighIn.hose.full.yes.detail' : 'weighIn.hose.full.no.detail')}
      </p>
      <QuantityInput
        kind="mass"
        layout="stack"
        big
        label={t('weighIn.hose.content')}
        draft={content}
        onChange={setContent}
        units={['g', 'oz']}
        max={MOST_HOSE_G}
        example="1 oz"
        error={asked && !counts && reading.is !== 'refused' ? t('weighIn.hose.contentNeeded') : undefined}
      />
      <HoseSize
        onContent={(massG) => setContent(quantityOfTyped('mass', { value: String(massG), unit: 'g' }, locale))}
      />
      <Button kind="quiet" className="self-start" onClick={() => goOn(null)}>
        {t('weighIn.hose.none')}
      </Button>
    </StepPage>
  );
}

const PHASES: readonly Phase[] = ['liquid', 'vapour'];

/** From length and bore, by the density of the saturated refrigerant at the temperature of the day. */
function HoseSize({ onContent }: { onContent: (massG: number) => void }) {
  const t = useMessages();
  const format = useFormat();
  const { locale, length: lengthUnit, temperature } = usePreferences();
  const { unit } = useWeighInData();
  const [size, setSize] = useState(() => readHabits().hoseSize);
  const [temp, setTemp] = useState<QuantityDraft<'temperature'>>(() =>
    temperature === 'F' ? { text: '77', unit: '°F' } : { text: '25', unit: '°C' },
  );
  const [phase, setPhase] = useState<Phase>('liquid');
  const [open, setOpen] = useState(false);
  const table = useSaturation(unit.refrigerant, open);
  const length = size.length.text === '' ? { ...size.length, unit: lengthUnit } : size.length;
  const bore = size.bore.text === '' && lengthUnit === 'ft' ? { ...size.bore, unit: 'in' as const } : size.bore;
  const change = (part: Partial<typeof size>) => {
    const changed = { ...size, ...part };
    setSize(changed);
    keepHabits({ hoseSize: changed });
  };
  const lengthM = baseOf('length', length, { locale });
  const boreMm = baseOf('pipeDiameter', bore, { locale });
  const tempC = baseOf('temperature', temp, { locale });
  const given = table && table !== 'failed' && lengthM !== null && boreMm !== null && tempC !== null;
  const contentG = given ? hoseContentG(table, { phase, tempC, boreMm, lengthM }) : null;
  const rounded = contentG === null ? null : Number(contentG.toFixed(contentG < 10 ? 1 : 0));
  return (
    <Disclosure title={t('weighIn.hose.workOut')} open={open} onToggle={setOpen}>
      <QuantityInput
        kind="length"
        label={t('weighIn.hose.length')}
        draft={length}
        onChange={(value) => change({ length: value })}
        units={['m', 'ft']}
        max={50}
        example={lengthUnit === 'ft' ? '5 ft' : '1.5 m'}
      />
      <QuantityInput
        kind="pipeDiameter"
        label={t('weighIn.hose.bore')}
        draft={bore}
        onChange={(value) => change({ bore: value })}
        units={['mm', 'in']}
        min={1}
        max={50}
        example="4.8 mm"
      />
      <QuantityInput
        kind="temperature"
        label={t('weighIn.hose.temperature')}
        draft={temp}
        onChange={setTemp}
        units={['°C', '°F']}
      />
      <ChoiceField
        label={t('weighIn.hose.phase')}
        name="phase"
        value={phase}
        choices={PHASES.map((value) => ({ value, label: t(`weighIn.hose.phase.${value}`) }))}
        onChange={(value) => setPhase(value as Phase)}
      />
      <div aria-live="polite" className="pt-2">
        {rounded !== null && rounded > 0 ? (
          <Button onClick={() => onContent(rounded)}>
            {t('weighIn.hose.take', { mass: `${format.number(rounded, 1)}\u00a0g` })}
          </Button>
        ) : given ? (
          <Notice title={t('weighIn.hose.outside')} />
        ) : table === 'failed' ? (
          <Notice title={t('weighIn.hose.noTable', { refrigerant: unit.refrigerant })} />
        ) : null}
      </div>
    </Disclosure>
  );
}

function useSaturation(designation: string, wanted: boolean): SaturationTable | 'failed' | null {
  const [table, setTable] = useState<SaturationTable | 'failed' | null>(null);
  useEffect(() => {
    if (!wanted) return;
    let current = true;
    loadSaturation(designation).then(
      (loaded) => current && setTable(loaded ?? 'failed'),
      () => current && setTable('failed'),
    );
    return () => {
      current = false;
    };
  }, [designation, wanted]);
  return table;
}
