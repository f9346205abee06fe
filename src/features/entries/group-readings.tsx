import { Link } from 'react-router-dom';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { basisOn, type ScaleReading, uncertaintyOf } from '../../../shared/ledger/book-basis.ts';
import { ASSUMED_SCALE, type Scale } from '../../../shared/ledger/scale.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Fact } from '../../ui/facts.tsx';

type Reading = GroupView['readings'][number];

/** The scale's own figures, as it showed them: `12,150 → 14,460 g, ± 4 g`, one line a cylinder. */
export function GroupReadings({ readings, main }: { readings: readonly Reading[]; main: EntryRow | undefined }) {
  const t = useMessages();
  const cylinders = [...new Set(readings.map(({ cylinderId }) => cylinderId))];
  return cylinders.map((cylinderId) => {
    const own = readings.filter((reading) => reading.cylinderId === cylinderId);
    const tag = own[0]?.cylinderTag ?? '';
    const isAnEnd = main?.from.id === cylinderId || main?.to.id === cylinderId;
    return (
      <Fact
        key={cylinderId}
        name={cylinders.length === 1 && isAnEnd ? t('log.group.scale') : t('log.group.scaleOf', { tag })}
      >
        <OfOneCylinder readings={own} />
        {isAnEnd ? null : (
          <>
            {' '}
            <Link to={`/cylinders/${cylinderId}`}>{t('log.placeNamed.cylinder', { label: tag })}</Link>
          </>
        )}
      </Fact>
    );
  });
}

function OfOneCylinder({ readings }: { readings: readonly Reading[] }) {
  const t = useMessages();
  const format = useFormat();
  const before = readings.find(({ moment }) => moment === 'before');
  const after = readings.find(({ moment }) => moment === 'after');
  const [any] = readings;
  if (!any) return null;
  const hose = readings.find(({ hoseFull, hoseG }) => hoseFull && hoseG !== null);
  const { resolutionG } = scaleOf(any);
  const uncertainty = before && after ? twoUOf(before, after) : null;
  return (
    <>
      <span className="block font-[600]">
        {before && after ? (
          <>
            {shownValue(format, before, before.unit !== after.unit)} {'\u2192'} {shownValue(format, after)}
          </>
        ) : (
          readings.map((reading) => (
            <span key={reading.id} className="block">
              {t(`log.group.reading.${reading.moment}`, { reading: shownValue(format, reading) })}
            </span>
          ))
        )}
      </span>
      <span className="type-label block text-[0.9375rem] text-ink-soft">
        {[
          uncertainty === null
            ? t('log.group.resolution', { mass: format.mass(resolutionG) })
            : t('log.group.uncertainty', { mass: `${format.number(uncertainty, uncertainty < 1 ? 2 : 1)}\u00a0g` }),
          any.toolName ?? t('log.group.noTool'),
          ...(readings.some(({ mode }) => mode === 'zeroed') ? [t('log.group.zeroed')] : []),
          ...(hose ? [t('log.group.hose', { mass: format.mass(hose.hoseG ?? 0) })] : []),
        ].join(', ')}
      </span>
    </>
  );
}

/**
 * Twice the uncertainty of the mass between two readings, by everything that is known of the very scale. Its zero cancels
 * on one and the same scale, and enters twice where two were read.
 */
function twoUOf(before: Reading, after: Reading): number {
  const of = (reading: Reading): ScaleReading => {
    const { id, toolId, massG } = reading;
    return { key: id, scaleKey: toolId ?? 'not named', scale: scaleOf(reading), grossG: massG };
  };
  return 2 * uncertaintyOf(basisOn(of(before)), of(after), 0).standardG;
}

const scaleOf = ({ resolutionG, repeatabilityG, spanErrorRelative, offsetG }: Reading): Scale =>
  resolutionG === null
    ? ASSUMED_SCALE
    : {
        resolutionG,
        repeatabilityG: repeatabilityG ?? 0,
        spanErrorRelative: spanErrorRelative ?? 0,
        offsetG: offsetG ?? 0,
      };

/** As the scale showed it: the value and unit that were typed, not a converted one. */
function shownValue(format: Formats, { value, unit }: Reading, withUnit = true): string {
  const figure = format.number(Number(value), 9);
  return withUnit ? `${figure}\u00a0${unit}` : figure;
}
