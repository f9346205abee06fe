import type { EntityManager } from 'typeorm';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { Problem, problemOfRefusals } from '../http/problem.ts';
import { lockHead } from '../journal/post-records.ts';
import { type Facts, journalChange, journalNewRows, type RegisterRow, wasMade } from '../journal/register-journal.ts';

export type RegisterParts = Pick<Parts, 'dataSource' | 'now' | 'newId'>;

/** Where in the request the reference stands that a foreign key of this name found nothing for. */
export type References = Readonly<Record<string, string>>;

export interface Made<T> {
  /** False: an earlier try of the same request made it. */
  isNew: boolean;
  value: T;
}

/**
 * Makes a register row and its record together, once: the same request again answers the same.
 * @throws Problem 409 when the id was used with other content, 422 for a reference to nothing
 */
export function makeOnce<T>(
  parts: RegisterParts,
  actor: Actor,
  row: RegisterRow,
  references: References,
  insert: (manager: EntityManager) => Promise<void>,
  read: (manager: EntityManager) => Promise<T>,
): Promise<Made<T>> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const isNew = !(await wasMade(manager, row));
    if (isNew) {
      await refusingReferences(references, () => insert(manager));
      await journalNewRows({ ...parts, personId: actor.personId }, manager, [row]);
    }
    return { isNew, value: await read(manager) };
  });
}

export interface RowChange<Row extends { version: number }> {
  noun: RegisterRow['noun'];
  id: string;
  /** What the caller has seen (`If-Match`). */
  version: number;
  personal?: readonly string[];
  references: References;
  find(manager: EntityManager): Promise<Row | null>;
  factsOf(row: Row): Facts;
  /** The row as it shall be. */
  changed(row: Row): Row | Promise<Row>;
  update(manager: EntityManager, row: Row): Promise<void>;
}

/**
 * Changes a register row and chains what stood before and after. A change of nothing makes no new version.
 * @throws Problem 404, 412 when somebody changed it meanwhile, 422 for a reference to nothing
 */
export function changeRow<Row extends { version: number }, T>(
  parts: RegisterParts,
  actor: Actor,
  change: RowChange<Row>,
  read: (manager: EntityManager) => Promise<T>,
): Promise<T> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const row = await change.find(manager);
    if (!row) throw new Problem('notFound');
    if (row.version !== change.version) throw new Problem('stale', { params: { version: row.version } });
    const before = change.factsOf(row);
    const next = await change.changed(row);
    const facts = change.factsOf(next);
    if (JSON.stringify(plainOf(before)) !== JSON.stringify(plainOf(facts))) {
      await refusingReferences(change.references, () => change.update(manager, next));
      const { noun, id: subjectId, personal = [] } = change;
      const author = { ...parts, personId: actor.personId };
      await journalChange(author, manager, { noun, subjectId, facts, personal }, row.version + 1, before);
    }
    return read(manager);
  });
}

const plainOf = (facts: Facts): [string, unknown][] =>
  Object.entries(facts).map(([name, fact]) => [name, typeof fact === 'bigint' ? String(fact) : fact]);

/** A foreign key that finds nothing is a mistake in the request: say where. */
export async function refusingReferences<T>(references: References, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    const { code, constraint } = (error as { driverError?: { code?: string; constraint?: string } }).driverError ?? {};
    const path = code === '23503' && constraint ? references[constraint] : undefined;
    if (path === undefined) throw error;
    throw problemOfRefusals([{ code: 'notKnownHere', path }]);
  }
}

/** What a change leaves out stays as it is; null clears. */
export const taken = <T>(given: T | undefined, held: T): T => (given === undefined ? held : given);
