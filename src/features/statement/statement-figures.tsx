import { type ReactNode, useMemo } from 'react';
import type { CylinderStatement } from '../../../shared/statements/cylinder-statement.schema.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { Beam } from '../../ui/beam/beam.tsx';
import { useBeamUnit } from '../../ui/beam/use-beam-unit.ts';
import { Fact, Facts } from '../../ui/facts.tsx';
import { differenceBeam } from './difference-beam.ts';
import { Verdict } from './verdict.tsx';

/** Opening, what came in and went out, closing; and what the scale says of it, with what it can vouch for. */
export function StatementFigures({ statement }: { statement: CylinderStatement }) {
  return (
    <div className="grid gap-x-12 gap-y-6 lg:grid-cols-[minmax(0,5fr)_minmax(0,7fr)] print:grid-cols-[minmax(0,5fr)_minmax(0,7fr)] print:gap-x-8">
      <Account statement={statement} />
      <AgainstScale statement={statement} />
    </div>
  );
}

function Account({ statement }: { statement: CylinderStatement }) {
  const t = useMessages();
  const format = useFormat();
  const { openingG, cameInG, wentOutG, openedG, differencesG, closingG } = statement;
  return (
    <section aria-label={t('statement.account')}>
      <dl className="border-t border-rule">
        <Sum name={t('statement.opening', { day: format.day(statement.from) })}>{format.mass(openingG)}</Sum>
        {openedG === 0 ? null : <Sum name={t('statement.opened')}>{signed(format, openedG)}</Sum>}
        <Sum name={t('statement.cameIn')}>{signed(format, cameInG)}</Sum>
        <Sum name={t('statement.wentOut')}>{signed(format, -wentOutG)}</Sum>
        {differencesG === 0 ? null : <Sum name={t('statement.differences')}>{signed(format, differencesG)}</Sum>}
        <Sum name={t('statement.closing', { day: format.day(statement.to) })} total>
          {format.mass(closingG)}
        </Sum>
      </dl>
    </section>
  );
}

function Sum({ name, total = false, children }: { name: string; total?: boolean; children: ReactNode }) {
  return (
    <div
      className={`flex items-baseline justify-between gap-4 py-2 ${total ? 'border-t-2 border-b-2 border-ink' : 'border-b border-rule-faint'}`}
    >
      <dt className={total ? 'font-[640]' : 'text-ink-soft'}>{name}</dt>
      <dd className={`text-right whitespace-nowrap ${total ? 'type-figure text-[1.625rem]' : 'font-[600]'}`}>
        {children}
      </dd>
    </div>
  );
}

/** With its sign, also above zero; without one where no figure of it is left to show. */
export function signed(format: Formats, massG: number): string {
  const text = format.mass(massG);
  if (text === format.mass(-massG)) return format.mass(0);
  return massG > 0 ? `+${text}` : text;
}

function AgainstScale({ statement }: { statement: CylinderStatement }) {
  const t = useMessages();
  const format = useFormat();
  const unit = useBeamUnit();
  const spec = useMemo(() => differenceBeam(statement, { t, format }, unit), [statement, t, format, unit]);
  const { lastReading, difference, timeZone } = statement;
  if (!lastReading) {
    return (
      <section aria-label={t('statement.againstScale')} className="border-t border-rule pt-2">
        <p className="type-title text-[1.25rem]">{t('statement.notWeighed')}</p>
        <p className="pt-1 text-ink-soft">
          {statement.weighedBefore
            ? t('statement.lastWeighed', { when: format.longDateTime(statement.weighedBefore, timeZone) })
            : t('statement.neverWeighed')}
        </p>
      </section>
    );
  }
  if (!difference) {
    return (
      <section aria-label={t('statement.againstScale')} className="border-t border-rule pt-2">
        <p className="type-title text-[1.25rem]">{t('statement.opensBook')}</p>
        <p className="pt-1 text-ink-soft">
          {t('statement.opensBook.text', {
            when: format.longDateTime(lastReading.at, timeZone),
            mass: format.mass(lastReading.contentG),
          })}
        </p>
      </section>
    );
  }
  return (
    <section aria-label={t('statement.againstScale')} className="border-t border-rule pt-2">
      <p className="type-label text-ink-soft">
        {t('statement.lastReading', { when: format.longDateTime(lastReading.at, timeZone) })}
      </p>
      <p className="flex flex-wrap items-baseline gap-x-4 gap-y-1">
        <span className="type-figure text-[2.375rem]">{signed(format, difference.differenceG)}</span>
        <Verdict verdict={difference.verdict} className="text-[1.1875rem]" />
      </p>
      {spec ? <Beam className="mt-2" spec={spec} summary={summaryOf(statement, t, format)} /> : null}
      <Basis statement={statement} />
    </section>
  );
}

function summaryOf({ lastReading, difference }: CylinderStatement, t: Translate, format: Formats): string {
  return t('statement.beam', {
    book: format.mass(lastReading?.expectedG ?? 0),
    scale: format.mass(lastReading?.contentG ?? 0),
    difference: format.mass(difference?.differenceG ?? 0),
    twoU: format.massAbout(difference?.twoUG ?? 0),
  });
}

/** From which figures of which scale the uncertainty comes, so that it can be worked out again with a pencil. */
function Basis({ statement: { lastReading, difference, timeZone } }: { statement: CylinderStatement }) {
  const t = useMessages();
  const format = useFormat();
  if (!lastReading || !difference) return null;
  const { scale } = lastReading;
  const figures = [
    t('statement.scale.resolution', { mass: format.mass(scale.resolutionG) }),
    ...(scale.repeatabilityG > 0
      ? [t('statement.scale.repeatability', { mass: format.mass(scale.repeatabilityG) })]
      : []),
    ...(scale.spanErrorRelative > 0
      ? [t('statement.scale.span', { percent: format.number(scale.spanErrorRelative * 100, 3) })]
      : []),
    ...(scale.offsetG > 0 ? [t('statement.scale.offset', { mass: format.mass(scale.offsetG) })] : []),
  ];
  return (
    <Facts className="mt-3">
      <Fact name={t('statement.twoU')}>
        <span className="font-[600]">{format.massAbout(difference.twoUG)}</span>{' '}
        <span className="text-ink-soft">
          {[
            t('statement.readings', { count: difference.independentReadings }),
            ...(difference.sharedReadings > 0 ? [t('statement.shared', { count: difference.sharedReadings })] : []),
            ...(difference.notWeighed > 0 ? [t('statement.unweighed', { count: difference.notWeighed })] : []),
          ].join('; ')}
        </span>
      </Fact>
      <Fact name={t('statement.scale')}>
        {[scale.assumed ? t('statement.scale.assumed') : (lastReading.toolName ?? ''), ...figures]
          .filter(Boolean)
          .join(', ')}
      </Fact>
      <Fact name={t('statement.restsOn')}>
        {difference.restsOnAt
          ? t('statement.restsOn.reading', { when: format.longDateTime(difference.restsOnAt, timeZone) })
          : t('statement.restsOn.paper')}
      </Fact>
      <Fact name={t('statement.gross')}>
        {t('statement.gross.is', {
          gross: format.mass(lastReading.grossG),
          tare: format.mass(lastReading.tareG),
          content: format.mass(lastReading.contentG),
        })}
      </Fact>
    </Facts>
  );
}
