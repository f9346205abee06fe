import { type ReactNode, useEffect, useMemo, useRef, useState } from 'react';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Page } from '../../ui/page.tsx';
import { Answer } from './answer.tsx';
import type { ChargeDraft } from './charge-draft.ts';
import { type ChargeForm, ChargeFormContext, useDraftActions } from './charge-form.ts';
import { MainFields } from './main-fields.tsx';
import { Co2Section, JobSection, LimitsSection, PipeDetailSection, ScaleSection } from './more-sections.tsx';
import { allRefrigerants } from './reference-tables.ts';
import { RoomSection } from './room-section.tsx';
import { RuleSection } from './rule-section.tsx';
import { type ChargeAnswer, useCharge } from './use-charge.ts';
import { useRoom } from './use-room.ts';
import { Working } from './working.tsx';

export interface ChargeState {
  answer: ChargeAnswer;
  /** More than the smallest room served takes: this stops the charge step and cannot be overridden. */
  overRoom: boolean;
}

interface Props {
  title: string;
  lead?: ReactNode;
  status?: ReactNode;
  actions?: ReactNode;
  draft: ChargeDraft;
  change: (next: (now: ChargeDraft) => ChargeDraft) => void;
  /** Fills the form with a worked example; offered while it is incomplete. */
  onExample?: () => void;
  /** The wide button, from what the answer is. */
  next?: (state: ChargeState) => ReactNode;
  /** The choice of a cylinder, where there are any. */
  cylinders?: ReactNode;
  /** Said at the foot of the form. */
  foot?: ReactNode;
}

/** The charge screen: the answer on top while typing, the figures that it rests on under it. */
export function ChargePage({ title, lead, status, actions, draft, change, onExample, next, cylinders, foot }: Props) {
  const t = useMessages();
  const format = useFormat();
  const { answer, errorAt } = useCharge(draft);
  const totalG = answer.is === 'done' ? answer.result.totalG : null;
  const room = useRoom(draft, totalG);
  const draftActions = useDraftActions(change);
  const form = useMemo<ChargeForm>(() => ({ draft, errorAt, ...draftActions }), [draft, errorAt, draftActions]);
  const { ref, outOfSight } = useOutOfSight();
  const flammable = allRefrigerants.find((row) => row.designation === draft.refrigerant)?.lflKgM3 != null;
  const state: ChargeState = { answer, overRoom: room?.verdict === 'over' };
  return (
    <Page
      field
      title={title}
      {...(lead ? { lead } : {})}
      {...(actions ? { actions } : {})}
      status={
        outOfSight && totalG !== null ? (
          <strong className="text-[1.25rem] font-[720] text-ink [font-stretch:110%]">{format.mass(totalG)}</strong>
        ) : (
          status
        )
      }
      next={next?.(state)}
    >
      <ChargeFormContext value={form}>
        <div className="page-gutter grid w-full max-w-[90rem] gap-x-12 lg:grid-cols-[minmax(0,30rem)_minmax(0,1fr)] desk:pt-3">
          <div className="contents lg:col-start-2 lg:row-start-1 lg:block">
            <div className="order-1 lg:sticky lg:top-14 lg:z-1 lg:bg-ground">
              <Answer ref={ref} draft={draft} answer={answer} room={room} onExample={onExample} />
            </div>
            <div className="order-3">
              {answer.is === 'done' ? (
                <Working draft={draft} request={answer.request} result={answer.result} room={room} />
              ) : null}
            </div>
          </div>
          <form
            noValidate
            className="order-2 pt-3 lg:col-start-1 lg:row-start-1 lg:pt-0"
            onSubmit={(event) => event.preventDefault()}
          >
            <MainFields />
            <div className="mt-4 border-t border-rule">
              <JobSection />
              <RuleSection />
              <LimitsSection />
              <PipeDetailSection />
              {flammable ? <RoomSection /> : null}
              <ScaleSection>{cylinders}</ScaleSection>
              <Co2Section />
            </div>
            {foot ? <div className="pt-4">{foot}</div> : null}
          </form>
        </div>
      </ChargeFormContext>
      {answer.is === 'done' ? null : <p className="sr-only">{t('chargeScreen.noFigure')}</p>}
    </Page>
  );
}

/** Whether the answer has been scrolled away; the head of the page shows the total then. */
function useOutOfSight() {
  const ref = useRef<HTMLDivElement>(null);
  const [outOfSight, set] = useState(false);
  useEffect(() => {
    const element = ref.current;
    if (!element || typeof IntersectionObserver === 'undefined') return;
    const observer = new IntersectionObserver(([entry]) => set(entry ? !entry.isIntersecting : false), {
      rootMargin: '-90px 0px 0px 0px',
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return { ref, outOfSight };
}
