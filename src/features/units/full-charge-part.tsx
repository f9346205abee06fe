import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { unitQueries } from '../../api/units.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Figure } from '../../ui/figure.tsx';
import { Part } from './part.tsx';

/** How much a full unit holds, by which of the law's methods and since when; earlier ones under it. */
export function FullChargePart({ unit, mayWrite }: { unit: Unit; mayWrite: boolean }) {
  const t = useMessages();
  const format = useFormat();
  const history = useQuery(unitQueries.fullCharges(unit.id));
  const now = unit.fullCharge;
  const earlier = (history.data ?? []).filter((one) => one.id !== now?.id);
  return (
    <Part
      title={t('units.fullCharge.heading')}
      action={
        mayWrite ? (
          <Link to={`/units/${unit.id}/full-charge`} className="inline-flex min-h-12 items-end">
            {t(now ? 'units.fullCharge.again' : 'units.fullCharge.determine')}
          </Link>
        ) : null
      }
    >
      {now ? (
        <div className="py-3">
          <p className="type-figure text-[2rem]">
            <Figure pieces={format.massPieces(now.massG)} />
          </p>
          <p className="pt-1 text-ink-soft">
            {t(`units.method.${now.method}`)}, {format.longDateTime(now.validFrom)}
          </p>
          {now.reason ? <p className="text-[0.9375rem] text-ink-soft">{now.reason}</p> : null}
        </div>
      ) : (
        <p className="py-3">{t('units.fullCharge.notDetermined')}</p>
      )}
      {earlier.length > 0 ? (
        <ul className="border-t border-rule-faint">
          {earlier.map((one) => (
            <li
              key={one.id}
              className="flex justify-between gap-4 border-b border-rule-faint py-1.5 text-[0.9375rem] text-ink-soft"
            >
              <span>
                {format.longDateTime(one.validFrom)}, {t(`units.method.${one.method}`)}
              </span>
              <span>{format.mass(one.massG)}</span>
            </li>
          ))}
        </ul>
      ) : null}
    </Part>
  );
}
