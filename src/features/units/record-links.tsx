import { useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';

/** To the forms for everything else that can happen to a unit. Needs the messages `record-links`. */
export function RecordLinks({ unitId }: { unitId: string }) {
  const t = useMessages();
  return (
    <ButtonLink className="min-h-14" to={`/record?unit=${unitId}`}>
      {t('recordLinks.more')}
    </ButtonLink>
  );
}
