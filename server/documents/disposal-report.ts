import type { FiltersOf } from '../../shared/exports/export.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { siteThen } from '../units/dated-site.ts';
import { type DocumentFrame, openPaper } from './document-frame.ts';

const MICROGRAMS_A_POUND = 453_592_370n;

interface Recovered {
  at: Date;
  timeZone: string;
  month: string;
  unit: string;
  place: string;
  refrigerant: string;
  mass: string;
  full: string | null;
  name: string | null;
  /** Of a job that takes the unit out of service. */
  disposed: boolean;
}
interface Shipped {
  at: Date;
  refrigerant: string;
  mass: string;
  place: 'reclaimer' | 'destroyed';
  party: string | null;
  documents: string | null;
}

/** Neither reversed nor a reversal, and nothing that was corrected for a reversed group. */
const STANDING = `e.reverses_entry_id is null and not exists (select from entry_group x
  where x.firm_id = e.firm_id and x.reverses_group_id = coalesce(e.corrects_group_id, e.group_id))`;

/**
 * What the contractor keeps of units that are taken out of service: 40 CFR 82.156(a)(3). Each unit with place, date and
 * type; each calendar month's quantity by type; each shipment's quantity by type, to whom, when. By the day at the site.
 * That a unit is disposed of is said by the kind of its job; recoveries of no such job stand apart, so that none is missed.
 */
export async function disposalReport(
  frame: DocumentFrame,
  { from, to }: FiltersOf<'disposalReport'>,
): Promise<number | null> {
  const { words, firm } = frame;
  const recovered = await readRecovered(frame, from, to);
  const shipped = await readShipped(frame, from, to);
  const subject = from === to ? words.month(from) : `${words.month(from)} – ${words.month(to)}`;
  const paper = await openPaper(frame, { title: words.say('disposal.title'), subject, link: null });
  paper.facts([[words.say('disposal.company'), firm.name]]);
  const mass = { head: words.say('col.mass', { unit: words.massUnit }), width: 12, align: 'right' } as const;
  const figure = (micrograms: string | bigint) => words.massFigure(gramsOfMicrograms(BigInt(micrograms)));

  const disposed = recovered.filter((row) => row.disposed);
  const others = recovered.filter((row) => !row.disposed);
  const list = (rows: readonly Recovered[]) =>
    paper.table(
      [
        { head: words.say('col.when'), width: 23 },
        { head: words.say('unit.tag'), width: 19 },
        { head: words.say('unit.site'), width: 24 },
        { head: words.say('col.refrigerant'), width: 11 },
        { head: words.say('disposal.full', { unit: words.massUnit }), width: 13, align: 'right' },
        mass,
        { head: words.say('disposal.inScope'), width: 9 },
        { head: words.say('col.by'), width: 14 },
      ],
      rows.map((row) => ({
        cells: [
          words.instant(row.at, row.timeZone),
          row.unit,
          row.place,
          row.refrigerant,
          row.full === null ? words.say('unit.notDetermined') : figure(row.full),
          figure(row.mass),
          words.say(row.full === null ? 'disposal.ask' : isInScope(BigInt(row.full)) ? 'yes' : 'no'),
          row.name ?? '',
        ],
      })),
    );
  paper.heading(words.say('disposal.units'));
  if (disposed.length === 0) paper.paragraph(words.say('disposal.noUnits'));
  else list(disposed);

  paper.heading(words.say('disposal.months'));
  const months = sumsByMonth(recovered);
  if (months.length === 0) paper.paragraph(words.say('disposal.nothing'));
  else
    paper.table(
      [
        { head: words.say('col.month'), width: 24 },
        { head: words.say('col.refrigerant'), width: 20 },
        { head: words.say('disposal.asked', { unit: words.massUnit }), width: 28, align: 'right' },
        { head: words.say('disposal.rest', { unit: words.massUnit }), width: 28, align: 'right' },
      ],
      months.map(({ month, refrigerant, asked, rest }) => ({
        cells: [words.month(month), refrigerant, figure(asked), figure(rest)],
      })),
    );

  paper.heading(words.say('disposal.shipments'));
  if (shipped.length === 0) paper.paragraph(words.say('disposal.noShipments'));
  else
    paper.table(
      [
        { head: words.say('col.when'), width: 18 },
        { head: words.say('disposal.purpose'), width: 16 },
        { head: words.say('disposal.toWhom'), width: 26 },
        { head: words.say('col.refrigerant'), width: 12 },
        mass,
        { head: words.say('disposal.papers'), width: 22 },
      ],
      shipped.map((row) => ({
        cells: [
          words.instant(row.at, firm.timeZone),
          words.say(`disposal.${row.place}`),
          row.party ?? '',
          row.refrigerant,
          figure(row.mass),
          row.documents ?? '',
        ],
      })),
    );
  if (others.length > 0) {
    paper.heading(words.say('disposal.others'));
    paper.paragraph(words.say('disposal.othersLead'), { size: 8.5 });
    list(others);
  }
  paper.space(8);
  paper.paragraph(words.say('disposal.note'), { size: 8 });
  await paper.end();
  return recovered.length + shipped.length;
}

/** Above 5 and below 50 lb of full charge: 40 CFR 82.156(a)(3). */
const isInScope = (full: bigint): boolean => full > 5n * MICROGRAMS_A_POUND && full < 50n * MICROGRAMS_A_POUND;

/** The law asks for it, or may: where nobody determined the full charge, leaving it out could be wrong. */
const isAsked = ({ disposed, full }: Recovered): boolean => disposed && (full === null || isInScope(BigInt(full)));

interface MonthSum {
  month: string;
  refrigerant: string;
  asked: bigint;
  rest: bigint;
}

function sumsByMonth(recovered: readonly Recovered[]): MonthSum[] {
  const sums = new Map<string, MonthSum>();
  for (const row of recovered) {
    const { month, refrigerant } = row;
    const key = `${month} ${refrigerant}`;
    const sum = sums.get(key) ?? { month, refrigerant, asked: 0n, rest: 0n };
    sum[isAsked(row) ? 'asked' : 'rest'] += BigInt(row.mass);
    sums.set(key, sum);
  }
  return [...sums].sort(([a], [b]) => (a < b ? -1 : 1)).map(([, sum]) => sum);
}

const readRecovered = ({ manager }: DocumentFrame, from: string, to: string): Promise<Recovered[]> =>
  manager.query<Recovered[]>(
    `select e.occurred_at as at, coalesce(s.time_zone, f.time_zone) as "timeZone",
        to_char(g.regulatory_day, 'YYYY-MM') as month, u.tag || ', ' || u.name as unit,
        concat_ws(', ', s.name, nullif(array_to_string(s.address_lines, ', '), '')) as place, e.refrigerant,
        e.mass_micrograms::text as mass, fc.mass_micrograms::text as "full", p.name,
        coalesce(j.kind = 'decommission', false) as disposed
      from entry e
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      join firm f on f.id = e.firm_id
      join unit u on u.firm_id = e.firm_id and u.id = e.from_id
      left join job j on j.firm_id = g.firm_id and j.id = g.job_id
      left join site s on s.firm_id = e.firm_id and s.id = coalesce(${siteThen('e')}, u.site_id)
      left join person p on p.id = e.recorded_by
      left join lateral (select mass_micrograms from unit_full_charge c where c.firm_id = u.firm_id and c.unit_id = u.id
        and c.refrigerant = e.refrigerant and c.valid_from <= e.occurred_at order by c.valid_from desc, c.id desc limit 1) fc on true
      where e.from_place = 'unit' and e.to_place = 'cylinder' and (e.kind = 'recovery' or j.kind = 'decommission') and ${STANDING}
        and to_char(g.regulatory_day, 'YYYY-MM') between $1 and $2
      order by e.occurred_at, e.sequence`,
    [from, to],
  );

const readShipped = ({ manager }: DocumentFrame, from: string, to: string): Promise<Shipped[]> =>
  manager.query<Shipped[]>(
    `select e.occurred_at as at, e.refrigerant, e.mass_micrograms::text as mass, e.to_place as place, y.name as party,
        (select string_agg(concat_ws(' ', d.number, d.dated), '; ') from group_document d
          where d.firm_id = e.firm_id and d.group_id = e.group_id) as documents
      from entry e
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      left join party y on y.firm_id = e.firm_id and y.id = e.to_id
      where e.from_place = 'cylinder' and e.to_place in ('reclaimer', 'destroyed') and ${STANDING}
        and to_char(g.regulatory_day, 'YYYY-MM') between $1 and $2
      order by e.occurred_at, e.sequence`,
    [from, to],
  );
