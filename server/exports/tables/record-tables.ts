import { Conditions } from '../../lists/list-query.ts';
import { siteAt } from '../../units/dated-site.ts';
import { instant, orderOf, type TableOf, typed } from './table.ts';

export const jobs: TableOf<'jobs'> = ({ sort, unitId, open }) => {
  const conditions = new Conditions().andIf('j.unit_id = $', unitId);
  if (open !== undefined) conditions.and(`j.closed_at is ${open ? '' : 'not '}null`);
  return {
    columns: [
      instant('openedAt', 'j.opened_at'),
      instant('closedAt', 'j.closed_at'),
      ['kind', 'j.kind'],
      typed('title', 'j.title'),
      typed('unit', 'u.tag'),
      typed('site', 's.name'),
      ['jobId', 'j.id'],
      ['unitId', 'j.unit_id'],
    ],
    from: `job j
      join unit u on u.firm_id = j.firm_id and u.id = j.unit_id
      join site s on s.firm_id = u.firm_id and s.id = ${siteAt('u.id', 'j.opened_at', 'u.site_id')}`,
    countFrom: 'job j join unit u on u.firm_id = j.firm_id and u.id = j.unit_id',
    conditions,
    order: orderOf(sort, ['j.opened_at', 'j.id']),
  };
};

/** The figures that a sheet ends in; how they were worked out stands on the sheet itself. */
export const chargeSheets: TableOf<'chargeSheets'> = ({ unitId }) => ({
  columns: [
    instant('madeAt', 'c.made_at'),
    typed('madeBy', 'p.name'),
    typed('unit', 'u.tag'),
    ['refrigerant', `c.request::jsonb ->> 'refrigerant'`],
    ['chargeKind', `c.request::jsonb ->> 'kind'`],
    ['extraG', `(c.result::jsonb ->> 'extraG')::numeric`, 'number'],
    ['totalG', `(c.result::jsonb ->> 'totalG')::numeric`, 'number'],
    ['weighInG', `(c.result::jsonb ->> 'weighInG')::numeric`, 'number'],
    ['recoverG', `(c.result::jsonb ->> 'recoverG')::numeric`, 'number'],
    typed('manualDocument', 'c.manual_document'),
    typed('manualPage', 'c.manual_page'),
    ['chargeSheetId', 'c.id'],
    ['jobId', 'c.job_id'],
    ['unitId', 'c.unit_id'],
  ],
  from: `charge_sheet c
    join unit u on u.firm_id = c.firm_id and u.id = c.unit_id
    left join person p on p.id = c.made_by`,
  countFrom: 'charge_sheet c join unit u on u.firm_id = c.firm_id and u.id = c.unit_id',
  conditions: new Conditions().andIf('c.unit_id = $', unitId),
  order: 'c.made_at desc, c.id desc',
});

/** Each record as it is chained, with its hashes. Words beside the records are in none of them. */
export const journal: TableOf<'journal'> = ({ type }) => ({
  columns: [
    ['sequence', 'j.sequence', 'number'],
    ['recordType', 'j.type'],
    instant('recordedAt', 'j.recorded_at'),
    typed('recordedBy', 'p.name'),
    ['register', 'j.noun'],
    ['version', 'j.version', 'number'],
    ['content', 'j.content'],
    ['contentHash', `encode(j.content_hash, 'hex')`],
    ['hash', `encode(j.hash, 'hex')`],
    ['recordId', 'j.record_id'],
    ['subjectId', 'j.subject_id'],
  ],
  from: 'journal_record j left join person p on p.id = j.recorded_by',
  countFrom: 'journal_record j',
  conditions: new Conditions().andIf('j.type = $', type),
  order: 'j.sequence desc',
});

/** Months that were signed off. */
export const periods: TableOf<'periods'> = () => ({
  columns: [
    ['month', 'd.month'],
    instant('signedOffAt', 'd.closed_at'),
    typed('signedOffBy', 'p.name'),
    [
      'entryCount',
      '(select coalesce(sum(m.entry_count), 0) from month_sum m where m.firm_id = d.firm_id and m.month = d.month)',
      'number',
    ],
    ['sequence', 'd.record_sequence', 'number'],
    ['periodId', 'd.id'],
  ],
  from: 'period d left join person p on p.id = d.closed_by',
  countFrom: 'period d',
  conditions: new Conditions(),
  order: 'd.month desc',
});
