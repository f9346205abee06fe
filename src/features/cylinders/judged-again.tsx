import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../../shared/ledger/entry-group-response.schema.ts';
import { placeWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';

/** What judging the readings again by another tare has added to the log. */
export function JudgedAgain({ cylinder, entries }: { cylinder: Cylinder; entries: EntryGroupResponse['entries'] }) {
  const t = useMessages();
  const format = useFormat();
  const words = ({ place, id, as }: EntryGroupResponse['entries'][number]['from']) =>
    placeWords(t, { place, id: id ?? null, as: as ?? null, label: id === cylinder.id ? cylinder.tag : '' });
  if (entries.length === 0)
    return <p className="text-[0.9375rem] text-ink-soft">{t('cylinders.tare.nothingFollowed')}</p>;
  return (
    <section aria-label={t('cylinders.tare.followed')}>
      <h2 className="type-label pb-1 text-ink-soft">{t('cylinders.tare.followed')}</h2>
      <ul className="border-t border-rule text-[0.9375rem]">
        {entries.map((entry) => (
          <li key={entry.id} className="flex justify-between gap-3 border-b border-rule-faint py-1.5">
            <span>
              {words(entry.from)} {'\u2192'} {words(entry.to)}
            </span>
            <strong className="font-[650] whitespace-nowrap">{format.mass(entry.massG)}</strong>
          </li>
        ))}
      </ul>
    </section>
  );
}
