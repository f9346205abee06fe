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

  paper.heading(words.say('disposal.units'));
  if (recovered.length === 0) paper.paragraph(words.say('disposal.noUnits'));
  else
    paper.table(
      [
        { head: words.say('col.when'), width: 17 },
        { head: words.say('unit.tag'), width: 13 },
        { head: words.say('unit.site'), width: 30 },
        { head: words.say('col.refrigerant'), width: 11 },
        { head: words.say('disposal.full', { unit: words.massUnit }), width: 13, align: 'right' },
        mass,
        { head: words.say('disposal.inScope'), width: 9 },
        { head: words.say('col.by'), width: 14 },
      ],
      recovered.map((row) => ({
        cells: [
          words.instant(row.at, row.timeZone),
          row.unit,
          row.place,
          row.refrigerant,
          row.full === null ? words.say('unit.notDetermined') : figure(row.full),
          figure(row.mass),
          row.full === null ? '?' : words.say(isInScope(BigInt(row.full)) ? 'yes' : 'no'),
          row.name ?? '',
        ],
      })),
    );

  paper.heading(words.say('disposal.months'));
  const months = new Map<string, bigint>();
  for (const { month, refrigerant, mass: taken } of recovered) {
    const key = `${month} ${refrigerant}`;
    months.set(key, (months.get(key) ?? 0n) + BigInt(taken));
  }
  if (months.size === 0) paper.paragraph(words.say('disposal.noUnits'));
  else
    paper.table(
      [
        { head: words.say('col.month'), width: 30 },
        { head: words.say('col.refrigerant'), width: 30 },
        { ...mass, width: 20 },
      ],
      [...months]
        .sort(([a], [b]) => (a < b ? -1 : 1))
        .map(([key, sum]) => {
          const [month = '', refrigerant = ''] = key.split(' ');
          return { cells: [words.month(month), refrigerant, figure(sum)] };
        }),
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
  paper.space(8);
  paper.paragraph(words.say('disposal.note'), { size: 8 });
  await paper.end();
  return recovered.length + shipped.length;
}

/** Above 5 and below 50 lb of full charge: 40 CFR 82.156(a)(3). */
const isInScope = (full: bigint): boolean => full > 5n * MICROGRAMS_A_POUND && full < 50n * MICROGRAMS_A_POUND;

const readRecovered = ({ manager }: DocumentFrame, from: string, to: string): Promise<Recovered[]> =>
  manager.query<Recovered[]>(
    `select e.occurred_at as at, coalesce(s.time_zone, f.time_zone) as "timeZone",
        to_char(g.regulatory_day, 'YYYY-MM') as month, u.tag || ', ' || u.name as unit,
        concat_ws(', ', s.name, nullif(array_to_string(s.address_lines, ', '), '')) as place, e.refrigerant,
        e.mass_micrograms::text as mass, fc.mass_micrograms::text as "full", p.name
      from entry e
      join entry_group g on g.firm_id = e.firm_id and g.id = e.group_id
      join firm f on f.id = e.firm_id
      join unit u on u.firm_id = e.firm_id and u.id = e.from_id
      left join site s on s.firm_id = e.firm_id and s.id = coalesce(${siteThen('e')}, u.site_id)
      left join person p on p.id = e.recorded_by
      left join lateral (select mass_micrograms from unit_full_charge c where c.firm_id = u.firm_id and c.unit_id = u.id
        and c.refrigerant = e.refrigerant and c.valid_from <= e.occurred_at order by c.valid_from desc, c.id desc limit 1) fc on true
      where e.from_place = 'unit' and e.to_place = 'cylinder' and e.kind = 'recovery' and ${STANDING}
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
