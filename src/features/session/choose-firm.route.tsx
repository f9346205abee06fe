import { type LoaderFunctionArgs, useNavigate } from 'react-router-dom';
import { requireSession, useChooseFirm, useSession } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Failed } from '../../ui/notice.tsx';
import { SessionPage } from './session-page.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([loadMessages('session'), requireSession(request)]);
  return null;
}

export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const session = useSession();
  const choose = useChooseFirm();
  return (
    <SessionPage title={t('session.firm.title')} lead={t('session.firm.lead')}>
      {choose.isError ? <Failed title={t('session.firm.failed')} error={choose.error} /> : null}
      <ul className="border-t border-rule">
        {session?.firms.map((firm) => (
          <li key={firm.id} className="border-b border-rule">
            <Button
              kind="quiet"
              className="w-full justify-between! text-left"
              wide
              busy={choose.isPending && choose.variables === firm.id}
              onClick={() => choose.mutate(firm.id, { onSuccess: () => void navigate('/', { replace: true }) })}
            >
              {firm.name}
              {firm.id === session.firm.id ? (
                <span className="type-label font-[400] text-ink-soft">{t('session.firm.now')}</span>
              ) : null}
            </Button>
          </li>
        ))}
      </ul>
    </SessionPage>
  );
}
