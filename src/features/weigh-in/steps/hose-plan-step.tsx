import { formatQuantity } from '../../../../shared/units/format-quantity.ts';
import { microgramsOfTyped } from '../../../../shared/units/mass.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Notice } from '../../../ui/notice.tsx';
import { ChoiceList, ChoiceRow } from '../choice-list.tsx';
import { keepHabits } from '../habits.ts';
import { deliveredBefore } from '../leg-figures.ts';
import { StepPage } from '../step-page.tsx';
import type { StepProps } from '../use-weigh-in.ts';
import type { HoseEnd, Leg } from '../weigh-in-state.ts';

export const HOSE_ENDS: readonly HoseEnd[] = ['emptied', 'recovered', 'lost'];

/** What becomes of the hose's content: asked before charging, because the stop depends on it. */
export function HosePlanStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const format = useFormat();
  const hose = useHoseText(weighIn.legs.at(-1));
  const leg = weighIn.legs.at(-1);
  const wanted =
    weighIn.target === null
      ? null
      : microgramsOfTyped(weighIn.target) - deliveredBefore(weighIn, weighIn.legs.length - 1);
  const holds = leg?.hose.content ? microgramsOfTyped(leg.hose.content) : 0n;
  const holdsMore = leg?.hose.full === true && wanted !== null && holds > wanted;
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.hosePlan.title', { hose })}
      lead={t('weighIn.hosePlan.lead')}
    >
      {holdsMore && wanted !== null ? (
        <Notice title={t('weighIn.hosePlan.holdsMore', { hose, mass: format.mass(Number(wanted) / 1e6) })} />
      ) : null}
      <ChoiceList label={t('weighIn.hosePlan.title', { hose })}>
        {HOSE_ENDS.filter((end) => end !== 'emptied' || !holdsMore).map((hosePlan) => (
          <ChoiceRow
            key={hosePlan}
            title={t(`weighIn.hoseEnd.${hosePlan}`)}
            detail={t(`weighIn.hosePlan.${hosePlan}.${leg?.hose.full ? 'full' : 'notFull'}`, { hose })}
            chosen={leg?.hosePlan === hosePlan}
            onChoose={() => {
              keepHabits({ hosePlan });
              dispatch({ type: 'hosePlan', hosePlan });
            }}
          />
        ))}
      </ChoiceList>
    </StepPage>
  );
}

/** `28 g`, in the unit that it was given in. */
export function useHoseText(leg: Leg | undefined): string {
  const { locale } = usePreferences();
  const content = leg?.hose.content;
  if (!content) return '';
  const massG = Number(microgramsOfTyped(content)) / 1e6;
  return formatQuantity('mass', massG, content.unit, { locale, decimals: massG < 10 || content.unit === 'oz' ? 1 : 0 });
}
