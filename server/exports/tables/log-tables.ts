import { Conditions } from '../../lists/list-query.ts';
import { grams, instant, orderOf, type TableOf, typed } from './table.ts';

export const readings: TableOf<'readings'> = ({ cylinderId, unitId }) => ({
  columns: [
    instant('readAt', 'r.read_at'),
    typed('cylinder', 'c.tag'),
    ['moment', 'r.moment'],
    ['mode', 'r.mode'],
    ['typedValue', 'r.typed_value'],
    ['typedUnit', 'r.typed_unit'],
    grams('massG', 'r.mass_micrograms'),
    ['hoseFull', 'coalesce(r.hose_full, false)', 'boolean'],
    grams('hoseG', 'r.hose_micrograms'),
    typed('scale', 't.name'),
    ['resolutionG', 'r.resolution_g', 'number'],
    ['repeatabilityG', 'r.repeatability_g', 'number'],
    ['spanErrorRelative', 'r.span_error_relative', 'number'],
    ['offsetG', 'r.offset_g', 'number'],
    ['kind', 'g.kind'],
    ['reversed', 'x.id is not null', 'boolean'],
    typed('recordedBy', 'p.name'),
    ['readingId', 'r.id'],
    ['groupId', 'r.group_id'],
    ['cylinderId', 'r.cylinder_id'],
  ],
  from: `reading r
    join entry_group g on g.firm_id = r.firm_id and g.id = r.group_id
    left join entry_group x on x.firm_id = r.firm_id and x.reverses_group_id = r.group_id
    left join cylinder c on c.firm_id = r.firm_id and c.id = r.cylinder_id
    left join tool t on t.firm_id = r.firm_id and t.id = r.tool_id
    left join person p on p.id = g.recorded_by`,
  countFrom: 'reading r join entry_group g on g.firm_id = r.firm_id and g.id = r.group_id',
  conditions: new Conditions().andIf('r.cylinder_id = $', cylinderId).andIf('g.unit_id = $', unitId),
  order: 'r.read_at, r.sequence, r.id',
});

export const flags: TableOf<'flags'> = ({ sort, open, unitId, cylinderId, subjectId, groupId }) => {
  const conditions = new Conditions()
    .andIf(`f.subject_kind = 'unit' and f.subject_id = $`, unitId)
    .andIf(`f.subject_kind = 'cylinder' and f.subject_id = $`, cylinderId)
    .andIf('f.subject_id = $', subjectId)
    .andIf('f.group_id = $', groupId);
  if (open !== undefined) conditions.and(`f.closed_at is ${open ? '' : 'not '}null`);
  return {
    columns: [
      instant('openedAt', 'f.opened_at'),
      ['code', 'f.code'],
      ['subjectKind', 'f.subject_kind'],
      typed('subject', 'coalesce(u.tag, c.tag, y.name)'),
      ['refrigerant', 'f.refrigerant'],
      grams('massG', 'f.mass_micrograms'),
      instant('closedAt', 'f.closed_at'),
      ['flagId', 'f.id'],
      ['subjectId', 'f.subject_id'],
      ['groupId', 'f.group_id'],
      ['openedByGroupId', 'f.opened_by_group_id'],
      ['closedByGroupId', 'f.closed_by_group_id'],
    ],
    from: `flag f
      left join unit u on u.firm_id = f.firm_id and u.id = f.subject_id
      left join cylinder c on c.firm_id = f.firm_id and c.id = f.subject_id
      left join party y on y.firm_id = f.firm_id and y.id = f.subject_id`,
    countFrom: 'flag f',
    conditions,
    order: orderOf(sort, ['f.opened_at', 'f.id']),
  };
};
