import type { FiltersOf } from '../../shared/exports/export.schema.ts';
import type { CylinderStatement, StatementLine } from '../../shared/statements/cylinder-statement.schema.ts';
import { Problem } from '../http/problem.ts';
import { getStatement } from '../statements/cylinder-statement.service.ts';
import { type DocumentFrame, openPaper } from './document-frame.ts';
import type { TableRow } from './paper.ts';

/** Like a bank's: what the book said, what moved, what the scale said, and whether the scales explain the difference. */
export async function cylinderStatementPaper(
  frame: DocumentFrame,
  { cylinderId, from, to }: FiltersOf<'cylinderStatement'>,
): Promise<number | null> {
  const statement = await findStatement(frame, cylinderId, from, to);
  if (!statement) return null;
  const { words } = frame;
  const { cylinder, timeZone, difference } = statement;
  const subject = words.say('statement.subject', {
    tag: cylinder.tag,
    refrigerant: cylinder.refrigerant,
    from: words.day(statement.from),
    to: words.day(statement.to),
  });
  const paper = await openPaper(frame, {
    title: words.say('statement.title'),
    subject,
    link: `/cylinders/${cylinderId}`,
  });
  paper.facts(
    [
      [words.say('statement.opening'), words.mass(statement.openingG)],
      [words.say('statement.opened'), words.mass(statement.openedG)],
      [words.say('statement.cameIn'), words.mass(statement.cameInG)],
      [words.say('statement.wentOut'), words.mass(statement.wentOutG)],
      [words.say('statement.differences'), words.mass(statement.differencesG)],
      [words.say('statement.closing'), words.mass(statement.closingG)],
      [words.say('statement.tare'), words.mass(cylinder.tareG)],
      [words.say('statement.heldBy'), cylinder.heldByName ?? words.say('statement.nobody')],
      [
        words.say('statement.lastReading'),
        statement.lastReading
          ? `${words.mass(statement.lastReading.grossG)}, ${words.instant(statement.lastReading.at, timeZone)}`
          : words.say('statement.notWeighed'),
      ],
    ],
    4,
  );
  paper.heading(words.say('statement.verdict'));
  paper.paragraph(
    difference
      ? words.say(`statement.is.${difference.verdict}`, {
          difference: String(words.mass(difference.differenceG)),
          twoU: String(words.mass(difference.twoUG)),
          readings: difference.independentReadings,
          shared: difference.sharedReadings,
        })
      : words.say('statement.is.none'),
    { face: 'strong', size: 10 },
  );
  paper.heading(words.say('statement.lines'));
  if (statement.lines.length === 0) paper.paragraph(words.say('statement.noLines'));
  else
    paper.table(
      [
        { head: words.say('col.when'), width: 21 },
        { head: words.say('col.what'), width: 24 },
        { head: words.say('col.otherEnd'), width: 22 },
        { head: words.say('col.mass', { unit: words.massUnit }), width: 11, align: 'right' },
        { head: words.say('col.balance', { unit: words.massUnit }), width: 12, align: 'right' },
        { head: words.say('col.by'), width: 14 },
      ],
      statement.lines.map((line) => lineRow(frame, line, timeZone)),
    );
  if (statement.differences.length > 0) {
    paper.heading(words.say('statement.heldBetween'));
    for (const { at, differenceG, verdict, heldBetween } of statement.differences)
      paper.paragraph(
        `${words.instant(at, timeZone)}: ${words.mass(differenceG)}, ${words.say(`verdict.${verdict}`)}; ${heldBetween
          .map(({ name, van }) => [name ?? words.say('statement.nobody'), van].filter(Boolean).join(', '))
          .join(' / ')}`,
      );
  }
  await paper.end();
  return statement.lines.length;
}

async function findStatement(
  { parts, actor }: DocumentFrame,
  cylinderId: string,
  from: string,
  to: string,
): Promise<CylinderStatement | null> {
  try {
    return await getStatement(parts, actor, cylinderId, { from, to });
  } catch (error) {
    if (error instanceof Problem && error.status === 404) return null;
    throw error;
  }
}

function lineRow({ words }: DocumentFrame, line: StatementLine, timeZone: string): TableRow {
  if (line.line === 'entry')
    return {
      struck: line.cancelled,
      cells: [
        words.instant(line.at, timeZone),
        [
          words.log(`kind.${line.kind}`),
          ...(line.cancelled ? [words.say('mark.cancelled')] : []),
          ...(line.addedByServer ? [words.log('mark.byServer')] : []),
        ].join(', '),
        words.place(line.counter),
        words.massFigure(line.massG),
        words.massFigure(line.balanceG),
        line.recordedByName,
      ],
    };
  const judged = line.verdict && line.differenceG !== null ? `, ${words.say(`verdict.${line.verdict}`)}` : '';
  return {
    struck: line.cancelled,
    strong: true,
    cells: [
      words.instant(line.at, timeZone),
      `${words.say('statement.reading', { value: line.value, unit: line.unit })}${judged}`,
      line.toolName ?? words.say('noScale'),
      line.differenceG === null ? '' : words.massFigure(line.differenceG),
      line.contentG === null ? '' : words.massFigure(line.contentG),
      line.recordedByName,
    ],
  };
}
