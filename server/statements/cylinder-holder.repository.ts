import type { EntityManager } from 'typeorm';
import type { Holder } from '../../shared/statements/cylinder-statement.schema.ts';
import { type HeldSpan, type HolderFrom, heldBetween } from '../../shared/statements/holders.ts';

/** Who held some cylinders when, and what these people are called. */
export interface Holders {
  between(cylinderId: string, after: number | null, until: number): Holder[];
}

interface Row {
  cylinderId: string;
  heldBy: string | null;
  from: Date;
  name: string | null;
  van: string | null;
}

export async function readHolders(manager: EntityManager, cylinderIds: readonly string[]): Promise<Holders> {
  const rows =
    cylinderIds.length === 0
      ? []
      : await manager.query<Row[]>(
          `select h.cylinder_id as "cylinderId", h.held_by as "heldBy", h.valid_from as "from", p.name, m.van
            from cylinder_holder h
            left join person p on p.id = h.held_by
            left join membership m on m.firm_id = h.firm_id and m.person_id = h.held_by
            where h.cylinder_id = any ($1::uuid[]) order by h.cylinder_id, h.version`,
          [cylinderIds],
        );
  const people = new Map(rows.map(({ heldBy, name, van }) => [heldBy, { name, van }]));
  const histories = new Map<string, HolderFrom[]>();
  for (const { cylinderId, heldBy, from } of rows) {
    histories.set(cylinderId, [...(histories.get(cylinderId) ?? []), { personId: heldBy, from: from.getTime() }]);
  }
  const named = ({ personId, from, to }: HeldSpan): Holder => ({
    personId,
    name: personId === null ? null : (people.get(personId)?.name ?? ''),
    van: personId === null ? null : (people.get(personId)?.van ?? null),
    from: new Date(from).toISOString(),
    to: new Date(to).toISOString(),
  });
  return {
    between: (cylinderId, after, until) => heldBetween(histories.get(cylinderId) ?? [], after, until).map(named),
  };
}
