import { ENTRY_SORT, entriesFrom, entryConditions } from '../../entries/entry-list.repository.ts';
import { type Column, grams, instant, plain, type TableOf, typed } from './table.ts';

/** What a place is called; one without a name by its kind. */
function place(end: 'from' | 'to'): Column {
  const called = (label: string) => `coalesce(${label}, e.${end}_place || coalesce(' (' || e.${end}_as || ')', ''))`;
  const label = `${end}_label.label`;
  return [end, called(plain(label)), 'text', called(label)];
}

const label = (end: 'from' | 'to'): string => `left join lateral (
    select tag as label from cylinder c where c.firm_id = e.firm_id and c.id = e.${end}_id
    union all select tag from unit u where u.firm_id = e.firm_id and u.id = e.${end}_id
    union all select name from party y where y.firm_id = e.firm_id and y.id = e.${end}_id
    union all select name from customer m where m.firm_id = e.firm_id and m.id = e.${end}_id
    limit 1) ${end}_label on true`;

const COLUMNS: readonly Column[] = [
  ['sequence', 'e.sequence', 'number'],
  instant('occurredAt', 'e.occurred_at'),
  instant('recordedAt', 'e.recorded_at'),
  ['bookingMonth', 'e.booking_month'],
  ['late', 'e.late', 'boolean'],
  ['kind', 'e.kind'],
  ['refrigerant', 'e.refrigerant'],
  grams('massG', 'e.mass_micrograms'),
  ['typedValue', 'e.typed_value'],
  ['typedUnit', 'e.typed_unit'],
  ['fromPlace', 'e.from_place'],
  place('from'),
  ['toPlace', 'e.to_place'],
  place('to'),
  ['howKnown', 'e.how_known'],
  ['addedByServer', 'e.added_by_server', 'boolean'],
  ['atLeast', 'e.at_least', 'boolean'],
  typed('recordedBy', 'p.name'),
  typed('reason', 'g.reason'),
  typed('unit', 'un.tag'),
  typed('site', 's.name'),
  ['entryId', 'e.id'],
  ['groupId', 'e.group_id'],
  ['correctsGroupId', 'e.corrects_group_id'],
  ['reversedByGroupId', 'r.id'],
  ['reversesGroupId', 'g.reverses_group_id'],
];

/** The entries as `e`, with everything that the columns speak of. */
const ENTRIES_WITH_LABELS = `${entriesFrom('entry e')} ${label('from')} ${label('to')}
    left join unit un on un.firm_id = e.firm_id and un.id = e.unit_id`;

export const entries: TableOf<'entries'> = (filters) => {
  const { columns, direction } = ENTRY_SORT[filters.sort];
  return {
    columns: COLUMNS,
    from: ENTRIES_WITH_LABELS,
    countFrom: 'entry e',
    conditions: entryConditions(filters),
    order: columns.map(({ sql }) => `${sql} ${direction}`).join(', '),
  };
};
