import { useInfiniteQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Today } from '../../../shared/today/today.schema.ts';
import { rowsOf } from '../../api/page.ts';
import { unitQueries } from '../../api/units.ts';
import { useMessages } from '../../lib/messages.ts';

const STEPS = [
  { key: 'site', to: '/sites/new' },
  { key: 'unit', to: '/units/new' },
  { key: 'scale', to: '/tools' },
  { key: 'cylinder', to: '/cylinders/new' },
  { key: 'people', to: '/people' },
] as const;

/** A firm that has nothing yet is told what to do first, in order. */
export function FirstSteps({ today }: { today: Today }) {
  const t = useMessages();
  const nothingPosted = today.onHand.cylinderCount === 0 && today.cameIn.length === 0;
  const units = useInfiniteQuery({ ...unitQueries.list({}, 1), enabled: nothingPosted });
  if (!nothingPosted || !units.isSuccess || rowsOf(units.data).length > 0) return null;
  return (
    <section className="max-w-2xl">
      <h2 className="type-title text-[1.375rem]">{t('today.first')}</h2>
      <ol className="mt-3 border-t border-rule">
        {STEPS.map(({ key, to }, index) => (
          <li key={key} className="border-b border-rule">
            <Link
              to={to}
              className="grid min-h-14 grid-cols-[2rem_minmax(0,1fr)] items-center py-2 text-ink no-underline hover:bg-well"
            >
              <span className="type-figure text-[1.25rem] text-ink-soft">{index + 1}</span>
              <span className="leading-snug">
                <span className="block font-[600]">{t(`today.first.${key}`)}</span>
                <span className="block text-[0.9375rem] text-ink-soft">{t(`today.first.${key}.text`)}</span>
              </span>
            </Link>
          </li>
        ))}
      </ol>
    </section>
  );
}
