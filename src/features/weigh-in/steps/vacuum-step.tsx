import { deviceNow } from '../../../lib/local-time.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Caution } from '../../../ui/caution.tsx';
import { ChoiceList, ChoiceRow } from '../choice-list.tsx';
import { StepPage } from '../step-page.tsx';
import type { StepProps } from '../use-weigh-in.ts';

export function VacuumStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  return (
    <StepPage weighIn={weighIn} dispatch={dispatch} title={t('weighIn.vacuum.title')} lead={t('weighIn.vacuum.lead')}>
      <ChoiceList label={t('weighIn.vacuum.title')}>
        {(['whole', 'lines'] as const).map((vacuum) => (
          <ChoiceRow
            key={vacuum}
            title={t(`weighIn.vacuum.${vacuum}`)}
            detail={t(`weighIn.vacuum.${vacuum}.detail`)}
            chosen={weighIn.vacuum === vacuum}
            onChoose={() => dispatch({ type: 'vacuum', vacuum, at: deviceNow().toISOString() })}
          />
        ))}
      </ChoiceList>
      <Caution signal="warning">{t('weighIn.caution.compressorUnderVacuum')}</Caution>
    </StepPage>
  );
}
