import { setImmediate } from 'node:timers/promises';
import type { EntityManager } from 'typeorm';
import type { CheckImportRequest } from '../../shared/imports/import.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { problemOfError } from '../http/problem-of-error.ts';
import { journalNewRows } from '../journal/register-journal.ts';
import { type BroughtIn, bringIn } from './bring-in.ts';
import { readNames } from './import.repository.ts';
import type { StoredImport } from './import-store.ts';
import { planRows } from './plan-rows.ts';

class Cancelled extends Error {}

/** Checks a table, or brings it in, behind the answer: as its state says. Every end of it is a state. */
export function workOn(parts: Parts, actor: Actor, stored: StoredImport, request: CheckImportRequest): void {
  parts.background.run('import', async () => {
    try {
      await work(parts, actor, stored, request);
    } catch (error) {
      stored.rowsDone = 0;
      stored.state = error instanceof Cancelled ? 'cancelled' : 'failed';
      if (error instanceof Cancelled) return;
      const { code, status } = problemOfError(error);
      stored.problem = code;
      if (status >= 500 && code !== 'busy') throw error; // to the log
    }
  });
}

async function work(parts: Parts, actor: Actor, stored: StoredImport, request: CheckImportRequest): Promise<void> {
  const { kind, table } = stored;
  const rehearsal = stored.state === 'checking';
  const goOn = () => {
    if (stored.isCancelled) throw new Cancelled();
  };
  const names = await inFirm(parts.dataSource, actor, readNames);
  const pause = async () => {
    await setImmediate();
    goOn();
  };
  const planned = await planRows(parts, actor, { kind, table, request, names, pause });
  stored.faults = planned.faults;
  // What can be read is judged only when all of it can: half a table would be judged on books that lack the rest.
  if (planned.faults.length === 0) {
    let record: number | null = null;
    const outcome = await bringIn(parts, actor, planned, {
      rehearsal,
      independent: kind !== 'entries',
      beforeRows(done) {
        stored.rowsDone = done;
        goOn();
      },
      async beforeKeeping(manager, broughtIn) {
        if (broughtIn.made > 0) record = await journalImport(parts, actor, manager, stored, request, broughtIn);
      },
    });
    Object.assign(stored, { ...outcome, recordSequence: record });
  }
  stored.rowsDone = table.rows.length;
  stored.state = rehearsal || stored.faults.length > 0 ? 'checked' : 'done';
  // What was brought in stands in the log; its rows are asked for no more.
  if (stored.state === 'done') stored.table = { ...table, rows: [] };
}

/** That a file was brought in, how it was read and what came of it: in the transaction that holds its rows. */
async function journalImport(
  parts: Parts,
  actor: Actor,
  manager: EntityManager,
  { id, kind, table, fileName, sizeBytes, sha256 }: StoredImport,
  { columns, ...read }: CheckImportRequest,
  { made, already }: BroughtIn,
): Promise<number> {
  const heads = Object.entries(columns).map(([field, column]) => [field, table.heads[column] ?? '']);
  const facts = {
    kind,
    fileName,
    sizeBytes,
    sha256,
    rows: table.rows.length,
    made,
    already,
    readAs: { ...read, format: table.read.format, columns: Object.fromEntries(heads) },
  };
  const author = { ...parts, personId: actor.personId };
  // A file is often called after somebody: its name stands beside the chain, where it can be erased.
  const row = { noun: 'import' as const, subjectId: id, facts, personal: ['fileName'] };
  const [posted] = await journalNewRows(author, manager, [row]);
  return Number(posted?.sequence);
}
