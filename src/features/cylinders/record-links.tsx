import { useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';

/** To the forms for everything else that can happen to a cylinder. Needs the messages `record-links`. */
export function RecordLinks({ cylinderId }: { cylinderId: string }) {
  const t = useMessages();
  return (
    <ButtonLink to={`/record?cylinder=${cylinderId}`} className="not-desk:odd:col-span-2">
      {t('recordLinks.more')}
    </ButtonLink>
  );
}
