import type { EntityManager } from 'typeorm';
import type { OnHand } from '../../shared/entries/entry.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';

/** Cylinders with content, and their mass by refrigerant. */
export async function readOnHand(manager: EntityManager): Promise<OnHand> {
  const rows = await manager.query<{ refrigerant: string; mass: string }[]>(
    `select refrigerant, sum(mass_micrograms)::text as mass from balance
      where place = 'cylinder' and mass_micrograms > 0 group by refrigerant order by refrigerant`,
  );
  const [counted] = await manager.query<{ cylinders: number }[]>(
    `select count(distinct place_id)::integer as cylinders from balance
      where place = 'cylinder' and mass_micrograms > 0`,
  );
  return {
    cylinderCount: counted?.cylinders ?? 0,
    massG: gramsOfMicrograms(rows.reduce((sum, { mass }) => sum + BigInt(mass), 0n)),
    byRefrigerant: rows.map(({ refrigerant, mass }) => ({ refrigerant, massG: gramsOfMicrograms(BigInt(mass)) })),
  };
}
