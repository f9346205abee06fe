import type { EntityManager } from 'typeorm';
import type { RentalTerms } from '../../shared/rental-terms/rental-terms.schema.ts';
import { RentalTermsEntity } from './rental-terms.entity.ts';

export type RentalTermsRow = RentalTermsEntity;

export function rentalTermsRepository(manager: EntityManager) {
  const rows = manager.getRepository(RentalTermsEntity);
  return {
    async insert(row: RentalTermsRow): Promise<void> {
      await rows.insert(row);
    },
    /** By day; of one day in the order they were made. */
    async ofCylinder(cylinderId: string): Promise<RentalTerms[]> {
      const found = await rows.find({ where: { cylinderId }, order: { since: 'asc', id: 'asc' } });
      return found.map(({ id, since, deposit, dailyRate, currency }) => ({
        id,
        since,
        conditions: currency === null ? null : { deposit, dailyRate, currency },
      }));
    },
    async timeZone(): Promise<string> {
      const [firm] = await manager.query<{ timeZone: string }[]>('select time_zone as "timeZone" from firm');
      return firm?.timeZone ?? 'UTC';
    },
  };
}
