import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { usePermission, useSignOut } from '../../api/session.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Failed } from '../../ui/notice.tsx';
import { Section } from './section.tsx';
import { Tokens } from './tokens.tsx';

/** One's own ways in: keys for programs, and the end of every session. */
export function OwnAccess() {
  const t = useMessages();
  const navigate = useNavigate();
  const hasTokens = usePermission('tokens:own');
  const signOut = useSignOut();
  const [asked, setAsked] = useState(false);
  const leave = () =>
    signOut.mutate({ everywhere: true }, { onSuccess: () => void navigate('/sign-in', { replace: true }) });
  return (
    <>
      {hasTokens ? <Tokens /> : null}
      <Section title={t('people.sessions')}>
        <p className="max-w-prose text-ink-soft">
          {[t('people.sessionsText'), ...(hasTokens ? [t('people.sessionsTokens')] : [])].join(' ')}
        </p>
        {signOut.isError ? <Failed error={signOut.error} /> : null}
        <div className="flex flex-wrap gap-3">
          {asked ? (
            <>
              <Button kind="grave" busy={signOut.isPending} onClick={leave}>
                {t('people.signOutEverywhereDo')}
              </Button>
              <Button onClick={() => setAsked(false)}>{t('people.cancel')}</Button>
            </>
          ) : (
            <Button onClick={() => setAsked(true)}>{t('people.signOutEverywhere')}</Button>
          )}
        </div>
      </Section>
    </>
  );
}
