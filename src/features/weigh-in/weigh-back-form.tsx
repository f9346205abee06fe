import { useCallback, useId, useState } from 'react';
import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { forgetDraft, useDraft } from '../../lib/draft.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { Button } from '../../ui/button.tsx';
import { ChoiceField, FieldError, SelectField } from '../../ui/field.tsx';
import { Page } from '../../ui/page.tsx';
import { chargingBeam } from './charging-beam.ts';
import { FullQuestion } from './full-question.tsx';
import { asksIfFull, closingGroup, intoUnitG, type OpenStart, partOf, type WeighBack } from './groups-to-post.ts';
import { readHabits } from './habits.ts';
import { dropMicrograms, faultOfEnd, stopOfOpen } from './leg-figures.ts';
import { NumberPad, ReadingWindow } from './number-pad.tsx';
import { ReasonField, SayMore } from './say-more.tsx';
import { emptyReading, onScale, type ReadingUnit } from './scale-reading.ts';
import { faultText } from './steps/charging-step.tsx';
import { useRecoveryCylinders } from './steps/hose-end-step.tsx';
import { HOSE_ENDS } from './steps/hose-plan-step.tsx';
import { usePosting } from './use-posting.ts';
import { WeighBackDone } from './weigh-back-done.tsx';
import { purposeOfSheet, useWeighInData } from './weigh-in-data.ts';
import type { HoseEnd } from './weigh-in-state.ts';

interface Draft extends Omit<WeighBack, 'endAt'> {
  endAt: string | null;
  posted: EntryGroupResponse | null;
}

/** What the open group says of its start. */
function openStartOf(group: GroupView): OpenStart | null {
  const [reading] = group.readings;
  if (!reading) return null;
  return {
    groupId: group.id,
    cylinderId: reading.cylinderId,
    kind: group.kind,
    chargeSheetId: group.chargeSheetId,
    startedAt: group.occurredAt,
    start: { text: reading.value, unit: reading.unit as ReadingUnit },
    hose: {
      full: reading.hoseFull,
      content: reading.hoseG === null || reading.hoseG === 0 ? null : { value: String(reading.hoseG), unit: 'g' },
    },
  };
}

/** End reading, what became of the hose, and the press that closes the weigh-in. */
export function WeighBackForm({ group }: { group: GroupView }) {
  const open = openStartOf(group);
  return open ? <Form group={group} open={open} /> : null;
}

function Form({ group, open }: { group: GroupView; open: OpenStart }) {
  const t = useMessages();
  const format = useFormat();
  const { locale } = usePreferences();
  const id = useId();
  const data = useWeighInData();
  const { unit, sheet, scales, scaleOf, cylinderOf } = data;
  const initial = useCallback(
    (): Draft => ({
      groupId: newId(),
      ids: { after: newId(), mass: newId(), hose: newId() },
      end: emptyReading(open.start.unit),
      endAt: null,
      toolId: readHabits().toolId,
      hoseEnd: open.hose.content === null ? null : (readHabits().hosePlan ?? null),
      hoseInto: null,
      answer: null,
      reason: '',
      note: '',
      posted: null,
    }),
    [open.start.unit, open.hose.content],
  );
  const draftKey = `weigh-back.${group.id}`;
  const [draft, change] = useDraft<Draft>(draftKey, initial);
  const [asked, setAsked] = useState(false);
  const posting = usePosting(unit.id);
  const targets = useRecoveryCylinders(unit.refrigerant, open.cylinderId);
  const say = (part: Partial<Draft>) => change((now) => ({ ...now, ...part }));
  const cylinder = cylinderOf(open.cylinderId);
  const scale = scaleOf(draft.toolId);
  const show = (massG: number) => onScale(massG, draft.end.unit, scale.resolutionG, locale);
  const part = partOf(open);
  const hasHose = open.hose.content !== null;
  const fault = faultOfEnd(part, draft.end, draft.hoseEnd ?? 'emptied', cylinder?.tareG ?? null);
  const body =
    fault === null
      ? closingGroup(
          open,
          { ...draft, endAt: draft.endAt ?? open.startedAt },
          {
            unitId: unit.id,
            refrigerant: unit.refrigerant,
            jobId: group.jobId,
          },
        )
      : null;
  const asks = body !== null && asksFull(body);
  const target = sheet ? (purposeOfSheet(sheet)?.target ?? null) : null;
  const stop = stopOfOpen(part, target, draft.hoseEnd ?? 'lost', scale);
  const droppedG = Number(dropMicrograms(part, draft.end) ?? 0n) / 1e6;
  const seen = fault === null ? droppedG : 0;
  const startG = group.readings[0]?.massG ?? 0;
  const labels = {
    start: t('weighIn.beam.start', { mass: show(startG) }),
    now: t('weighIn.beam.now', { mass: show(seen) }),
    stop:
      stop?.scaleG == null ? '' : t('weighIn.beam.stop', { mass: show(stop.scaleG), tolerance: show(stop.toleranceG) }),
  };
  const needs = needed();

  if (draft.posted) return <WeighBackDone answer={draft.posted} forget={() => forgetDraft(draftKey)} />;
  return (
    <Page
      field
      title={t('weighIn.weighBack.title', { unit: unit.tag })}
      status={cylinder ? t('weighIn.cylinder', { tag: cylinder.tag }) : unit.refrigerant}
      next={
        <Button kind="act" wide busy={posting.busy} onClick={() => void press()}>
          {body ? t('weighIn.review.post', { mass: format.massAbout(intoUnitG(body)) }) : t('weighIn.weighBack.act')}
        </Button>
      }
    >
      <div className="page-gutter flex w-full max-w-2xl flex-col gap-4 pt-4">
        <p className="text-ink-soft">
          {t('weighIn.weighBack.lead', {
            tag: cylinder?.tag ?? '',
            name: group.recordedByName,
            date: format.dateTime(group.occurredAt, group.timeZone),
          })}
        </p>
        <ReadingWindow
          label={t('weighIn.windowNow')}
          reading={draft.end}
          onChange={key}
          invalid={asked && fault !== null}
          describedBy={id}
        />
        <div id={id} aria-live="polite" className="-mt-2">
          {asked && fault !== null ? (
            <FieldError>
              {faultText(fault, { now: draft.end, start: open.start, mode: 'gross' }, cylinder?.tareG ?? null, show, t)}
            </FieldError>
          ) : null}
        </div>
        <Beam
          spec={chargingBeam({ startG, droppedG: seen, stop, labels, unit: draft.end.unit })}
          summary={`${[labels.start, labels.now, labels.stop].filter(Boolean).join(', ')}.`}
        />
        <NumberPad reading={draft.end} onChange={key} />
        <SelectField
          layout="row"
          label={t('weighIn.scale')}
          value={draft.toolId ?? ''}
          placeholder={t('weighIn.scale.none')}
          choices={(scales ?? []).map((tool) => ({ value: tool.id, label: tool.name }))}
          onChange={(event) => say({ toolId: event.target.value || null })}
        />
        {hasHose ? (
          <>
            <ChoiceField
              label={t('weighIn.hoseEnd.title', { hose: format.mass(Number(open.hose.content?.value ?? 0)) })}
              name="hoseEnd"
              value={draft.hoseEnd ?? ''}
              choices={HOSE_ENDS.map((value) => ({ value, label: t(`weighIn.hoseEnd.${value}`) }))}
              onChange={(value) => say({ hoseEnd: value as HoseEnd })}
            />
            {draft.hoseEnd === 'recovered' ? (
              <SelectField
                layout="row"
                label={t('weighIn.hoseEnd.into')}
                value={draft.hoseInto ?? ''}
                placeholder={t('weighIn.hoseEnd.choose')}
                choices={targets.map((one) => ({ value: one.id, label: one.tag }))}
                onChange={(event) => say({ hoseInto: event.target.value || null })}
              />
            ) : null}
          </>
        ) : null}
        {asks ? <FullQuestion answer={draft.answer} onAnswer={(answer) => say({ answer })} why={whyAsked()} /> : null}
        <SayMore note={draft.note} occurredAt={null} onChange={say} />
        {posting.fault?.needsReason || draft.reason !== '' ? (
          <ReasonField
            value={draft.reason}
            messages={posting.fault?.needsReason ? posting.fault.messages : []}
            onChange={(reason) => say({ reason })}
          />
        ) : null}
        <div aria-live="assertive">
          {asked && fault === null && needs ? <FieldError>{needs}</FieldError> : null}
          {posting.fault && !posting.fault.needsReason
            ? posting.fault.messages.map((message) => <FieldError key={message}>{message}</FieldError>)
            : null}
        </div>
      </div>
    </Page>
  );

  function key(end: Draft['end']) {
    setAsked(false);
    say({ end, endAt: deviceNow().toISOString() });
  }

  function asksFull(closing: NonNullable<typeof body>): boolean {
    return group.kind === 'adjust' || asksIfFull(unit, closing, { emptied: false, fullChargeG: null, scaleOf });
  }

  function whyAsked(): string {
    if (group.kind === 'adjust') return t('weighIn.full.why.adjust');
    if (!unit.book.known) return t('weighIn.full.why.notKnown');
    return unit.fullCharge
      ? t('weighIn.full.why.past', { mass: format.mass(unit.fullCharge.massG) })
      : t('weighIn.full.why.noFullCharge');
  }

  /** What is still to be said before it can be posted. */
  function needed(): string | null {
    if (hasHose && draft.hoseEnd === null) return t('weighIn.hoseEnd.needed');
    if (draft.hoseEnd === 'recovered' && draft.hoseInto === null) return t('weighIn.hoseEnd.intoNeeded');
    return asks && draft.answer === null ? t('weighIn.full.needed') : null;
  }

  async function press() {
    setAsked(true);
    if (!body || needs || posting.busy) return;
    const answers = await posting.send([asks ? body : { ...body, statements: [] }], null);
    const [answer] = answers ?? [];
    if (answer) say({ posted: answer });
  }
}
