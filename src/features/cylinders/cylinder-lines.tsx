import { Link } from 'react-router-dom';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { RowsSkeleton } from '../../ui/notice.tsx';
import { CylinderMarks } from './cylinder-marks.tsx';
import type { CylinderListProps } from './cylinder-table.tsx';
import { SmallBeam } from './small-beam.tsx';

/** On a phone: each cylinder on its own beam, as wide as the screen. */
export function CylinderLines({ cylinders, loading, more }: CylinderListProps) {
  const t = useMessages();
  const format = useFormat();
  if (loading) return <RowsSkeleton rows={5} rowClass="h-[8.5rem]" />;
  return (
    <>
      <ul>
        {cylinders.map((cylinder) => (
          <li key={cylinder.id} className="relative border-b border-rule py-3">
            <div className="flex items-baseline justify-between gap-3">
              <Link
                to={`/cylinders/${cylinder.id}`}
                className="text-[1.25rem] font-[680] text-ink no-underline after:absolute after:inset-0"
              >
                {cylinder.tag}
              </Link>
              <strong className="text-[1.25rem] font-[680]">{format.massAbout(cylinder.contentG)}</strong>
            </div>
            <p className="type-label flex justify-between gap-3 text-ink-soft">
              <span>
                {cylinder.refrigerant}, {t(`cylinders.kind.${cylinder.kind}`)}
              </span>
              <span className="truncate">{cylinder.heldByName ?? t('cylinders.nobody')}</span>
            </p>
            <SmallBeam cylinder={cylinder} className="pt-1" />
            <CylinderMarks cylinder={cylinder} />
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
