import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { chargeSheetQueries } from '../../api/charge-sheets.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Failed } from '../../ui/notice.tsx';
import { Part } from './part.tsx';

/** The sheets that were worked out for this unit, newest first. None is ever changed. */
export function ChargeSheetsPart({ unit, mayPost }: { unit: Unit; mayPost: boolean }) {
  const t = useMessages();
  const format = useFormat();
  const sheets = useQuery(chargeSheetQueries.ofUnit(unit.id));
  return (
    <Part title={t('units.sheets')}>
      {sheets.isError ? <Failed error={sheets.error} onRetry={() => void sheets.refetch()} /> : null}
      {sheets.data?.length === 0 ? <p className="py-3 text-ink-soft">{t('units.sheets.none')}</p> : null}
      <ul>
        {(sheets.data ?? []).map((sheet) => (
          <li key={sheet.id} className="flex items-center justify-between gap-4 border-b border-rule">
            <Link
              to={`/charge-sheets/${sheet.id}`}
              className="min-w-0 flex-1 py-2.5 leading-snug text-ink no-underline hover:bg-well"
            >
              <span className="underline decoration-edge decoration-1 underline-offset-[3px]">
                {t(`units.job.${sheet.request.job}`)}, {format.longDateTime(sheet.madeAt)}
              </span>
              <span className="block text-[0.9375rem] text-ink-soft">
                {t('units.sheets.line', {
                  extra: format.mass(sheet.result.extraG),
                  total: format.mass(sheet.result.totalG),
                  name: sheet.madeByName,
                })}
              </span>
            </Link>
            {mayPost && sheet.result.weighInG > 0 ? (
              <Link
                to={`/units/${unit.id}/weigh-in?sheet=${sheet.id}`}
                className="inline-flex min-h-12 shrink-0 items-center"
              >
                {t('units.sheets.weighIn', { mass: format.mass(sheet.result.weighInG) })}
              </Link>
            ) : null}
          </li>
        ))}
      </ul>
    </Part>
  );
}
