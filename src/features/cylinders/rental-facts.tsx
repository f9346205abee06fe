import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { rentalQueries } from '../../api/rental-terms.ts';
import { useMessages } from '../../lib/messages.ts';
import { Fact } from '../../ui/facts.tsx';

/** What a cylinder that belongs to somebody else costs so far; nothing for our own. */
export function RentalFact({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const rented = cylinder.owner.kind === 'party';
  const view = useQuery({ ...rentalQueries.of(cylinder.id), enabled: rented });
  if (!rented) return null;
  const rental = view.data?.rental;
  return (
    <Fact name={t('rental.link')}>
      <Link to={`/cylinders/${cylinder.id}/rental`}>
        {rental ? t('rental.linkDays', { count: rental.days }) : t('rental.none')}
      </Link>
    </Fact>
  );
}
