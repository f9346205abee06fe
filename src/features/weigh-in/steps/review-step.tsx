import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { EntryGroupRequest } from '../../../../shared/ledger/entry-group.schema.ts';
import { microgramsOfTyped } from '../../../../shared/units/mass.ts';
import { entryGroupQueries } from '../../../api/entry-groups.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Beam } from '../../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../../ui/beam/use-beam-unit.ts';
import { Button } from '../../../ui/button.tsx';
import { CheckField, FieldError } from '../../../ui/field.tsx';
import { Figure } from '../../../ui/figure.tsx';
import { bookBeam } from '../book-beam.ts';
import { EntriesToCome, type Gap } from '../entry-lines.tsx';
import { FullQuestion } from '../full-question.tsx';
import { asksIfFull, finishedGroups, intoUnitG } from '../groups-to-post.ts';
import { gapAtStartG, toleranceG } from '../leg-figures.ts';
import { ReasonField, SayMore } from '../say-more.tsx';
import { StepPage } from '../step-page.tsx';
import { usePosting } from '../use-posting.ts';
import type { StepProps } from '../use-weigh-in.ts';
import { fullChargeBySheet, fullChargeToSet, useWeighInData, type WeighInData } from '../weigh-in-data.ts';
import type { WeighIn } from '../weigh-in-state.ts';

/** Before it is posted: what the unit's book becomes, every entry in words, the one question, and the press that posts. */
export function ReviewStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const format = useFormat();
  const beamUnit = useBeamUnit();
  const data = useWeighInData();
  const { unit, sheet } = data;
  const posting = usePosting(unit.id);
  const [asked, setAsked] = useState(false);
  const groups = finishedGroups(weighIn, {
    unitId: unit.id,
    refrigerant: unit.refrigerant,
    jobId: sheet?.jobId ?? null,
  });
  const main = groups.at(-1);
  const bySheetG = fullChargeBySheet(data);
  const sets = bySheetG !== null && weighIn.setFullCharge;
  const emptied = groups.some((group) => group.kind === 'vacuum');
  const question = main ? questionFor(weighIn, main, data, { emptied, fullChargeG: sets ? bySheetG : null }) : null;
  const addedG = main ? intoUnitG(main) : 0;
  const beam = bookBeam(
    { unit, addedG, emptied, fullChargeG: sets ? bySheetG : (unit.fullCharge?.massG ?? null) },
    { t, format, unit: beamUnit },
  );
  const unanswered = question !== null && weighIn.answer === null;
  const preview = useQuery(entryGroupQueries.preview(main ?? null)).data;
  // A vacuum or a full charge that is not posted yet is not in the server's answer: of the unit it then knows less than we.
  const knowsUnit = !emptied && !sets;
  const added = preview?.entries.filter(
    (entry) => entry.addedByServer && (knowsUnit || (entry.from.place !== 'unit' && entry.to.place !== 'unit')),
  );
  const reasons = posting.fault?.needsReason
    ? posting.fault.messages
    : (preview?.reasons ?? []).map((one) => one.message);

  async function press() {
    setAsked(true);
    if (!main || unanswered || posting.busy) return;
    const sent = question === null ? groups.map(withoutStatement) : groups;
    const fullCharge = fullChargeToSet(data, weighIn, main.occurredAt, t('weighIn.fullCharge.reason'));
    const answers = await posting.send(sent, fullCharge);
    if (answers) dispatch({ type: 'posted', open: false, answers });
  }

  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      next={
        <Button kind="act" wide busy={posting.busy} onClick={() => void press()}>
          {t('weighIn.review.post', { mass: format.massAbout(addedG) })}
        </Button>
      }
    >
      <div>
        <p className="type-label text-ink-soft">
          {t('weighIn.review.into', { unit: unit.tag, refrigerant: unit.refrigerant })}
        </p>
        <p className="type-figure text-[clamp(2.5rem,14vw,4.25rem)] text-move">
          <Figure pieces={format.massAboutPieces(addedG)} />
        </p>
        <AgainstTarget
          weighIn={weighIn}
          addedG={addedG}
          toleranceOfG={toleranceG(data.scaleOf(weighIn.legs.at(-1)?.toolId ?? null), addedG)}
        />
      </div>
      <Beam spec={beam.spec} summary={beam.summary} />
      <EntriesToCome groups={groups} gaps={gapsOf(weighIn, data)} added={added} />
      {bySheetG !== null ? (
        <CheckField
          label={t('weighIn.fullCharge.set', { mass: format.mass(bySheetG) })}
          hint={
            unit.fullCharge
              ? t('weighIn.fullCharge.before', { mass: format.mass(unit.fullCharge.massG) })
              : t('weighIn.fullCharge.notDetermined')
          }
          checked={weighIn.setFullCharge}
          onChange={(event) => dispatch({ type: 'say', part: { setFullCharge: event.target.checked } })}
        />
      ) : null}
      {question !== null ? (
        <FullQuestion
          answer={weighIn.answer}
          onAnswer={(answer) => dispatch({ type: 'answer', answer })}
          why={question}
        />
      ) : null}
      <SayMore
        note={weighIn.note}
        occurredAt={weighIn.occurredAt ?? weighIn.legs.at(-1)?.endAt ?? null}
        onChange={(part) => dispatch({ type: 'say', part })}
      />
      {reasons.length > 0 || weighIn.reason !== '' ? (
        <ReasonField
          value={weighIn.reason}
          messages={reasons}
          onChange={(reason) => dispatch({ type: 'say', part: { reason } })}
        />
      ) : null}
      <div aria-live="assertive">
        {asked && unanswered ? <FieldError>{t('weighIn.full.needed')}</FieldError> : null}
        {posting.fault && !posting.fault.needsReason
          ? posting.fault.messages.map((message) => <FieldError key={message}>{message}</FieldError>)
          : null}
      </div>
    </StepPage>
  );

  /** Why it is asked how full the unit is; null where nothing is asked. */
  function questionFor(
    now: WeighIn,
    group: EntryGroupRequest,
    { scaleOf }: WeighInData,
    known: { emptied: boolean; fullChargeG: number | null },
  ): string | null {
    if (now.purpose === 'adjust') return t('weighIn.full.why.adjust');
    if (!asksIfFull(unit, group, { ...known, scaleOf })) return null;
    if (!unit.book.known && !known.emptied) return t('weighIn.full.why.notKnown');
    const fullG = known.fullChargeG ?? unit.fullCharge?.massG ?? null;
    return fullG === null
      ? t('weighIn.full.why.noFullCharge')
      : t('weighIn.full.why.past', { mass: format.mass(fullG) });
  }
}

/** An answer that is no longer asked for is not sent. */
const withoutStatement = (group: EntryGroupRequest): EntryGroupRequest =>
  group.kind === 'vacuum' ? group : { ...group, statements: [] };

/** Start readings that the book does not explain: the server posts the difference before the masses. */
function gapsOf(weighIn: WeighIn, { cylinderOf, scaleOf }: WeighInData): Gap[] {
  return weighIn.legs.flatMap((leg) => {
    const cylinder = cylinderOf(leg.cylinderId);
    const known = cylinder !== null && (cylinder.contentG > 0 || cylinder.lastWeighedAt !== null);
    const gapG = known ? gapAtStartG(leg, cylinder, scaleOf(leg.toolId)) : null;
    return gapG === null ? [] : [{ cylinderId: leg.cylinderId, gapG }];
  });
}

function AgainstTarget({ weighIn, addedG, toleranceOfG }: { weighIn: WeighIn; addedG: number; toleranceOfG: number }) {
  const t = useMessages();
  const format = useFormat();
  if (weighIn.target === null) return null;
  const targetG = Number(microgramsOfTyped(weighIn.target)) / 1e6;
  const over = Number((addedG - targetG).toFixed(3));
  const mass = format.massAbout(Math.abs(over));
  const target = format.mass(targetG);
  const key = Math.abs(over) <= toleranceOfG ? (over === 0 ? 'exact' : 'within') : over > 0 ? 'over' : 'short';
  return <p className="pt-1 font-[600]">{t(`weighIn.review.${key}`, { mass, target })}</p>;
}
