import { type ReactNode, useEffect, useRef } from 'react';
import { useMessages } from '../../lib/messages.ts';
import { Page } from '../../ui/page.tsx';
import { Steps } from '../../ui/steps.tsx';
import type { StepProps } from './use-weigh-in.ts';
import { useWeighInData } from './weigh-in-data.ts';
import { stepsOf } from './weigh-in-state.ts';

interface Props extends StepProps {
  /** The one question of this screen; absent where the screen is about a figure. */
  title?: string;
  lead?: ReactNode;
  next?: ReactNode;
  /** The keys: under the rest on a phone, beside it on a desk. */
  pad?: ReactNode;
  children: ReactNode;
}

/** One question a screen, with how far it has come, the way back, and the next action within reach of the thumb. */
export function StepPage({ weighIn, dispatch, title, lead, next, pad, children }: Props) {
  const t = useMessages();
  const { unit, sheet, cylinderOf } = useWeighInData();
  const cylinder = weighIn.adding ? null : cylinderOf(weighIn.legs.at(-1)?.cylinderId ?? null);
  const steps = stepsOf(weighIn, sheet !== null);
  const step = steps.indexOf(weighIn.step as (typeof steps)[number]) + 1;
  const heading = useFocusOnStep(weighIn.step, weighIn.legs.length);
  const canGoBack = step > 1 || weighIn.legs.length > 1 || step === 0;
  return (
    <Page
      field
      title={t('weighIn.title', { unit: unit.tag })}
      back={canGoBack ? { label: t('weighIn.back'), onPress: () => dispatch({ type: 'back' }) } : null}
      status={cylinder ? t('weighIn.cylinder', { tag: cylinder.tag }) : unit.refrigerant}
      next={next}
    >
      {step > 0 ? <Steps step={step} count={steps.length} label={t('weighIn.progress')} /> : null}
      <div
        className={`page-gutter w-full pt-2.5 ${pad ? 'grid max-w-6xl gap-x-14 gap-y-3.5 lg:grid-cols-[minmax(0,1fr)_24rem]' : 'max-w-2xl'}`}
      >
        <div className="flex min-w-0 flex-col gap-3.5">
          <div ref={heading} tabIndex={-1} className={title || lead ? 'outline-none' : 'sr-only'}>
            {title ? <h2 className="type-title text-[1.5rem] desk:text-[1.75rem]">{title}</h2> : null}
            {lead ? <div className="pt-1.5 text-ink-soft">{lead}</div> : null}
          </div>
          {children}
        </div>
        {pad ? <div className="flex flex-col gap-3.5">{pad}</div> : null}
      </div>
    </Page>
  );
}

/** A new question is read out and begins at its top; the first one leaves the focus where it is. */
function useFocusOnStep(step: string, legs: number) {
  const ref = useRef<HTMLDivElement>(null);
  const key = `${step} ${legs}`;
  useEffect(() => {
    if (lastShown !== null && lastShown !== key) {
      ref.current?.focus({ preventScroll: true });
      window.scrollTo({ top: 0 });
    }
    lastShown = key;
  }, [key]);
  return ref;
}

/** Each step draws its own page, so what was shown before it is remembered here. */
let lastShown: string | null = null;
