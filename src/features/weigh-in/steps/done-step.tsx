import { useMessages } from '../../../lib/messages.ts';
import { ButtonLink } from '../../../ui/button.tsx';
import { Page } from '../../../ui/page.tsx';
import { Posted } from '../posted.tsx';
import { useForgetWhenLeft } from '../weigh-back-done.tsx';
import { useWeighInData } from '../weigh-in-data.ts';
import type { WeighIn } from '../weigh-in-state.ts';

/** Posted, or left open; either way with what comes next. */
export function DoneStep({ weighIn, forget }: { weighIn: WeighIn; forget: () => void }) {
  const t = useMessages();
  const { unit } = useWeighInData();
  const open = weighIn.step === 'leftOpen';
  useForgetWhenLeft(forget);
  return (
    <Page
      field
      title={t('weighIn.title', { unit: unit.tag })}
      status={unit.refrigerant}
      next={
        <ButtonLink kind="act" wide to={open ? '/' : `/units/${unit.id}`}>
          {open ? t('weighIn.done.toToday') : t('weighIn.done.toUnit', { unit: unit.tag })}
        </ButtonLink>
      }
    >
      <Posted
        answers={weighIn.posted}
        {...(open ? { title: t('weighIn.done.open'), text: t('weighIn.done.open.text') } : {})}
      />
    </Page>
  );
}
