import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';

/** The ends of a group's own numbers, those that the server added left out where there are others. */
export interface GroupNumbers {
  first: number;
  last: number;
}

/** Numbers of every group that has arrived, for "reverses 8,861". */
export function numbersByGroup(rows: readonly EntryRow[]): ReadonlyMap<string, GroupNumbers> {
  const numbers = new Map<string, GroupNumbers & { added: boolean }>();
  for (const row of rows) {
    const before = numbers.get(row.groupId);
    if (!before || (before.added && !row.addedByServer)) {
      numbers.set(row.groupId, { first: row.sequence, last: row.sequence, added: row.addedByServer });
    } else if (before.added === row.addedByServer) {
      before.first = Math.min(before.first, row.sequence);
      before.last = Math.max(before.last, row.sequence);
    }
  }
  return numbers;
}

/** What a list needs to tie rows together: numbers of groups, and which group is right instead of which. */
export interface Ties {
  numbers: ReadonlyMap<string, GroupNumbers>;
  /** By the group that corrects: the one that it stands in for. */
  corrects: ReadonlyMap<string, string>;
}

/** Groups whose view has to be asked for: originals of reversals, and reversals further away than what has arrived. */
export function groupsToAskFor(rows: readonly EntryRow[]): string[] {
  const here = new Set(rows.map(({ groupId }) => groupId));
  const ids = new Set<string>();
  for (const { groupId, reversedByGroupId, reversesGroupId } of rows) {
    if (reversedByGroupId !== null) {
      ids.add(groupId);
      if (!here.has(reversedByGroupId)) ids.add(reversedByGroupId);
    }
    if (reversesGroupId !== null) ids.add(reversesGroupId);
  }
  return [...ids];
}

export function tiesOf(rows: readonly EntryRow[], asked: readonly GroupView[]): Ties {
  const here = new Set(rows.map(({ groupId }) => groupId));
  const elsewhere = asked.filter(({ id }) => !here.has(id)).flatMap(({ entries }) => entries);
  const corrects = new Map<string, string>();
  for (const { id, replacedByGroupId } of asked) if (replacedByGroupId) corrects.set(replacedByGroupId, id);
  return { numbers: numbersByGroup([...rows, ...elsewhere]), corrects };
}

/** The entry of the reversed group that this reversal cancels: same mass and refrigerant, the other way round. */
export function reversedEntry(reversal: EntryRow, rows: readonly EntryRow[]): EntryRow | undefined {
  const same = (a: EntryRow['from'], b: EntryRow['to']) => a.place === b.place && a.id === b.id && a.as === b.as;
  return rows.find(
    (row) =>
      row.groupId === reversal.reversesGroupId &&
      row.massG === reversal.massG &&
      row.refrigerant === reversal.refrigerant &&
      same(row.from, reversal.to) &&
      same(row.to, reversal.from),
  );
}

/** Groups that belong to an open one: what it reverses or reverses it, what corrects it, what was judged again for it. */
export function groupsTiedTo(groupId: string, rows: readonly EntryRow[], { corrects }: Ties): ReadonlySet<string> {
  const tied = new Set<string>();
  const originals = new Set([groupId]);
  for (const row of rows) {
    if (row.groupId === groupId && row.reversesGroupId !== null) originals.add(row.reversesGroupId);
  }
  const original = corrects.get(groupId);
  if (original !== undefined) originals.add(original);
  for (const row of rows) {
    const belongs =
      originals.has(row.groupId) ||
      (row.reversesGroupId !== null && originals.has(row.reversesGroupId)) ||
      (row.correctsGroupId !== null && originals.has(row.correctsGroupId)) ||
      originals.has(corrects.get(row.groupId) ?? '');
    if (belongs) tied.add(row.groupId);
  }
  return tied;
}
