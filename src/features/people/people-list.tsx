import { useQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import type { Person } from '../../../shared/people/people.schema.ts';
import { peopleQueries } from '../../api/people.ts';
import { usePermission, useSession } from '../../api/session.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { Dialog } from '../../ui/dialog.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Done, Failed } from '../../ui/notice.tsx';
import { PersonForm } from './person-form.tsx';
import { roleWords } from './role-words.ts';
import { Section } from './section.tsx';

/** Everybody of the firm; an owner opens one to change what they may do. */
export function PeopleList() {
  const t = useMessages();
  const format = useFormat();
  const manages = usePermission('people:manage');
  const me = useSession()?.person.id;
  const people = useQuery(peopleQueries.everybody());
  const [open, setOpen] = useState<Person | null>(null);
  const [done, setDone] = useState<string | null>(null);
  const columns = useMemo(() => columnsOf(t, format, me), [t, format, me]);
  return (
    <Section title={t('people.members')}>
      {done ? <Done>{done}</Done> : null}
      {people.isError ? (
        <Failed error={people.error} onRetry={() => void people.refetch()} />
      ) : (
        <LedgerTable
          caption={t('people.members')}
          columns={columns}
          rows={people.data ?? []}
          rowId={({ id }) => id}
          loading={people.isPending}
          onOpen={
            manages
              ? (person) => {
                  setDone(null);
                  setOpen(person);
                }
              : undefined
          }
        />
      )}
      <Dialog open={open !== null} onClose={() => setOpen(null)} title={open?.name ?? ''}>
        {open ? (
          <PersonForm
            key={open.id}
            person={people.data?.find(({ id }) => id === open.id) ?? open}
            isMe={open.id === me}
            onDone={(message) => {
              setOpen(null);
              setDone(message);
            }}
          />
        ) : null}
      </Dialog>
    </Section>
  );
}

function columnsOf(t: Translate, format: Formats, me: string | undefined): LedgerColumn<Person>[] {
  return [
    {
      id: 'name',
      head: t('people.name'),
      cell: ({ id, name, active }) => (
        <span className={active ? 'font-[600]' : 'text-ink-soft'}>
          {name}
          {id === me ? <span className="font-[400] text-ink-soft"> {t('people.you')}</span> : null}
        </span>
      ),
    },
    {
      id: 'roles',
      head: t('people.roles'),
      cell: ({ roles, siteIds }) =>
        [roleWords(t, roles), ...(siteIds ? [t('people.sitesCount', { count: siteIds.length })] : [])].join(', '),
    },
    { id: 'van', head: t('people.van'), cell: ({ van }) => van ?? '' },
    { id: 'email', head: t('people.email'), cell: ({ email }) => email },
    {
      id: 'seen',
      head: t('people.lastSignIn'),
      cell: ({ lastSignInAt, active }) =>
        active
          ? lastSignInAt === null
            ? t('people.never')
            : format.longDateTime(lastSignInAt)
          : t('people.notActive'),
    },
  ];
}
