import { Link } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { Scale } from '../../../shared/ledger/scale.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Caution } from '../../ui/caution.tsx';
import { FieldError, TextField } from '../../ui/field.tsx';
import { Notice } from '../../ui/notice.tsx';
import { emptyQuantity, type QuantityReading } from '../../ui/quantity-draft.ts';
import { QuantityInput } from '../../ui/quantity-input.tsx';
import { figuresOf, type SheetRow, type SheetUnit } from './sheet-state.ts';

/** One cylinder of the sheet: its number, its book, the blank for the reading, and what the two make of each other. */
export function SheetLine({
  cylinder,
  row,
  reading,
  unit,
  scale,
  onChange,
}: {
  cylinder: Cylinder;
  row: SheetRow | undefined;
  reading: QuantityReading<'mass'>;
  unit: SheetUnit;
  scale: Scale;
  onChange: (change: Partial<SheetRow>) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const { tag, refrigerant } = cylinder;
  const recorded = row?.result?.is === 'recorded';
  return (
    <li className="grid gap-x-8 gap-y-1 border-b border-rule py-3 desk:grid-cols-[11rem_minmax(0,1fr)] desk:items-start lg:grid-cols-[11rem_minmax(0,1fr)_minmax(0,1.2fr)]">
      <div className="flex items-baseline justify-between gap-4 desk:block">
        <Link
          to={`/cylinders/${cylinder.id}`}
          className="inline-flex min-h-12 items-center text-[1.25rem] font-[680] text-ink"
        >
          {tag}
        </Link>
        <span className="type-label text-ink-soft desk:block">
          {refrigerant}, {t('stockTake.book')} {format.mass(cylinder.contentG)}
        </span>
      </div>
      {cylinder.openWeighInGroupId ? (
        <Notice title={t('stockTake.open')}>
          <Link to={`/weigh-back/${cylinder.openWeighInGroupId}`} className="inline-flex min-h-12 items-center">
            {t('stockTake.weighBack')}
          </Link>
        </Notice>
      ) : (
        <>
          <QuantityInput
            kind="mass"
            label={t('stockTake.readingOf', { tag })}
            hint={t('stockTake.bookGross', { gross: format.mass(cylinder.tareG + cylinder.contentG) })}
            units={[unit]}
            draft={row?.gross ?? emptyQuantity<'mass'>(unit)}
            disabled={recorded || row?.result?.is === 'unknown'}
            onChange={(gross) => onChange({ gross })}
          />
          <div className="min-h-6 desk:col-start-2 lg:col-start-3 lg:pt-2" aria-live="polite">
            {recorded ? (
              <Recorded result={row.result} />
            ) : reading.is === 'read' ? (
              <Against cylinder={cylinder} grossG={reading.base} scale={scale} />
            ) : null}
            {row?.result?.is === 'unknown' ? <FieldError>{t('stockTake.unknown')}</FieldError> : null}
            {row?.result?.is === 'refused' ? (
              <FieldError>{t('stockTake.notRecorded', { why: row.result.why })}</FieldError>
            ) : null}
            {row && !recorded && (row.reason !== '' || (row.result?.is === 'refused' && row.result.needsReason)) ? (
              <TextField
                label={t('stockTake.reason')}
                value={row.reason}
                maxLength={1000}
                onChange={(event) => onChange({ reason: event.target.value, result: row.result })}
              />
            ) : null}
          </div>
        </>
      )}
    </li>
  );
}

/** While it is typed: content, difference, what the scale can tell, and the word for it. */
function Against({ cylinder, grossG, scale }: { cylinder: Cylinder; grossG: number; scale: Scale }) {
  const t = useMessages();
  const format = useFormat();
  const { contentG, differenceG, doubleUncertaintyG, verdict, belowTareG, overLimit } = figuresOf(
    cylinder,
    grossG,
    scale,
  );
  if (belowTareG !== null) {
    return (
      <FieldError>
        {t('stockTake.belowTare', { mass: format.mass(belowTareG), tare: format.mass(cylinder.tareG) })}
      </FieldError>
    );
  }
  return (
    <>
      <p className="leading-snug">
        {t('stockTake.holds', { mass: format.mass(contentG) })}
        {', '}
        {differenceG === null
          ? t('stockTake.first')
          : differenceG === 0
            ? t('stockTake.same')
            : t(differenceG < 0 ? 'stockTake.less' : 'stockTake.more', { mass: format.mass(Math.abs(differenceG)) })}
        {'. '}
        {verdict === null ? null : <strong className="font-[650]">{t(`stockTake.${verdict}`)}</strong>}
        <span className="type-label block text-[0.9375rem] text-ink-soft">
          {t('stockTake.uncertainty', { mass: format.mass(doubleUncertaintyG) })}
        </span>
      </p>
      {overLimit && cylinder.limitG !== null ? (
        <Caution signal="danger">
          {t('stockTake.overLimit', { given: format.mass(contentG), allowed: format.mass(cylinder.limitG) })}
        </Caution>
      ) : null}
    </>
  );
}

function Recorded({ result }: { result: SheetRow['result'] }) {
  const t = useMessages();
  const format = useFormat();
  if (result?.is !== 'recorded') return null;
  return (
    <p className="leading-snug">
      {t('stockTake.holds', { mass: format.mass(result.contentG) })}
      {'. '}
      {result.movedG === 0
        ? t('stockTake.recordedNothing')
        : t('stockTake.recordedMoved', { mass: format.mass(Math.abs(result.movedG)) })}{' '}
      {result.verdict === null ? null : <strong className="font-[650]">{t(`stockTake.${result.verdict}`)}</strong>}
    </p>
  );
}
