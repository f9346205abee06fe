import { useState } from 'react';
import type { TypedMass } from '../../../../shared/ledger/entry-group.schema.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { emptyQuantity, type QuantityDraft, quantityOfTyped, readQuantity } from '../../../ui/quantity-draft.ts';
import { QuantityInput } from '../../../ui/quantity-input.tsx';
import { StepPage } from '../step-page.tsx';
import { type StepProps, useStepDraft } from '../use-weigh-in.ts';

/** How much, where no sheet says it. Nothing typed: there is no stop, only what has gone in. */
export function TargetStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const { locale, mass } = usePreferences();
  const [draft, setDraft] = useStepDraft<QuantityDraft<'mass'>>(weighIn, 'target', () =>
    weighIn.target ? quantityOfTyped('mass', weighIn.target, locale) : emptyQuantity(mass === 'lbOz' ? 'oz' : mass),
  );
  const [asked, setAsked] = useState(false);
  const reading = readQuantity('mass', draft, { locale });
  const given = reading.is === 'read' && reading.base > 0 ? (reading.typed as TypedMass) : null;
  const goOn = () => {
    if (reading.is === 'empty') dispatch({ type: 'target', target: null });
    else if (given) dispatch({ type: 'target', target: given });
    else setAsked(true);
  };
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.target.title')}
      lead={t('weighIn.target.lead')}
      next={
        <Button kind="act" wide onClick={goOn}>
          {reading.is === 'empty' ? t('weighIn.target.none') : t('weighIn.goOn')}
        </Button>
      }
    >
      <QuantityInput
        kind="mass"
        layout="stack"
        big
        label={t('weighIn.target.mass')}
        draft={draft}
        onChange={setDraft}
        units={['g', 'kg', 'oz', 'lb']}
        max={1_000_000}
        example="250 g"
        error={asked && reading.is === 'read' && !given ? t('weighIn.target.zero') : undefined}
      />
    </StepPage>
  );
}
