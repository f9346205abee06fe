import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { z } from 'zod';
import type { createdToken, PersonalToken } from '../../../shared/people/people.schema.ts';
import { peopleQueries, useRevokeToken } from '../../api/people.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Dialog } from '../../ui/dialog.tsx';
import { Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Section } from './section.tsx';
import { TokenForm } from './token-form.tsx';
import { TokenSecret } from './token-secret.tsx';

/** Keys for programs of one's own. The secret is shown once, when a token is made. */
export function Tokens() {
  const t = useMessages();
  const tokens = useQuery(peopleQueries.tokens());
  const [making, setMaking] = useState(false);
  const [made, setMade] = useState<z.output<typeof createdToken> | null>(null);
  const close = () => {
    setMaking(false);
    setMade(null);
  };
  return (
    <Section
      title={t('people.tokens')}
      action={<Button onClick={() => setMaking(true)}>{t('people.tokenNew')}</Button>}
    >
      <p className="max-w-prose text-ink-soft">{t('people.tokensText')}</p>
      {tokens.isError ? (
        <Failed error={tokens.error} onRetry={() => void tokens.refetch()} />
      ) : tokens.isPending ? (
        <RowsSkeleton rows={2} rowClass="h-14" />
      ) : tokens.data.length === 0 ? null : (
        <ul className="border-t border-ink">
          {tokens.data.map((token) => (
            <Line key={token.id} token={token} />
          ))}
        </ul>
      )}
      <Dialog open={making || made !== null} onClose={close} title={t(made ? 'people.tokenMade' : 'people.tokenNew')}>
        {made ? (
          <TokenSecret token={made} onClose={close} />
        ) : making ? (
          <TokenForm
            onMade={(token) => {
              setMaking(false);
              setMade(token);
            }}
          />
        ) : null}
      </Dialog>
    </Section>
  );
}

function Line({ token }: { token: PersonalToken }) {
  const t = useMessages();
  const format = useFormat();
  const revoke = useRevokeToken();
  const [asked, setAsked] = useState(false);
  const over = token.expiresOn < toDayInput(deviceNow());
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-b border-rule-faint py-2">
      <div className="min-w-0">
        <p className="font-[600]">{token.name}</p>
        <p className="type-label text-[0.9375rem] text-ink-soft">
          {token.scopes.map((scope) => t(`people.scope.${scope}`)).join(', ')};{' '}
          {t(over ? 'people.tokenExpired' : 'people.tokenUntil', { day: format.day(token.expiresOn) })};{' '}
          {token.lastUsedAt === null
            ? t('people.tokenNeverUsed')
            : t('people.tokenUsed', { when: format.longDateTime(token.lastUsedAt) })}
        </p>
        {revoke.isError ? <Failed error={revoke.error} /> : null}
      </div>
      <Button
        kind={asked ? 'grave' : 'quiet'}
        busy={revoke.isPending}
        onBlur={() => setAsked(false)}
        onClick={() => (asked ? revoke.mutate(token.id) : setAsked(true))}
      >
        {asked ? t('people.revokeDo', { name: token.name }) : t('people.revoke')}
      </Button>
    </li>
  );
}
