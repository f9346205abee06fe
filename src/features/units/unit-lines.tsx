import { Link } from 'react-router-dom';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { RowsSkeleton } from '../../ui/notice.tsx';
import type { UnitListProps } from './unit-table.tsx';

/** On a phone: one unit a line, large enough for a gloved thumb. */
export function UnitLines({ units, loading, to, more }: UnitListProps) {
  const t = useMessages();
  const format = useFormat();
  if (loading) return <RowsSkeleton rows={8} rowClass="h-[4.75rem]" />;
  return (
    <>
      <ul>
        {units.map((unit) => (
          <li key={unit.id} className="relative border-b border-rule py-2.5">
            <div className="flex items-baseline justify-between gap-3">
              <Link
                to={to(unit)}
                className="min-w-0 truncate text-[1.125rem] text-ink no-underline after:absolute after:inset-0"
              >
                <strong className="font-[680]">{unit.tag}</strong> {unit.name}
              </Link>
              <strong className="shrink-0 text-[1.125rem] font-[650]">
                {unit.fullCharge ? (
                  format.mass(unit.fullCharge.massG)
                ) : (
                  <span className="type-label font-[400] text-ink-soft">{t('units.notDetermined')}</span>
                )}
              </strong>
            </div>
            <p className="type-label flex justify-between gap-3 text-ink-soft">
              <span className="truncate">{unit.siteName}</span>
              <span className="shrink-0">{unit.refrigerant}</span>
            </p>
          </li>
        ))}
      </ul>
      {more.has ? (
        <div className="py-4">
          <Button busy={more.loading} onClick={more.load}>
            {t(more.loading ? 'ui.table.loadingMore' : 'ui.table.more')}
          </Button>
        </div>
      ) : null}
    </>
  );
}
