import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { PARTY_KINDS, type Party } from '../../../shared/parties/parties.schema.ts';
import { useExportPath } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { type PartyFilters, partyQueries } from '../../api/parties.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { FilterSelect } from '../../ui/filter-bar.tsx';
import type { LedgerColumn } from '../../ui/ledger-table.tsx';
import { PartyForm } from './party-form.tsx';
import { RegisterPage } from './register-page.tsx';
import { withParam } from './with-param.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('people-screen', 'server')]);
  return null;
}

/** Suppliers, reclaimers and other contractors: whom refrigerant comes from and goes to, besides customers. */
export function Component() {
  const t = useMessages();
  const [search, setSearch] = useSearchParams();
  const mayWrite = usePermission('parties:write');
  const [open, setOpen] = useState<Party | 'new' | null>(null);
  const filters = useMemo<PartyFilters>(
    () => ({
      search: search.get('search')?.trim() || undefined,
      kind: PARTY_KINDS.find((kind) => kind === search.get('kind')),
      sort: search.get('sort') === '-name' ? '-name' : 'name',
    }),
    [search],
  );
  const list = useInfiniteQuery({ ...partyQueries.list(filters), placeholderData: (before) => before });
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const takeOut = useExportPath('parties', filters);
  const columns = useMemo<LedgerColumn<Party>[]>(
    () => [
      {
        id: 'name',
        head: t('registers.name'),
        sort: 'name',
        cell: ({ name }) => <span className="font-[600]">{name}</span>,
      },
      { id: 'kind', head: t('registers.kind'), cell: ({ kind }) => t(`registers.partyKind.${kind}`) },
      {
        id: 'note',
        head: t('registers.note'),
        cell: ({ note }) => <span className="block max-w-md truncate text-ink-soft">{note}</span>,
      },
    ],
    [t],
  );
  // As it stands now, should somebody have changed it meanwhile.
  const row = open === 'new' || open === null ? null : (rows.find(({ id }) => id === open.id) ?? open);
  const set = (name: string, value: string) => setSearch((before) => withParam(before, name, value), { replace: true });
  return (
    <RegisterPage<Party>
      words="registers.parties"
      list={list}
      rows={rows}
      columns={columns}
      mayWrite={mayWrite}
      search={filters.search ?? ''}
      onSearch={(value) => set('search', value)}
      sort={filters.sort ?? 'name'}
      onSort={(value) => set('sort', value)}
      filtered={filters.kind !== undefined}
      filterSummary={filters.kind ? t(`registers.partyKind.${filters.kind}`) : t('registers.everything')}
      filters={
        <FilterSelect
          label={t('registers.kind')}
          any={t('registers.all')}
          value={filters.kind ?? ''}
          choices={PARTY_KINDS.map((kind) => ({ value: kind, label: t(`registers.partyKind.${kind}`) }))}
          onChange={(value) => set('kind', value)}
        />
      }
      takeOut={takeOut}
      open={open}
      onOpen={setOpen}
      openTitle={open === 'new' || open === null ? t('registers.parties.new') : open.name}
      form={(onDone) => (open === null ? null : <PartyForm key={row?.id ?? 'new'} party={row} onDone={onDone} />)}
    />
  );
}
