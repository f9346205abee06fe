import type { EntryRow } from '../../shared/entries/entry.schema.ts';
import type { TableColumn, TableRow } from './paper.ts';
import type { Words } from './words.ts';

/** Columns of a list of entries; what was typed stands beside the mass, because prints show it. */
export const entryColumns = (words: Words): TableColumn[] => [
  { head: words.say('col.no'), width: 7, align: 'right' },
  { head: words.say('col.when'), width: 21 },
  { head: words.say('col.what'), width: 14 },
  { head: words.say('col.fromTo'), width: 21 },
  { head: words.say('col.refrigerant'), width: 10 },
  { head: words.say('col.mass', { unit: words.massUnit }), width: 9, align: 'right' },
  { head: words.say('col.typed'), width: 10, align: 'right' },
  { head: words.say('col.by'), width: 12 },
];

export function entryTableRow(words: Words, entry: EntryRow): TableRow {
  const isCancelled = entry.reversedByGroupId !== null || entry.reversesGroupId !== null;
  const marks = [
    ...(entry.reversedByGroupId ? [words.say('mark.reversed')] : []),
    ...(entry.reversesGroupId ? [words.say('mark.reversal')] : []),
    ...(entry.addedByServer && !entry.reversesGroupId ? [words.log('mark.byServer')] : []),
    ...(entry.atLeast ? [words.log('mark.atLeast')] : []),
    ...(entry.late ? [words.log('mark.late').replace('{{month}}', entry.bookingMonth)] : []),
  ];
  return {
    struck: isCancelled,
    cells: [
      String(entry.sequence),
      words.instant(entry.occurredAt, entry.timeZone),
      [words.log(`kind.${entry.kind}`), ...marks].join(', '),
      `${words.place(entry.from)} → ${words.place(entry.to)}`,
      entry.refrigerant,
      words.massFigure(entry.massG),
      entry.typed ? `${entry.typed.value} ${entry.typed.unit}` : '',
      entry.recordedByName,
    ],
  };
}
