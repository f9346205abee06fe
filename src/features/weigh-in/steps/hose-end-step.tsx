import { useState } from 'react';
import { Link } from 'react-router-dom';
import { deviceNow, toDayInput } from '../../../lib/local-time.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { FieldError, SelectField } from '../../../ui/field.tsx';
import { ChoiceList, ChoiceRow } from '../choice-list.tsx';
import { mayTakeHose } from '../judge-cylinder-choice.ts';
import { faultOfEnd } from '../leg-figures.ts';
import { onScale } from '../scale-reading.ts';
import { StepPage } from '../step-page.tsx';
import { type StepProps, useStepDraft } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';
import type { HoseEnd } from '../weigh-in-state.ts';
import { faultText } from './charging-step.tsx';
import { HOSE_ENDS, useHoseText } from './hose-plan-step.tsx';

/** What did become of the hose's content; what was planned stands first. */
export function HoseEndStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const { locale } = usePreferences();
  const { unit, cylinderOf, scaleOf } = useWeighInData();
  const leg = weighIn.legs.at(-1);
  const hose = useHoseText(leg);
  const [recovers, setRecovers] = useStepDraft(weighIn, 'recovers', () => leg?.hoseEnd === 'recovered');
  const [into, setInto] = useStepDraft(weighIn, 'into', () => leg?.hoseInto ?? '');
  const [fault, setFault] = useState<string | null>(null);
  const targets = useRecoveryCylinders(unit.refrigerant, leg?.cylinderId ?? null);
  if (!leg) return null;
  const tareG = cylinderOf(leg.cylinderId)?.tareG ?? null;
  const show = (massG: number) => onScale(massG, leg.now.unit, scaleOf(leg.toolId).resolutionG, locale);
  const answer = (hoseEnd: HoseEnd, cylinderId: string | null) => {
    const found = faultOfEnd(leg, leg.now, hoseEnd, tareG);
    if (found === null) dispatch({ type: 'hoseEnd', hoseEnd, into: cylinderId });
    else setFault(faultText(found, leg, tareG, show, t));
  };
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.hoseEnd.title', { hose })}
      lead={t('weighIn.hoseEnd.lead')}
      next={
        recovers && targets.length > 0 ? (
          <Button
            kind="act"
            wide
            onClick={() => (into === '' ? setFault(t('weighIn.hoseEnd.intoNeeded')) : answer('recovered', into))}
          >
            {t('weighIn.goOn')}
          </Button>
        ) : undefined
      }
    >
      {fault ? <FieldError>{fault}</FieldError> : null}
      <ChoiceList label={t('weighIn.hoseEnd.title', { hose })}>
        {[...HOSE_ENDS]
          .sort((a, b) => Number(b === leg.hosePlan) - Number(a === leg.hosePlan))
          .map((hoseEnd) => (
            <ChoiceRow
              key={hoseEnd}
              title={t(`weighIn.hoseEnd.${hoseEnd}`)}
              detail={t(`weighIn.hoseEnd.${hoseEnd}.detail`, { hose })}
              chosen={recovers ? hoseEnd === 'recovered' : hoseEnd === (leg.hoseEnd ?? leg.hosePlan)}
              onChoose={() => {
                setFault(null);
                setRecovers(hoseEnd === 'recovered');
                if (hoseEnd !== 'recovered') answer(hoseEnd, null);
              }}
            />
          ))}
      </ChoiceList>
      {recovers ? (
        targets.length > 0 ? (
          <SelectField
            big
            label={t('weighIn.hoseEnd.into')}
            value={into}
            placeholder={t('weighIn.hoseEnd.choose')}
            choices={targets.map((cylinder) => ({ value: cylinder.id, label: cylinder.tag }))}
            onChange={(event) => {
              setFault(null);
              setInto(event.target.value);
            }}
          />
        ) : (
          <p>
            {t('weighIn.hoseEnd.noCylinder', { refrigerant: unit.refrigerant })}{' '}
            <Link to="/cylinders/new" className="inline-flex min-h-12 items-center">
              {t('weighIn.cylinder.pickUp')}
            </Link>
          </p>
        )
      ) : null}
    </StepPage>
  );
}

/** Recovery cylinders for this refrigerant that may take it, one's own first. */
export function useRecoveryCylinders(refrigerant: string, exceptId: string | null) {
  const { cylinders, myId } = useWeighInData();
  const today = toDayInput(deviceNow());
  return (cylinders ?? [])
    .filter((cylinder) => cylinder.id !== exceptId && mayTakeHose(cylinder, refrigerant, today))
    .sort((a, b) => Number(b.heldBy === myId) - Number(a.heldBy === myId));
}
