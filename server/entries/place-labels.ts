import type { EntityManager } from 'typeorm';
import type { PlaceFields } from '../../shared/ledger/place.ts';
import type { Locale } from '../../shared/session/session.schema.ts';
import { messageFor } from '../messages/translate.ts';

/** Tag or name by id, of what the caller may see. */
export type Labels = ReadonlyMap<string, string>;

/** What people call these cylinders, units, parties and customers. A reader of some sites learns no more than those. */
export async function readLabels(manager: EntityManager, ids: readonly (string | null)[]): Promise<Labels> {
  const wanted = [...new Set(ids.filter((id) => id !== null))];
  if (wanted.length === 0) return new Map();
  const rows = await manager.query<{ id: string; label: string }[]>(
    `select id, tag as label from cylinder where id = any ($1::uuid[])
     union all select id, tag from unit where id = any ($1::uuid[])
     union all select id, name from party where id = any ($1::uuid[])
     union all select id, name from customer where id = any ($1::uuid[])`,
    [wanted],
  );
  return new Map(rows.map(({ id, label }) => [id, label]));
}

/** One end of an entry in words: the tag or name, else what kind of place it is. */
export function placeView({ place, id, as }: PlaceFields, labels: Labels, locale: Locale) {
  const label = (id ? labels.get(id) : undefined) ?? messageFor(as ? `place.${place}.${as}` : `place.${place}`, locale);
  return { place, id: id ?? null, as: as ?? null, label };
}
