import { useEffect, useRef } from 'react';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { Posted } from './posted.tsx';
import { useWeighInData } from './weigh-in-data.ts';

export function WeighBackDone({ answer, forget }: { answer: EntryGroupResponse; forget: () => void }) {
  const t = useMessages();
  const { unit } = useWeighInData();
  useForgetWhenLeft(forget);
  return (
    <Page
      field
      title={t('weighIn.weighBack.title', { unit: unit.tag })}
      status={unit.refrigerant}
      next={
        <ButtonLink kind="act" wide to="/">
          {t('weighIn.done.toToday')}
        </ButtonLink>
      }
    >
      <Posted answers={[answer]} />
    </Page>
  );
}

/** Once it is posted and the page is left, the next one starts anew. */
export function useForgetWhenLeft(forget: () => void) {
  const latest = useRef(forget);
  latest.current = forget;
  useEffect(() => {
    const leave = latest;
    return () => leave.current();
  }, []);
}
