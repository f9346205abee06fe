import { Link } from 'react-router-dom';
import type { SettledRow } from '../../../../shared/periods/periods.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Section } from '../section.tsx';

/** What was settled of this month and stands. What a later reading explained was taken back, and is not in it. */
export function SettledList({ rows, timeZone }: { rows: readonly SettledRow[]; timeZone: string }) {
  const t = useMessages();
  const format = useFormat();
  if (rows.length === 0) return null;
  return (
    <Section title={t('books.close.settled', { count: rows.length })}>
      <ul>
        {rows.map((row) => (
          <li key={row.id} className="border-b border-rule py-3 leading-snug">
            <p>
              <Link to={`/log/${row.groupId}`} className="inline-flex min-h-6 items-center font-[650] text-ink">
                {t('books.settledLine', {
                  what: row.label,
                  refrigerant: row.refrigerant,
                  mass: format.mass(Math.abs(row.massG)),
                  to: row.to.label,
                })}
              </Link>
            </p>
            <p className="text-[0.9375rem] text-ink-soft">
              {t('books.settledLine.by', { who: row.byName, when: format.longDateTime(row.at, timeZone) })}
              {row.reason ? ` ${row.reason}` : ''}
            </p>
          </li>
        ))}
      </ul>
    </Section>
  );
}
