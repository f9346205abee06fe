import { type ReactNode, useDeferredValue, useEffect, useMemo, useRef, useState } from 'react';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { Disclosure } from '../../ui/disclosure.tsx';
import { Page } from '../../ui/page.tsx';
import { Answer } from './answer.tsx';
import type { ChargeDraft } from './charge-draft.ts';
import { type ChargeForm, ChargeFormContext, useChargeForm, useDraftActions, useOpen } from './charge-form.ts';
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
  // The total and the beam follow each keystroke; the lines of the working may come a moment later.
  const shown = useDeferredValue(useMemo(() => ({ draft, answer, room }), [draft, answer, room]));
  const wide = useMedia('(width >= 64rem)');
  const state: ChargeState = { answer, overRoom: room?.verdict === 'over' };
  return (
    <Page
      field
      title={title}
      {...(lead ? { lead } : {})}
      {...(actions ? { actions } : {})}
      status={
        outOfSight && totalG !== null ? (
          <strong className="text-[1.25rem] font-[720] text-ink [font-stretch:110%]">{format.massTotal(totalG)}</strong>
        ) : (
          status
        )
      }
      next={wide ? undefined : next?.(state)}
    >
      <ChargeFormContext value={form}>
        <div className="page-gutter grid w-full max-w-[90rem] gap-x-12 desk:pt-3 lg:grid-cols-[minmax(0,30rem)_minmax(0,1fr)]">
          <div className="contents lg:col-start-2 lg:row-start-1 lg:block">
            <div className="order-1 lg:sticky lg:top-14 lg:z-1 lg:bg-ground">
              <Answer ref={ref} draft={draft} answer={answer} room={room} onExample={onExample} />
              {wide && next ? <div className="max-w-md py-3">{next(state)}</div> : null}
            </div>
            <div className="order-3">
              {shown.answer.is === 'done' ? (
                <Working
                  draft={shown.draft}
                  request={shown.answer.request}
                  result={shown.answer.result}
                  room={shown.room}
                />
              ) : null}
            </div>
          </div>
          <form
            noValidate
            className="contents lg:col-start-1 lg:row-start-1 lg:block"
            onSubmit={(event) => event.preventDefault()}
          >
            <div className="order-2 pt-3 lg:pt-0">
              <MainFields />
              <div className="mt-3 border-t border-rule">
                <ScaleSection>{cylinders}</ScaleSection>
                <MoreFigures flat={wide} answer={answer} />
              </div>
            </div>
            {foot ? <div className="order-4 pt-5">{foot}</div> : null}
          </form>
        </div>
      </ChargeFormContext>
      {answer.is === 'done' ? null : <p className="sr-only">{t('chargeScreen.noFigure')}</p>}
    </Page>
  );
}

/** Places of fields that stand in the part of the form that a phone keeps closed. */
const BEHIND =
  /^\/(basis\/(limits|allowances|rounding)|previousLineSet|lineSet\/branches\/\d+\/(riseM|bends|equivalentMPerBend))/;

/** What fewer jobs need: side by side on a desk, behind one line on a phone. */
function MoreFigures({ flat, answer }: { flat: boolean; answer: ChargeAnswer }) {
  const t = useMessages();
  const { draft } = useChargeForm();
  const wrong =
    answer.is === 'refused'
      ? answer.refusals.some(({ path }) => BEHIND.test(path))
      : answer.is === 'incomplete' && [...answer.missing, ...answer.unreadable].some((pointer) => BEHIND.test(pointer));
  const [open, setOpen] = useOpen(wrong);
  // Forty fields that nobody has asked for need not be drawn at every keystroke.
  const asked = useRef(false);
  asked.current ||= open;
  const flammable = allRefrigerants.find((row) => row.designation === draft.refrigerant)?.lflKgM3 != null;
  const sections = () => (
    <>
      <JobSection />
      <RuleSection />
      <LimitsSection />
      <PipeDetailSection />
      {flammable ? <RoomSection /> : null}
      <Co2Section />
    </>
  );
  if (flat) return sections();
  return (
    <Disclosure
      title={t('chargeScreen.more')}
      summary={draft.job === 'newInstall' ? t('chargeScreen.more.summary') : t(`chargeScreen.job.${draft.job}`)}
      open={open}
      onToggle={setOpen}
    >
      {asked.current ? <div className="border-t border-rule pl-3">{sections()}</div> : null}
    </Disclosure>
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
