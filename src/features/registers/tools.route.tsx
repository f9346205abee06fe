import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import { type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { TOOL_KINDS, type Tool } from '../../../shared/tools/tools.schema.ts';
import { useExportPath } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { type ToolFilters, toolQueries } from '../../api/tools.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { loadMessages, type Translate, useMessages } from '../../lib/messages.ts';
import { FilterSelect } from '../../ui/filter-bar.tsx';
import type { LedgerColumn } from '../../ui/ledger-table.tsx';
import { RegisterPage } from './register-page.tsx';
import { ToolForm } from './tool-form.tsx';
import { withParam } from './with-param.ts';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('people-screen', 'server')]);
  return null;
}

/** Scales and other tools, with what they can tell and when they were last checked. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const [search, setSearch] = useSearchParams();
  const mayWrite = usePermission('tools:write');
  const [open, setOpen] = useState<Tool | 'new' | null>(null);
  const filters = useMemo<ToolFilters>(
    () => ({
      search: search.get('search')?.trim() || undefined,
      kind: TOOL_KINDS.find((kind) => kind === search.get('kind')),
      sort: search.get('sort') === '-name' ? '-name' : 'name',
    }),
    [search],
  );
  const list = useInfiniteQuery({ ...toolQueries.list(filters), placeholderData: (before) => before });
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const takeOut = useExportPath('tools', filters);
  const columns = useMemo(() => columnsOf(t, format), [t, format]);
  // As it stands now, should somebody have changed it meanwhile.
  const row = open === 'new' || open === null ? null : (rows.find(({ id }) => id === open.id) ?? open);
  const set = (name: string, value: string) => setSearch((before) => withParam(before, name, value), { replace: true });
  return (
    <RegisterPage<Tool>
      words="registers.tools"
      list={list}
      rows={rows}
      columns={columns}
      mayWrite={mayWrite}
      search={filters.search ?? ''}
      onSearch={(value) => set('search', value)}
      sort={filters.sort ?? 'name'}
      onSort={(value) => set('sort', value)}
      filtered={filters.kind !== undefined}
      filterSummary={filters.kind ? t(`registers.toolKind.${filters.kind}`) : t('registers.everything')}
      filters={
        <FilterSelect
          label={t('registers.kind')}
          any={t('registers.all')}
          value={filters.kind ?? ''}
          choices={TOOL_KINDS.map((kind) => ({ value: kind, label: t(`registers.toolKind.${kind}`) }))}
          onChange={(value) => set('kind', value)}
        />
      }
      takeOut={takeOut}
      open={open}
      onOpen={setOpen}
      openTitle={open === 'new' || open === null ? t('registers.tools.new') : open.name}
      form={(onDone) => (open === null ? null : <ToolForm key={row?.id ?? 'new'} tool={row} onDone={onDone} />)}
    />
  );
}

function columnsOf(t: Translate, format: Formats): LedgerColumn<Tool>[] {
  return [
    {
      id: 'name',
      head: t('registers.name'),
      sort: 'name',
      cell: ({ name }) => <span className="font-[600]">{name}</span>,
    },
    { id: 'kind', head: t('registers.kind'), cell: ({ kind }) => t(`registers.toolKind.${kind}`) },
    {
      id: 'serial',
      head: t('registers.serial'),
      cell: ({ serial }) => <span className="font-mono text-[0.875rem]">{serial}</span>,
    },
    {
      id: 'resolution',
      head: t('registers.resolution'),
      figure: true,
      cell: ({ scale }) => (scale ? format.scaleStep(scale.resolutionG) : ''),
    },
    {
      id: 'span',
      head: t('registers.spanError'),
      unit: '%',
      figure: true,
      cell: ({ scale }) =>
        scale && scale.spanErrorRelative > 0 ? format.number(scale.spanErrorRelative * 100, 4) : '',
    },
    {
      id: 'checked',
      head: t('registers.lastChecked'),
      cell: ({ lastCheckedOn }) => (lastCheckedOn ? format.day(lastCheckedOn) : ''),
    },
    { id: 'holder', head: t('registers.holder'), cell: ({ heldByName }) => heldByName ?? '' },
  ];
}
