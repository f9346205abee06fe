import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { usePreferences } from '../../../lib/preferences.ts';
import { Button } from '../../../ui/button.tsx';
import { FieldError } from '../../../ui/field.tsx';
import { EntriesToCome } from '../entry-lines.tsx';
import { openGroups } from '../groups-to-post.ts';
import { microgramsOf, onScale } from '../scale-reading.ts';
import { StepPage } from '../step-page.tsx';
import { usePosting } from '../use-posting.ts';
import type { StepProps } from '../use-weigh-in.ts';
import { fullChargeToSet, useWeighInData } from '../weigh-in-data.ts';

/** The start reading alone: the cylinder stays on the day until it is weighed back. */
export function LeaveOpenStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const format = useFormat();
  const { locale } = usePreferences();
  const data = useWeighInData();
  const { unit, sheet, cylinderOf, scaleOf } = data;
  const posting = usePosting(unit.id);
  const leg = weighIn.legs.at(-1);
  const groups = openGroups(weighIn, {
    unitId: unit.id,
    refrigerant: unit.refrigerant,
    jobId: sheet?.jobId ?? null,
  });
  if (!leg || groups.length === 0) return null;
  const startG = Number(microgramsOf(leg.start) ?? 0n) / 1e6;

  async function press() {
    if (posting.busy) return;
    const earliest = groups[0]?.occurredAt ?? '';
    const answers = await posting.send(
      groups,
      fullChargeToSet(data, weighIn, earliest, t('weighIn.fullCharge.reason')),
    );
    if (answers) dispatch({ type: 'posted', open: true, answers });
  }

  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t('weighIn.leaveOpen.title')}
      lead={t('weighIn.leaveOpen.lead', { tag: cylinderOf(leg.cylinderId)?.tag ?? '' })}
      next={
        <Button kind="act" wide busy={posting.busy} onClick={() => void press()}>
          {t('weighIn.leaveOpen.act')}
        </Button>
      }
    >
      <dl className="border-t border-rule">
        <div className="flex justify-between gap-4 border-b border-rule py-2">
          <dt className="text-ink-soft">{t('weighIn.leaveOpen.start')}</dt>
          <dd className="font-[650]">
            {onScale(startG, leg.start.unit, scaleOf(leg.toolId).resolutionG, locale)}
            {leg.startAt ? `, ${format.dateTime(leg.startAt)}` : ''}
          </dd>
        </div>
      </dl>
      {groups.length > 1 ? (
        <section>
          <h3 className="type-label text-ink-soft">{t('weighIn.leaveOpen.already')}</h3>
          <EntriesToCome groups={groups.slice(0, -1)} gaps={[]} />
        </section>
      ) : null}
      <Button className="self-start" onClick={() => dispatch({ type: 'keepGoing' })}>
        {t('weighIn.leaveOpen.keepGoing')}
      </Button>
      {posting.fault?.messages.map((message) => (
        <FieldError key={message}>{message}</FieldError>
      ))}
    </StepPage>
  );
}
