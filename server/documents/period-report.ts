import { type BookKind, balancesOf, type Flow, flowsOf, isDifference } from '../../shared/books/flows.ts';
import type { FiltersOf } from '../../shared/exports/export.schema.ts';
import { gramsOfMicrograms } from '../../shared/units/mass.ts';
import { readPeriodSums } from '../books/month-sum.repository.ts';
import { getEmissions } from '../emissions/emission.service.ts';
import { type DocumentFrame, openPaper } from './document-frame.ts';

/** The books of some months: for each refrigerant what was on hand, what moved, where to, and what nobody can explain. */
export async function periodReport(
  frame: DocumentFrame,
  { from, to }: FiltersOf<'periodReport'>,
): Promise<number | null> {
  const { words, manager, parts, actor, firm } = frame;
  const emissions = await getEmissions(parts, actor, { from, to, by: 'refrigerant' });
  const books = await readBooks(frame, { from, to });
  const closed = await manager.query<{ month: string; closedAt: Date; name: string | null }[]>(
    `select p.month, p.closed_at as "closedAt", n.name from period p left join person n on n.id = p.closed_by
       where p.month between $1 and $2 order by p.month`,
    [from, to],
  );
  const subject = from === to ? words.month(from) : `${words.month(from)} – ${words.month(to)}`;
  const paper = await openPaper(frame, { title: words.say('period.title'), subject, link: null });
  if (closed.length === 0) paper.paragraph(words.say('period.notClosed'));
  for (const { month, closedAt, name } of closed)
    paper.paragraph(
      words.say('period.closed', {
        month: words.month(month),
        at: words.instant(closedAt, firm.timeZone),
        by: name ?? '',
      }),
    );
  if (books.length === 0) paper.paragraph(words.say('period.nothing'));
  let lines = 0;
  for (const { refrigerant, ...sums } of books) {
    const flows = flowsOf(sums.during);
    const [before, after] = [balancesOf(sums.before), balancesOf([...sums.before, ...sums.during])];
    const emitted = emissions.lines.find((line) => line.refrigerant === refrigerant);
    const gwp = emitted?.gwp ?? null;
    const tonnes = (co2eT: number | null | undefined) =>
      gwp === null ? words.say('unit.noGwp') : `${words.number(co2eT ?? 0, 3)} t`;
    const unexplained =
      gramsOf(flows.filter(({ toKind }) => isDifference(toKind))) -
      gramsOf(flows.filter(({ fromKind }) => isDifference(fromKind)));
    const held = (balances: Map<BookKind, bigint>, kind: BookKind) =>
      words.mass(gramsOfMicrograms(balances.get(kind) ?? 0n));
    paper.heading(refrigerant);
    paper.facts(
      [
        [words.say('period.cylindersBefore'), held(before, 'cylinder')],
        [words.say('period.cylindersAfter'), held(after, 'cylinder')],
        [words.say('period.unitsBefore'), held(before, 'unit')],
        [words.say('period.unitsAfter'), held(after, 'unit')],
        [words.say('period.emitted'), words.mass(emitted?.totalG ?? 0)],
        ...(emitted ? [[words.say('period.co2e', { set: firm.gwpSet }), tonnes(emitted.co2eT)] as const] : []),
        ...(emitted?.atLeastG ? [[words.say('period.atLeast'), words.mass(emitted.atLeastG)] as const] : []),
        ...(emitted?.beforeOurCareG
          ? [
              [
                words.say('period.beforeOurCare'),
                `${words.mass(emitted.beforeOurCareG)}, ${tonnes(emitted.beforeOurCareCo2eT)}`,
              ] as const,
            ]
          : []),
        [words.say('period.unexplained'), words.mass(unexplained)],
      ],
      4,
    );
    const bySize = [...flows].sort(
      (a, b) => Number(isOdd(b)) - Number(isOdd(a)) || (a.massMicrograms < b.massMicrograms ? 1 : -1),
    );
    // Only stood there: nothing of it moved.
    if (flows.length === 0) continue;
    paper.table(
      [
        { head: words.say('col.from'), width: 28 },
        { head: words.say('col.to'), width: 28 },
        { head: words.say('col.mass', { unit: words.massUnit }), width: 16, align: 'right' },
        { head: words.say('col.entries'), width: 12, align: 'right' },
      ],
      bySize.map((flow) => ({
        strong: isOdd(flow),
        cells: [
          placeOf(frame, flow.fromKind),
          placeOf(frame, flow.toKind),
          words.massFigure(gramsOfMicrograms(flow.massMicrograms)),
          String(flow.entryCount),
        ],
      })),
    );
    lines += flows.length;
  }
  paper.space(8);
  paper.paragraph(words.say('period.note'), { size: 8 });
  await paper.end();
  return lines;
}

/** The books of each refrigerant that anything was posted of until the end of the months, in their order of name. */
async function readBooks({ manager }: DocumentFrame, period: { from: string; to: string }) {
  const { refrigerants } = await readPeriodSums(manager, period);
  const books = [];
  for (const refrigerant of refrigerants.sort()) {
    const { before, during } = await readPeriodSums(manager, { ...period, refrigerant });
    if (before.length + during.length > 0) books.push({ refrigerant, before, during });
  }
  return books;
}

/** What is looked at first. */
const isOdd = ({ fromKind, toKind }: Flow) => isDifference(fromKind) || isDifference(toKind);
const gramsOf = (flows: readonly Flow[]): number =>
  gramsOfMicrograms(flows.reduce((sum, { massMicrograms }) => sum + massMicrograms, 0n));
const placeOf = ({ words }: DocumentFrame, kind: BookKind): string => words.log(`place.${kind.replace(':', '.')}`);
