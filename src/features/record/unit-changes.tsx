import { useQuery } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { siteQueries } from '../../api/sites.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Notice } from '../../ui/notice.tsx';
import { type Answers, type FormContext, typedOf } from './answers.ts';
import { BalanceBeams } from './balance-beams.tsx';
import { gramsOf } from './typed-mass.ts';
import type { UnitChange } from './unit-change.ts';

interface Props {
  changes: readonly UnitChange[];
  answers: Answers;
  context: FormContext;
}

/** What the register will say of the unit from then on, before it is recorded, and the beam of what is in it. */
export function UnitChanges({ changes, answers, context }: Props) {
  const t = useMessages();
  const format = useFormat();
  const { unit } = context;
  if (!unit) return null;
  const at = changes[0]?.body.validFrom;
  return (
    <>
      <section aria-label={t('record.changes.register')}>
        <h3 className="type-label pb-1 text-ink-soft">
          {at ? t('record.changes.from', { at: format.longDateTime(at) }) : t('record.changes.register')}
        </h3>
        <dl className="border-t border-rule">
          {changes.map((change) => (
            <ChangeLine key={change.is} change={change} context={context} />
          ))}
        </dl>
      </section>
      {changes.map((change) =>
        change.is === 'site' ? (
          <OtherRules key="rules" siteId={change.body.siteId} jurisdiction={context.jurisdiction} />
        ) : null,
      )}
      <UnitBeam changes={changes} answers={answers} context={context} />
    </>
  );
}

function ChangeLine({ change, context }: { change: UnitChange; context: FormContext }) {
  const t = useMessages();
  const format = useFormat();
  const { unit } = context;
  if (!unit) return null;
  switch (change.is) {
    case 'site':
      return <SiteLine siteId={change.body.siteId} context={context} />;
    case 'refrigerant':
      return (
        <Line name={t('record.changes.refrigerant')} before={unit.refrigerant}>
          {change.body.refrigerant}
        </Line>
      );
    case 'fullCharge':
      return (
        <Line
          name={t('record.changes.fullCharge')}
          before={unit.fullCharge ? format.mass(unit.fullCharge.massG) : t('record.changes.none')}
        >
          {format.mass(gramsOf(change.body.mass))}
        </Line>
      );
  }
}

function SiteLine({ siteId, context }: { siteId: string; context: FormContext }) {
  const t = useMessages();
  const site = useQuery({ ...siteQueries.one(siteId), enabled: siteId !== '' }).data;
  const { unit } = context;
  if (!unit || !site) return null;
  return (
    <>
      <Line name={t('record.changes.site')} before={unit.siteName}>
        {site.name}
      </Line>
      {site.customerId === unit.customerId ? null : (
        <Line name={t('record.changes.customer')} before={unit.customerName}>
          {site.customerName}
        </Line>
      )}
    </>
  );
}

/** The law goes by the place where the machine stands. */
function OtherRules({ siteId, jurisdiction }: { siteId: string; jurisdiction: string | null }) {
  const t = useMessages();
  const site = useQuery({ ...siteQueries.one(siteId), enabled: siteId !== '' }).data;
  if (!site || jurisdiction === null || site.jurisdiction === jurisdiction) return null;
  return <Notice title={t('record.changes.otherRules', { jurisdiction: site.jurisdiction })} />;
}

function Line({ name, before, children }: { name: string; before: string; children: ReactNode }) {
  const t = useMessages();
  return (
    <div className="grid grid-cols-[minmax(0,1fr)_minmax(0,2fr)] items-baseline gap-x-4 border-b border-rule py-2">
      <dt className="type-label text-ink-soft">{name}</dt>
      <dd className="leading-snug">
        <s className="text-ink-soft">{before}</s> <span aria-hidden="true">{'\u2192'}</span>
        <span className="sr-only">{t('record.preview.to')}</span> <strong className="font-[650]">{children}</strong>
      </dd>
    </div>
  );
}

/** No mass moves: the same before and after, of the refrigerant and on the scale that hold from then on. */
function UnitBeam({ changes, answers, context }: Props) {
  const { unit } = context;
  if (!unit) return null;
  const comes = changes.find(({ is }) => is === 'refrigerant') ? answers.refrigerant : null;
  const full = comes === null ? null : typedOf(answers.mass, context);
  const held = unit.book.byRefrigerant.filter(({ massG }) => massG !== 0);
  const shown = comes === null ? held : [{ refrigerant: comes, massG: 0 }];
  const of = full && unit.fullCharge ? { ...unit.fullCharge, massG: gramsOf(full) } : unit.fullCharge;
  const place = { place: 'unit' as const, id: unit.id, as: null, label: unit.tag };
  return (
    <BalanceBeams
      balances={shown.map(({ refrigerant, massG }) => ({
        place,
        refrigerant,
        beforeG: massG,
        afterG: massG,
        known: unit.book.known,
      }))}
      context={{ ...context, unit: { ...unit, fullCharge: of } }}
    />
  );
}
