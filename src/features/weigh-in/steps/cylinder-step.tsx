import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import { microgramsOfTyped } from '../../../../shared/units/mass.ts';
import { type Formats, useFormat } from '../../../lib/format.ts';
import { deviceNow, toDayInput } from '../../../lib/local-time.ts';
import { type Translate, useMessages } from '../../../lib/messages.ts';
import { Beam } from '../../../ui/beam/beam.tsx';
import { cylinderBeam } from '../../../ui/beam/presets.ts';
import { useBeamUnit } from '../../../ui/beam/use-beam-unit.ts';
import { Caution } from '../../../ui/caution.tsx';
import { Empty, Failed, RowsSkeleton } from '../../../ui/notice.tsx';
import { ChoiceList, ChoiceRow } from '../choice-list.tsx';
import { readHabits } from '../habits.ts';
import { DANGEROUS, type JudgedCylinder, judgeCylinders } from '../judge-cylinder-choice.ts';
import { deliveredBefore } from '../leg-figures.ts';
import { StepPage } from '../step-page.tsx';
import { newLegIds, type StepProps } from '../use-weigh-in.ts';
import { useWeighInData } from '../weigh-in-data.ts';

/** Which cylinder: those on the van first, on their beams; what must not be used is named and cannot be chosen. */
export function CylinderStep({ weighIn, dispatch }: StepProps) {
  const t = useMessages();
  const format = useFormat();
  const { unit, cylinders, failed, myId, preferredCylinderId, jurisdiction } = useWeighInData();
  const used = useMemo(
    () => new Set((weighIn.adding ? weighIn.legs : weighIn.legs.slice(0, -1)).map((leg) => leg.cylinderId)),
    [weighIn],
  );
  const wantedG =
    weighIn.target === null
      ? null
      : Number(microgramsOfTyped(weighIn.target) - deliveredBefore(weighIn, used.size)) / 1e6;
  const judged = useMemo(
    () =>
      judgeCylinders(
        (cylinders ?? []).filter((cylinder) => !used.has(cylinder.id)),
        { refrigerant: unit.refrigerant, wantedG, myId, today: toDayInput(deviceNow()), jurisdiction },
      ),
    [cylinders, used, unit.refrigerant, wantedG, myId, jurisdiction],
  );
  const fitting = judged.filter((one) => one.stopper === null);
  // What was chosen on the charge screen stands first, marked; it is still a question.
  const first = (one: JudgedCylinder) => Number(one.cylinder.id === preferredCylinderId);
  const onVan = fitting.filter((one) => one.onVan).sort((a, b) => first(b) - first(a));
  const elsewhere = fitting.filter((one) => !one.onVan).sort((a, b) => first(b) - first(a));
  const stopped = judged.filter((one) => one.stopper !== null && (one.onVan || one.stopper !== 'otherRefrigerant'));
  const current = weighIn.adding ? null : (weighIn.legs.at(-1)?.cylinderId ?? preferredCylinderId);
  const choose = (one: JudgedCylinder) =>
    dispatch({ type: 'cylinder', cylinderId: one.cylinder.id, ids: newLegIds(), habits: readHabits() });
  const row = (one: JudgedCylinder) => (
    <CylinderRow key={one.cylinder.id} one={one} chosen={one.cylinder.id === current} onChoose={() => choose(one)} />
  );
  return (
    <StepPage
      weighIn={weighIn}
      dispatch={dispatch}
      title={t(weighIn.adding ? 'weighIn.cylinder.next' : 'weighIn.cylinder.title')}
      lead={
        wantedG === null
          ? t('weighIn.cylinder.lead', { refrigerant: unit.refrigerant })
          : t('weighIn.cylinder.leadMass', { refrigerant: unit.refrigerant, mass: format.massAbout(wantedG) })
      }
    >
      {failed ? <Failed error={failed.error} onRetry={failed.retry} /> : null}
      {cylinders === null && !failed ? <RowsSkeleton rows={4} rowClass="h-32" /> : null}
      {cylinders !== null && fitting.length === 0 ? (
        <Empty
          title={t('weighIn.cylinder.none', { refrigerant: unit.refrigerant })}
          action={
            <Link to="/cylinders/new" className="inline-flex min-h-12 items-center">
              {t('weighIn.cylinder.pickUp')}
            </Link>
          }
        >
          {t('weighIn.cylinder.none.text')}
        </Empty>
      ) : null}
      {onVan.length > 0 ? <ChoiceList label={t('weighIn.cylinder.onVan')}>{onVan.map(row)}</ChoiceList> : null}
      {elsewhere.length > 0 ? (
        <section>
          <h3 className="type-label pb-1 text-ink-soft">{t('weighIn.cylinder.elsewhere')}</h3>
          <ChoiceList label={t('weighIn.cylinder.elsewhere')}>{elsewhere.map(row)}</ChoiceList>
        </section>
      ) : null}
      {stopped.length > 0 ? (
        <section className="flex flex-col gap-2.5 pt-2">
          <h3 className="type-label text-ink-soft">{t('weighIn.cylinder.stopped')}</h3>
          {stopped.map((one) => (
            <StoppedCylinder key={one.cylinder.id} one={one} refrigerant={unit.refrigerant} />
          ))}
        </section>
      ) : null}
    </StepPage>
  );
}

function CylinderRow({ one, chosen, onChoose }: { one: JudgedCylinder; chosen: boolean; onChoose: () => void }) {
  const t = useMessages();
  const format = useFormat();
  const beamUnit = useBeamUnit();
  const { cylinder, doubts, onVan } = one;
  const { contentG, tareG, limitG } = cylinder;
  // A limit is worked out from a density: its decimals mean nothing on a scale.
  const said = (key: string, massG: number) => ({ massG, label: t(key, { mass: format.massAbout(massG) }) });
  const tare = said('weighIn.beam.tare', tareG);
  const contents = said('weighIn.beam.contents', contentG);
  const limit = limitG === null ? null : said('weighIn.beam.limit', tareG + limitG);
  const spec = cylinderBeam({ tare, contents, fillLimit: limit }, beamUnit);
  const words = [
    ...(onVan
      ? []
      : [
          cylinder.heldByName
            ? t('weighIn.cylinder.with', { name: cylinder.heldByName })
            : t('weighIn.cylinder.inStore'),
        ]),
    ...doubts.map((doubt) => doubtText(doubt, cylinder, t, format)),
  ];
  return (
    <ChoiceRow
      title={
        <>
          <span className="text-[1.25rem] font-[680]">{cylinder.tag}</span>{' '}
          <span className="type-label font-[400] text-ink-soft">{cylinder.refrigerant}</span>
        </>
      }
      aside={<strong className="text-ink">{format.massAbout(contentG)}</strong>}
      detail={words.length > 0 ? words.join(' ') : undefined}
      chosen={chosen}
      onChoose={onChoose}
    >
      <Beam spec={spec} summary={limit?.label ?? ''} className="w-full" inControl />
    </ChoiceRow>
  );
}

function doubtText(
  doubt: JudgedCylinder['doubts'][number],
  cylinder: JudgedCylinder['cylinder'],
  t: Translate,
  format: Formats,
) {
  return t(`weighIn.doubt.${doubt}`, {
    mass: format.massAbout(cylinder.contentG),
    month: cylinder.retestDue ? format.month(cylinder.retestDue.slice(0, 7)) : '',
  });
}

function StoppedCylinder({ one, refrigerant }: { one: JudgedCylinder; refrigerant: string }) {
  const t = useMessages();
  const { cylinder, stopper } = one;
  if (stopper === null) return null;
  const words = t(`weighIn.stopper.${stopper}`, {
    tag: cylinder.tag,
    holds: cylinder.mixed ? cylinder.byRefrigerant.map((part) => part.refrigerant).join(' + ') : cylinder.refrigerant,
    refrigerant,
  });
  if (DANGEROUS.has(stopper)) return <Caution signal="danger">{words}</Caution>;
  return (
    <p className="border-l-4 border-ink-soft pl-3 text-[0.9375rem] leading-snug">
      {words}{' '}
      {stopper === 'openWeighIn' && cylinder.openWeighInGroupId ? (
        <Link to={`/weigh-back/${cylinder.openWeighInGroupId}`}>{t('weighIn.stopper.weighBack')}</Link>
      ) : null}
    </p>
  );
}
