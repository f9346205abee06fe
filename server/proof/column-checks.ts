/**
 * What `post_records` filled from a record's text (migration 1764547200004), said once more to compare table and text:
 * column and the expression over `doc`. A row that differs was changed after it was posted.
 */
type Columns = readonly (readonly [column: string, sql: string])[];

const text = (name: string) => `doc ->> '${name}'`;
const uuid = (name: string) => `(doc ->> '${name}')::uuid`;
const instant = (name: string) => `(doc ->> '${name}')::timestamptz`;
const flag = (name: string) => `(doc ->> '${name}')::boolean`;

const RECORD: Columns = [
  ['type', text('type')],
  ['record_id', uuid('id')],
  ['noun', text('noun')],
  ['subject_id', uuid('subjectId')],
  ['version', `(doc ->> 'version')::integer`],
  ['recorded_at', instant('recordedAt')],
  ['recorded_by', uuid('recordedBy')],
];

const GROUP: Columns = [
  ['sequence', 'd.sequence'],
  ['kind', text('kind')],
  ['unit_id', uuid('unitId')],
  ['site_id', uuid('siteId')],
  ['job_id', uuid('jobId')],
  ['charge_sheet_id', uuid('chargeSheetId')],
  ['supervised_by', uuid('supervisedBy')],
  ['occurred_at', instant('occurredAt')],
  ['recorded_at', instant('recordedAt')],
  ['recorded_by', uuid('recordedBy')],
  ['regulatory_day', `(doc ->> 'regulatoryDay')::date`],
  ['zone_data_version', text('zoneDataVersion')],
  ['device_sent_at', instant('deviceSentAt')],
  [
    'device_skew_seconds',
    `round(extract(epoch from (doc ->> 'recordedAt')::timestamptz - (doc ->> 'deviceSentAt')::timestamptz))::integer`,
  ],
  ['open_weigh_in', flag('openWeighIn')],
  ['closes_group_id', uuid('closesGroupId')],
  ['reverses_group_id', uuid('reversesGroupId')],
  ['replaces_group_id', uuid('replacesGroupId')],
  ['answers_group_id', uuid('answersGroupId')],
  ['request_hash', `decode(doc ->> 'requestHash', 'hex')`],
  ['reason', text('reason')],
];

const ENTRY: Columns = [
  ['sequence', 'd.sequence'],
  ['group_id', uuid('groupId')],
  ['kind', `(select g.kind from entry_group g where g.firm_id = d.firm_id and g.id = x.group_id)`],
  ['refrigerant', text('refrigerant')],
  ['mass_micrograms', `(doc ->> 'massMicrograms')::bigint`],
  ['typed_value', `doc #>> '{typed,value}'`],
  ['typed_unit', `doc #>> '{typed,unit}'`],
  ['from_place', `doc #>> '{from,place}'`],
  ['from_id', `(doc #>> '{from,id}')::uuid`],
  ['from_as', `doc #>> '{from,as}'`],
  ['to_place', `doc #>> '{to,place}'`],
  ['to_id', `(doc #>> '{to,id}')::uuid`],
  ['to_as', `doc #>> '{to,as}'`],
  ['how_known', text('howKnown')],
  ['occurred_at', instant('occurredAt')],
  ['recorded_at', instant('recordedAt')],
  ['recorded_by', uuid('recordedBy')],
  ['booking_month', text('bookingMonth')],
  ['late', flag('late')],
  ['added_by_server', flag('addedByServer')],
  ['at_least', flag('atLeast')],
  ['taken_back', flag('takenBack')],
  ['corrects_group_id', uuid('correctsGroupId')],
  ['reverses_entry_id', uuid('reversesEntryId')],
  ['unit_id', uuid('unitId')],
  ['site_id', uuid('siteId')],
];

const double = (path: string) => `(part #>> '{${path}}')::double precision`;
const READING: Columns = [
  ['group_id', uuid('id')],
  ['sequence', 'd.sequence'],
  ['cylinder_id', `(part ->> 'cylinderId')::uuid`],
  ['tool_id', `(part ->> 'toolId')::uuid`],
  ['read_at', `coalesce(part ->> 'at', doc ->> 'occurredAt')::timestamptz`],
  ['moment', `part ->> 'moment'`],
  ['mode', `part ->> 'mode'`],
  ['typed_value', `part ->> 'value'`],
  ['typed_unit', `part ->> 'unit'`],
  ['mass_micrograms', `(part ->> 'massMicrograms')::bigint`],
  ['hose_full', `(part ->> 'hoseFull')::boolean`],
  ['hose_value', `part #>> '{hose,value}'`],
  ['hose_unit', `part #>> '{hose,unit}'`],
  ['hose_micrograms', `(part ->> 'hoseMicrograms')::bigint`],
  ['resolution_g', double('scale,resolutionG')],
  ['repeatability_g', double('scale,repeatabilityG')],
  ['span_error_relative', double('scale,spanErrorRelative')],
  ['offset_g', double('scale,offsetG')],
];

const STATEMENT: Columns = [
  ['sequence', 'd.sequence'],
  ['unit_id', `(part ->> 'id')::uuid`],
  ['condition', `part ->> 'is'`],
  ['shown_by', `part ->> 'by'`],
  ['occurred_at', instant('occurredAt')],
];

const DOCUMENT: Columns = [
  ['kind', `part ->> 'kind'`],
  ['number', `part ->> 'number'`],
  ['dated', `(part ->> 'date')::date`],
  ['refrigerant', `part ->> 'refrigerant'`],
  ['mass_micrograms', `(part ->> 'massMicrograms')::bigint`],
  ['typed_value', `part #>> '{typed,value}'`],
  ['typed_unit', `part #>> '{typed,unit}'`],
];

const firstDifferent = (columns: Columns): string =>
  `coalesce(${columns.map(([column, sql]) => `case when x.${column} is distinct from ${sql} then '${column}' end`).join(', ')})`;
const anyDifferent = (columns: Columns): string =>
  columns.map(([column, sql]) => `x.${column} is distinct from ${sql}`).join(' or ');

/**
 * Rows are found by primary keys alone, and by columns of `docs` and `parts` rather than by expressions over a text. For a
 * firm that the statistics do not know yet, PostgreSQL takes any index that starts with the firm for equally good; and
 * under row-level security it puts no condition into an index that might leak what it sees, as taking a text apart might.
 * Either would read all rows of the firm for each record.
 */
const rowOf = (table: string, type: string, columns: Columns): string => `
  select d.sequence, '${table}' as "table", case when x.firm_id is null then '' else ${firstDifferent(columns)} end as "column"
    from docs d left join lateral (
      select * from ${table} y where y.firm_id = d.firm_id and y.id = d.record_id offset 0) x on true
    where d.type = '${type}' and (x.firm_id is null or ${anyDifferent(columns)})`;

/** One row for each part of a group. */
const partsOf = (table: string, list: string, columns: Columns, key: string): string => `
  select d.sequence, '${table}', case when x.firm_id is null then '' else ${firstDifferent(columns)} end
    from parts d left join lateral (
      select * from ${table} y where y.firm_id = d.firm_id and ${key} offset 0) x on true
    where d.list = '${list}' and (x.firm_id is null or ${anyDifferent(columns)})`;

/**
 * The first record of a range ($1 excluded, $2 included) whose table says otherwise, as `sequence`, `table`, `column`;
 * an empty column: the row is gone. Read in one go, because each text is taken apart once.
 */
export const FIRST_DIFFERENT = `
  with docs as materialized (
    select *, content::jsonb as doc from journal_record where sequence > $1 and sequence <= $2),
  parts as materialized (
    select d.firm_id, d.sequence, d.record_id, d.doc, l.list, a.part, a.ordinal, (a.part ->> 'id')::uuid as part_id
      from docs d, unnest(array['readings', 'statements', 'documents']) l(list),
        jsonb_array_elements(d.doc -> l.list) with ordinality a(part, ordinal)
      where d.type = 'group')
  select * from (
    select x.sequence, 'journal_record' as "table", ${firstDifferent(RECORD)} as "column"
      from docs x where ${anyDifferent(RECORD)}
    union all ${rowOf('entry_group', 'group', GROUP)}
    union all ${rowOf('entry', 'entry', ENTRY)}
    union all ${partsOf('reading', 'readings', READING, 'y.id = d.part_id')}
    union all ${partsOf('statement', 'statements', STATEMENT, 'y.group_id = d.record_id and y.ordinal = d.ordinal')}
    union all ${partsOf('group_document', 'documents', DOCUMENT, 'y.group_id = d.record_id and y.ordinal = d.ordinal')}
  ) different order by sequence limit 1`;

/** How many rows the texts of a range speak of, by table. */
export const ROWS_TOLD = `
  select count(*) filter (where type = 'group')::integer as entry_group,
      count(*) filter (where type = 'entry')::integer as entry,
      coalesce(sum(jsonb_array_length(doc -> 'readings')) filter (where type = 'group'), 0)::integer as reading,
      coalesce(sum(jsonb_array_length(doc -> 'statements')) filter (where type = 'group'), 0)::integer as statement,
      coalesce(sum(jsonb_array_length(doc -> 'documents')) filter (where type = 'group'), 0)::integer as group_document
    from (select type, case when type = 'group' then content::jsonb end as doc from journal_record
      where sequence > $1 and sequence <= $2) d`;
export const COUNTED_TABLES = ['entry_group', 'entry', 'reading', 'statement', 'group_document'] as const;

/** A row that stands in the log's tables and that no record speaks of: id, where the tables can tell. */
export const ROW_WITHOUT_RECORD: Record<(typeof COUNTED_TABLES)[number], string> = {
  entry_group: withoutRecord(
    'entry_group',
    'x.id',
    `j.sequence = x.sequence and j.type = 'group' and j.record_id = x.id`,
  ),
  entry: withoutRecord('entry', 'x.id', `j.sequence = x.sequence and j.type = 'entry' and j.record_id = x.id`),
  reading: withoutRecord(
    'reading',
    'x.id',
    `j.sequence = x.sequence and j.record_id = x.group_id and position(x.id::text in j.content) > 0`,
  ),
  statement: withoutRecord(
    'statement',
    'x.group_id',
    `j.record_id = x.group_id and jsonb_array_length(j.content::jsonb -> 'statements') >= x.ordinal`,
  ),
  group_document: withoutRecord(
    'group_document',
    'x.group_id',
    `j.record_id = x.group_id and jsonb_array_length(j.content::jsonb -> 'documents') >= x.ordinal`,
  ),
};
function withoutRecord(table: string, id: string, spoken: string): string {
  return `select ${id} as id from ${table} x
    where not exists (select from journal_record j where j.firm_id = x.firm_id and ${spoken}) limit 1`;
}

const ENDS = `(
  select from_place || coalesce(':' || from_id::text, ':' || from_as, '') as place_key, refrigerant, -mass_micrograms as mass
    from entry
  union all select to_place || coalesce(':' || to_id::text, ':' || to_as, ''), refrigerant, mass_micrograms from entry)`;

/** A balance that is not the sum of its entries: `place`, `refrigerant`. */
export const BALANCE_DIFFERS = `
  select place_key as place, refrigerant
    from (select place_key, refrigerant, sum(mass) as mass from ${ENDS} e group by 1, 2) fresh
    full join (select place_key, refrigerant, mass_micrograms from balance) kept using (place_key, refrigerant)
    where coalesce(fresh.mass, 0) <> coalesce(kept.mass_micrograms, 0) order by 1, 2 limit 1`;

/** A month's sum that is not the sum of its entries: the month and both kinds of place as `place`. */
export const MONTH_SUM_DIFFERS = `
  select concat_ws(' ', month, from_kind, to_kind) as place, refrigerant
    from (select booking_month::text as month, refrigerant::text as refrigerant,
          from_place || coalesce(':' || from_as, '') as from_kind, to_place || coalesce(':' || to_as, '') as to_kind,
          sum(mass_micrograms) as mass, count(*) as entries,
          coalesce(sum(mass_micrograms) filter (where reverses_entry_id is not null), 0) as reversals
        from entry group by 1, 2, 3, 4) fresh
    full join (select month::text as month, refrigerant::text as refrigerant, from_kind, to_kind, mass_micrograms, entry_count,
          reversal_micrograms from month_sum) kept using (month, refrigerant, from_kind, to_kind)
    where coalesce(fresh.mass, 0) <> coalesce(kept.mass_micrograms, 0)
      or coalesce(fresh.entries, 0) <> coalesce(kept.entry_count, 0)
      or coalesce(fresh.reversals, 0) <> coalesce(kept.reversal_micrograms, 0) order by 1, 2 limit 1`;

/** Words beside the records of a range whose salted hash is not theirs, or does not stand in their record. */
export const WORDS_DIFFER = `
  select j.sequence, t.field
    from journal_record j join personal_text t on t.firm_id = j.firm_id and t.record_id = j.record_id
    where j.sequence > $1 and j.sequence <= $2
      and (position('"' || t.field || 'Hash":"' || encode(t.hash, 'hex') || '"' in j.content) = 0
        or (t.content is not null and sha256(t.salt || convert_to(t.content, 'UTF8')) <> t.hash))
    order by 1 limit 1`;
