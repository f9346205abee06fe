import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { chargeSheetQueries } from '../../api/charge-sheets.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { basisWords } from './basis-words.ts';
import { Fact, Part } from './part.tsx';

/** What the installation manual says about charging this model, and where it says it. */
export function ChargeBasisPart({ unit, mayWrite }: { unit: Unit; mayWrite: boolean }) {
  const t = useMessages();
  const format = useFormat();
  const bases = useQuery(chargeSheetQueries.bases(unit.id));
  const [now] = bases.data ?? [];
  return (
    <Part
      title={t('units.basis')}
      action={
        mayWrite ? (
          <Link to={`/units/${unit.id}/charge-basis`} className="inline-flex min-h-12 items-end">
            {t(now ? 'units.basis.again' : 'units.basis.record')}
          </Link>
        ) : null
      }
    >
      {now ? (
        <dl>
          <Fact name={t('units.basis.manual')}>
            {now.manual.document}
            {now.manual.page ? `, ${t('units.basis.page', { page: now.manual.page })}` : ''}
          </Fact>
          {basisWords(now.basis, t, format).map(({ name, text }) => (
            <Fact key={name} name={name}>
              {text}
            </Fact>
          ))}
          <Fact name={t('units.since')}>{format.longDateTime(now.validFrom)}</Fact>
          {now.note ? <Fact name={t('units.note')}>{now.note}</Fact> : null}
        </dl>
      ) : bases.isSuccess ? (
        <p className="py-3">{t('units.basis.none')}</p>
      ) : null}
    </Part>
  );
}
