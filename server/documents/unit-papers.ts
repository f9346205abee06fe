import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import type { Unit } from '../../shared/unit-register/unit.schema.ts';
import { entryListRepository } from '../entries/entry-list.repository.ts';
import { Problem } from '../http/problem.ts';
import { getUnit } from '../units/unit.service.ts';
import { type DocumentFrame, openPaper } from './document-frame.ts';
import { entryColumns, entryTableRow } from './entry-rows.ts';
import type { Paper } from './paper.ts';
import { factoryChargeG, findGwp, isFluorinatedGas, tonnesOfUnit } from './unit-figures.ts';

const PAGE = 200;

/** Null where there is none that the reader may see. */
export async function findUnit({ parts, actor }: DocumentFrame, unitId: string): Promise<Unit | null> {
  try {
    return await getUnit(parts, actor, unitId);
  } catch (error) {
    if (error instanceof Problem && error.status === 404) return null;
    throw error;
  }
}

export async function unitEntries({ manager, actor }: DocumentFrame, unitId: string): Promise<EntryRow[]> {
  const list = entryListRepository(manager, actor.locale);
  const entries: EntryRow[] = [];
  let cursor: string | undefined;
  do {
    const page = await list.list({ unitId, sort: 'occurredAt', limit: PAGE, cursor });
    entries.push(...page.items);
    cursor = page.nextCursor ?? undefined;
  } while (cursor !== undefined);
  return entries;
}

interface SiteWords {
  name: string;
  address: string | null;
  jurisdiction: 'US' | 'EU';
  timeZone: string;
}

export async function siteOf({ manager }: DocumentFrame, siteId: string): Promise<SiteWords | undefined> {
  const [site] = await manager.query<SiteWords[]>(
    `select name, nullif(array_to_string(address_lines, ', '), '') as address, jurisdiction, time_zone as "timeZone"
       from site where id = $1`,
    [siteId],
  );
  return site;
}

/** Where it stands and what it is: the fields that a record of a unit has to name. */
export function unitFacts(frame: DocumentFrame, paper: Paper, unit: Unit, site: SiteWords | undefined): void {
  const { words, parts } = frame;
  const serials = unit.serials.map(
    ({ part, serial, model }) => `${words.say(`part.${part}`)} ${model ?? ''} ${serial}`,
  );
  const co2e = tonnesOfUnit(parts.reference, unit, frame.firm.gwpSet);
  paper.facts([
    [words.say('unit.tag'), `${unit.tag}, ${unit.name}`],
    [words.say('unit.customer'), unit.customerName],
    [words.say('unit.site'), [site?.name, site?.address].filter(Boolean).join(', ')],
    [words.say('unit.kind'), words.say(`kind.${unit.applianceKind}`)],
    [words.say('unit.refrigerant'), unit.refrigerant],
    [
      words.say('unit.fullCharge'),
      unit.fullCharge
        ? `${words.mass(unit.fullCharge.massG)} (${words.say(`method.${unit.fullCharge.method}`)})`
        : words.say('unit.notDetermined'),
    ],
    [words.say('unit.book'), unit.book.known ? words.mass(unit.book.massG) : words.say('unit.bookNotKnown')],
    [
      words.say('unit.co2e'),
      co2e === null ? words.say('unit.noGwp') : `${words.number(co2e, 2)} t (${frame.firm.gwpSet})`,
    ],
    [words.say('unit.installedOn'), unit.installedOn ? words.day(unit.installedOn) : null],
    [words.say('unit.serials'), serials.length > 0 ? serials.join('; ').replaceAll(/ +/g, ' ') : null],
  ]);
}

/** Everything that was ever put into the unit and taken out, by the time it happened. */
export async function unitLog(frame: DocumentFrame, unitId: string): Promise<number | null> {
  const unit = await findUnit(frame, unitId);
  if (!unit) return null;
  const { words } = frame;
  const entries = await unitEntries(frame, unitId);
  const site = await siteOf(frame, unit.siteId);
  const subject = `${unit.tag}, ${unit.name}, ${unit.siteName}`;
  const paper = await openPaper(frame, { title: words.say('unitLog.title'), subject, link: `/units/${unitId}` });
  unitFacts(frame, paper, unit, site);
  paper.heading(words.say('unitLog.entries'));
  if (entries.length === 0) paper.paragraph(words.say('unitLog.none'));
  else
    paper.table(
      entryColumns(words),
      entries.map((entry) => entryTableRow(words, entry)),
    );
  paper.space(8);
  paper.paragraph(words.say('unitLog.note'), { size: 8 });
  await paper.end();
  return entries.length;
}

/**
 * What stands on the machine once it is charged: Regulation (EU) 2024/573, Article 12(3), and Implementing Regulation (EU)
 * 2024/2174, Article 1(4) and (5): text, gas, factory charge, added on site, total, GWP, CO2 equivalent. What the log
 * does not know stays a line to write on.
 */
export async function chargeLabel(frame: DocumentFrame, unitId: string): Promise<number | null> {
  const unit = await findUnit(frame, unitId);
  if (!unit) return null;
  const { words, parts, firm } = frame;
  const entries = (await unitEntries(frame, unitId)).filter(
    ({ reversedByGroupId, reversesGroupId }) => !reversedByGroupId && !reversesGroupId,
  );
  const site = await siteOf(frame, unit.siteId);
  const factoryG = factoryChargeG(entries, unit);
  const totalG = unit.book.known ? unit.book.massG : null;
  const addedG = factoryG !== null && totalG !== null ? Math.max(0, totalG - factoryG) : null;
  const last = entries.findLast(({ to, addedByServer }) => to.id === unitId && !addedByServer);
  // The label's GWP is that of Regulation (EU) 2024/573 where the machine stands under it.
  const gwpSet = site?.jurisdiction === 'EU' ? 'EU-2024-573' : firm.gwpSet;
  const found = findGwp(parts.reference, unit.refrigerant, gwpSet);
  const gwp = found?.value ?? null;
  const kilograms = (massG: number | null) => (massG === null ? null : `${words.number(massG / 1000, 3)} kg`);
  const subject = `${unit.tag}, ${unit.name}, ${unit.siteName}`;
  const paper = await openPaper(frame, { title: words.say('label.title'), subject, link: `/units/${unitId}` });
  const [top, inset] = [paper.y, 16];
  paper.y += inset;
  const at = (indent: number) => paper.left + inset + indent;
  const isFluorinated = isFluorinatedGas(parts.reference, unit.refrigerant);
  paper.line(words.say(isFluorinated ? 'label.contains' : 'label.charged'), at(0), paper.y, {
    face: 'strong',
    size: 13,
  });
  paper.y += 26;
  paper.line(unit.refrigerant, at(0), paper.y, { face: 'wide', size: 34 });
  paper.y += 54;
  const rows: [string, string | null][] = [
    [words.say('label.factory'), kilograms(factoryG)],
    [words.say('label.added'), kilograms(addedG)],
    [words.say('label.total'), kilograms(totalG)],
  ];
  for (const [name, value] of rows) {
    const isTotal = name === rows.at(-1)?.[0];
    paper.line(name, at(0), paper.y + (isTotal ? 8 : 0), { size: 12 });
    const right = paper.left + paper.width - inset;
    if (value) paper.line(value, right, paper.y, { face: 'wide', size: isTotal ? 24 : 15, align: 'right' });
    else paper.line('______________ kg', right, paper.y, { size: 15, align: 'right' });
    paper.y += isTotal ? 38 : 24;
  }
  const tonnes = gwp !== null && totalG !== null ? `${words.number((totalG * gwp) / 1e6, 3)} t` : null;
  paper.line(`GWP  ${gwp === null ? '________' : words.number(gwp, gwp % 1 === 0 ? 0 : 1)}`, at(0), paper.y, {
    face: 'strong',
    size: 13,
  });
  paper.line(`CO₂e  ${tonnes ?? '________ t'}`, at(170), paper.y, { face: 'strong', size: 13 });
  paper.y += 24;
  const gwpNote = found?.isFromMemory ? 'label.gwpFromMemory' : 'label.gwpSet';
  paper.line(words.say(gwpNote, { set: gwpSet }), at(0), paper.y, { size: 9 });
  paper.y += 20;
  paper.line(
    `${words.say('label.date')}  ${last ? words.instantDay(last.occurredAt, last.timeZone) : '______________'}      ${words.say('label.by')}  ${last?.recordedByName || '______________'}`,
    at(0),
    paper.y,
    { size: 11 },
  );
  paper.y += 22;
  paper.line(`${firm.name}      ${words.say('label.unit')} ${unit.tag}`, at(0), paper.y, { size: 11 });
  paper.y += 18 + inset;
  paper.box(paper.left, top, paper.width, paper.y - top, 2);
  paper.space(12);
  paper.paragraph(words.say('label.note'), { size: 8 });
  await paper.end();
  return 1;
}
