import { useInfiniteQuery } from '@tanstack/react-query';
import { useState } from 'react';
import type { Invitation } from '../../../shared/people/people.schema.ts';
import { rowsOf } from '../../api/page.ts';
import { peopleQueries, useSendInvitationAgain, useWithdrawInvitation } from '../../api/people.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Dialog } from '../../ui/dialog.tsx';
import { Done, Empty, Failed, Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { InviteForm } from './invite-form.tsx';
import { roleWords } from './role-words.ts';
import { Section } from './section.tsx';

/** Who has been asked and has not come in yet. */
export function Invitations() {
  const t = useMessages();
  const list = useInfiniteQuery(peopleQueries.invitations());
  const [inviting, setInviting] = useState(false);
  const [said, setSaid] = useState<{ sent: boolean; text: string } | null>(null);
  const pending = rowsOf(list.data).filter(({ acceptedAt }) => acceptedAt === null);
  return (
    <Section
      title={t('people.invitations')}
      action={
        <Button kind="act" onClick={() => setInviting(true)}>
          {t('people.invite')}
        </Button>
      }
    >
      {said ? said.sent ? <Done>{said.text}</Done> : <Notice role="alert" title={said.text} /> : null}
      {list.isError ? (
        <Failed error={list.error} onRetry={() => void list.refetch()} />
      ) : list.isPending ? (
        <RowsSkeleton rows={2} rowClass="h-16" />
      ) : pending.length === 0 ? (
        <Empty title={t('people.noInvitations')}>{t('people.noInvitationsText')}</Empty>
      ) : (
        <ul className="border-t border-ink">
          {pending.map((invitation) => (
            <Line key={invitation.id} invitation={invitation} onSaid={setSaid} />
          ))}
        </ul>
      )}
      {list.hasNextPage ? (
        <Button busy={list.isFetchingNextPage} onClick={() => void list.fetchNextPage()}>
          {t('ui.table.more')}
        </Button>
      ) : null}
      <Dialog open={inviting} onClose={() => setInviting(false)} title={t('people.invite')}>
        {inviting ? (
          <InviteForm
            onDone={({ name, mailSent }) => {
              setInviting(false);
              setSaid({ sent: mailSent, text: t(mailSent ? 'people.invited' : 'people.invitedNoMail', { name }) });
            }}
          />
        ) : null}
      </Dialog>
    </Section>
  );
}

function Line({
  invitation,
  onSaid,
}: {
  invitation: Invitation;
  onSaid: (said: { sent: boolean; text: string }) => void;
}) {
  const t = useMessages();
  const format = useFormat();
  const again = useSendInvitationAgain();
  const withdraw = useWithdrawInvitation();
  const { id, name, email, roles, expiresAt } = invitation;
  const over = Date.parse(expiresAt) < deviceNow().getTime();
  const failed = again.error ?? withdraw.error;
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-6 gap-y-1 border-b border-rule-faint py-2">
      <div className="min-w-0">
        <p>
          <strong className="font-[600]">{name}</strong>, {email}
        </p>
        <p className="type-label text-[0.9375rem] text-ink-soft">
          {roleWords(t, roles)},{' '}
          {t(over ? 'people.expired' : 'people.expires', { when: format.longDateTime(expiresAt) })}
        </p>
        {failed ? <Failed error={failed} /> : null}
      </div>
      <div className="flex gap-x-5">
        <Button
          kind="quiet"
          busy={again.isPending}
          onClick={() =>
            again.mutate(id, {
              onSuccess: ({ mailSent }) =>
                onSaid({ sent: mailSent, text: t(mailSent ? 'people.sentAgain' : 'people.invitedNoMail', { name }) }),
            })
          }
        >
          {t('people.sendAgain')}
        </Button>
        {over ? null : (
          <Button
            kind="quiet"
            busy={withdraw.isPending}
            onClick={() =>
              withdraw.mutate(id, { onSuccess: () => onSaid({ sent: true, text: t('people.withdrawn', { name }) }) })
            }
          >
            {t('people.withdraw')}
          </Button>
        )}
      </div>
    </li>
  );
}
