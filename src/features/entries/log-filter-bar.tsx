import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { useSearchParams } from 'react-router-dom';
import { ENTRY_SORTS } from '../../../shared/entries/entry.schema.ts';
import { GROUP_KINDS } from '../../../shared/ledger/entry-group.schema.ts';
import { PLACE_KINDS } from '../../../shared/ledger/place.ts';
import type { Session } from '../../../shared/session/session.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { type EntryListQuery, entriesCsvPath } from '../../api/entries.ts';
import { exportPath } from '../../api/exports.ts';
import { peopleQueries } from '../../api/people.ts';
import { useOnHand, usePermission, useSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { useRefrigerantNames } from '../../lib/refrigerant-names.ts';
import { Button } from '../../ui/button.tsx';
import { FilterBar, FilterSelect, FilterTag } from '../../ui/filter-bar.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { type FilterName, filterCount, recentMonths, withFilter, withoutFilters } from './log-filters.ts';

/** Period, refrigerant, place, who and why, as they stand in the address; and the same list as a file. */
export function LogFilters({ filters }: { filters: EntryListQuery }) {
  const t = useMessages();
  const format = useFormat();
  const [, setSearch] = useSearchParams();
  const phone = !useMedia('(width >= 48rem)');
  const seesPeople = usePermission('people:read');
  const session = useSession();
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  const refrigerants = useRefrigerantChoices();
  const exported = session ? exportedBy(session, filters) : null;
  const set = (name: FilterName) => (value: string) => setSearch((before) => withFilter(before, name, value));
  const months = useMemo(
    () => recentMonths(deviceNow()).map((month) => ({ value: month, label: format.month(month) })),
    [format],
  );
  const places = PLACE_KINDS.map((place) => ({ value: place, label: t(`log.place.${place}`) }));
  const kinds = GROUP_KINDS.map((kind) => ({ value: kind, label: t(`log.kind.${kind}`) }));
  const who = people.data?.map(({ id, name }) => ({ value: id, label: name })) ?? [];
  const word = (choices: readonly { value: string; label: string }[], value: string | undefined) =>
    choices.find((choice) => choice.value === value)?.label ?? value;
  const active = [
    word(months, filters.month),
    filters.refrigerant,
    word(places, filters.place),
    word(who, filters.personId),
    word(kinds, filters.kind),
  ].filter((each): each is string => each !== undefined);
  return (
    <FilterBar
      summary={active.length > 0 ? active.join(', ') : t('log.filter.none')}
      end={
        <>
          {filterCount(filters) > 0 ? (
            <Button kind="quiet" onClick={() => setSearch(withoutFilters)}>
              {t('log.filter.clear')}
            </Button>
          ) : null}
          {exported ? (
            <a href={entriesCsvPath(exported)} download className="inline-flex min-h-11 items-center">
              {t(exported.personId === filters.personId ? 'log.export' : 'log.exportOwn')}
            </a>
          ) : null}
          {exported ? (
            <TakeOutLink to={exportPath('entries', { ...exported }, 'xlsx')} label={t('log.exportSheet')} />
          ) : null}
        </>
      }
    >
      <FilterSelect
        label={t('log.filter.period')}
        any={t('log.filter.all')}
        value={filters.month ?? ''}
        choices={months}
        onChange={set('month')}
      />
      <FilterSelect
        label={t('log.filter.refrigerant')}
        any={t('log.filter.all')}
        value={filters.refrigerant ?? ''}
        choices={refrigerants}
        onChange={set('refrigerant')}
      />
      <FilterSelect
        label={t('log.filter.place')}
        any={t('log.filter.any')}
        value={filters.place ?? ''}
        choices={places}
        onChange={set('place')}
      />
      {seesPeople ? (
        <FilterSelect
          label={t('log.filter.who')}
          any={t('log.filter.any')}
          value={filters.personId ?? ''}
          choices={who}
          onChange={set('personId')}
        />
      ) : null}
      <FilterSelect
        label={t('log.filter.kind')}
        any={t('log.filter.any')}
        value={filters.kind ?? ''}
        choices={kinds}
        onChange={set('kind')}
      />
      <FilterSelect
        label={t('log.filter.reversed')}
        any={t('log.filter.reversed.shown')}
        value={filters.without ?? ''}
        choices={[{ value: 'reversed', label: t('log.filter.reversed.hidden') }]}
        onChange={set('without')}
      />
      {phone ? (
        <FilterSelect
          label={t('log.filter.order')}
          value={filters.sort ?? '-sequence'}
          choices={ENTRY_SORTS.map((sort) => ({ value: sort, label: t(`log.order.${sort}`) }))}
          onChange={(sort) => setSearch((before) => withFilter(before, 'sort', sort), { replace: true })}
        />
      ) : null}
      {filters.cylinderId ? <CylinderTag id={filters.cylinderId} onRemove={() => set('cylinderId')('')} /> : null}
      {filters.unitId ? (
        <FilterTag
          label={t('log.filter.unit')}
          remove={t('log.filter.remove', { filter: t('log.filter.unit') })}
          onRemove={() => set('unitId')('')}
        />
      ) : null}
    </FilterBar>
  );
}

/** Managers take out the list as it is, readers what they see, technicians what they recorded themselves. */
function exportedBy({ permissions, roles, person }: Session, filters: EntryListQuery): EntryListQuery | null {
  if (permissions.includes('exports:make') || roles.includes('reader')) return filters;
  return filters.personId === undefined || filters.personId === person.id ? { ...filters, personId: person.id } : null;
}

function CylinderTag({ id, onRemove }: { id: string; onRemove: () => void }) {
  const t = useMessages();
  const { data } = useQuery(cylinderQueries.one(id));
  const label = t('log.filter.cylinder', { tag: data?.tag ?? '' });
  return <FilterTag label={label} remove={t('log.filter.remove', { filter: label })} onRemove={onRemove} />;
}

/** What the firm has on hand first, then the whole table. */
function useRefrigerantChoices() {
  const names = useRefrigerantNames();
  const onHand = useOnHand();
  return useMemo(() => {
    const held = onHand?.byRefrigerant.map(({ refrigerant }) => refrigerant) ?? [];
    const all = [...held, ...names.map(({ designation }) => designation)];
    return [...new Set(all)].map((value) => ({ value, label: value }));
  }, [names, onHand]);
}
