import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { unitQueries } from '../../api/units.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Part } from './part.tsx';
import { pipeText } from './pipe-sizes.ts';

/** The pipe as it was really installed; a change is a new dated line set, earlier ones stay. */
export function LineSetPart({ unit, mayWrite }: { unit: Unit; mayWrite: boolean }) {
  const t = useMessages();
  const format = useFormat();
  const preferences = usePreferences();
  const lineSets = useQuery(unitQueries.lineSets(unit.id));
  const [now, ...earlier] = lineSets.data ?? [];
  const totalOf = (branches: { lengthM: number }[]) => branches.reduce((sum, { lengthM }) => sum + lengthM, 0);
  return (
    <Part
      title={t('units.lineSet')}
      action={
        mayWrite ? (
          <Link to={`/units/${unit.id}/line-set`} className="inline-flex min-h-12 items-end">
            {t(now ? 'units.lineSet.again' : 'units.lineSet.record')}
          </Link>
        ) : null
      }
    >
      {now ? (
        <>
          <ul>
            {now.branches.map((branch) => (
              <li key={branch.name} className="border-b border-rule-faint py-2">
                <div className="flex items-baseline justify-between gap-4">
                  <span className="font-[600]">
                    {t('units.lineSet.branch', { name: branch.name })}
                    {branch.parent ? (
                      <span className="font-[400] text-ink-soft">
                        {' '}
                        {t('units.lineSet.off', { name: branch.parent })}
                      </span>
                    ) : null}
                  </span>
                  <strong className="font-[650]">{format.length(branch.lengthM)}</strong>
                </div>
                <p className="text-[0.9375rem] text-ink-soft">
                  {[
                    t('units.lineSet.liquid', { size: pipeText(branch.liquidOdMm, preferences) }),
                    ...(branch.gasOdMm
                      ? [t('units.lineSet.gas', { size: pipeText(branch.gasOdMm, preferences) })]
                      : []),
                    ...(branch.riseM ? [t('units.lineSet.rise', { length: format.length(branch.riseM) })] : []),
                    ...(branch.bends ? [t('units.lineSet.bends', { count: branch.bends })] : []),
                    ...(branch.reused
                      ? [t(branch.reuseChecked ? 'units.lineSet.reusedChecked' : 'units.lineSet.reused')]
                      : []),
                  ].join(', ')}
                </p>
              </li>
            ))}
          </ul>
          <p className="flex justify-between gap-4 py-2">
            <span className="type-label text-ink-soft">
              {t('units.lineSet.since', { date: format.longDateTime(now.validFrom) })}
            </span>
            {now.branches.length > 1 ? <strong>{format.length(totalOf(now.branches))}</strong> : null}
          </p>
          {now.note ? <p className="text-[0.9375rem] text-ink-soft">{now.note}</p> : null}
          {earlier.map((one) => (
            <p
              key={one.id}
              className="flex justify-between gap-4 border-t border-rule-faint py-1.5 text-[0.9375rem] text-ink-soft"
            >
              <span>{format.longDateTime(one.validFrom)}</span>
              <span>{format.length(totalOf(one.branches))}</span>
            </p>
          ))}
        </>
      ) : lineSets.isSuccess ? (
        <p className="py-3">{t('units.lineSet.none')}</p>
      ) : null}
    </Part>
  );
}
