import type { EntityManager } from 'typeorm';
import type { z } from 'zod';
import type {
  addTareRequest,
  CreateCylinderRequest,
  Cylinder,
  CylinderListQuery,
  updateCylinderRequest,
} from '../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupResponse } from '../../shared/ledger/entry-group-response.schema.ts';
import { inFirm } from '../database/firm-scope.ts';
import { journalAndJudgeAgain, outcomeOfRevision } from '../entries/judge-again.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { presentOutcome } from '../entries/posting-answer.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import { requestHash } from '../journal/canonical-text.ts';
import { lockHead } from '../journal/post-records.ts';
import { orThrow, wasMade } from '../journal/register-journal.ts';
import { refuseFuture } from '../registers/refuse-future.ts';
import { changeRow, type Made, taken } from '../registers/register-rows.ts';
import { type CylinderRow, cylindersRepository, presentCylinder } from './cylinder.repository.ts';
import {
  factsOf,
  makeCylinders,
  REFERENCES,
  stampedLimit,
  tareRegister,
  tareRowOf,
  waterCapacity,
  withLimit,
} from './make-cylinders.ts';

export function listCylinders(parts: PostingParts, actor: Actor, query: CylinderListQuery) {
  return inFirm(parts.dataSource, actor, (manager) => cylindersRepository(manager).list(query, presentCylinder));
}

export function getCylinder(parts: PostingParts, actor: Actor, id: string) {
  return inFirm(parts.dataSource, actor, (manager) => requireView(manager, id));
}

export function createCylinder(
  parts: PostingParts,
  actor: Actor,
  request: CreateCylinderRequest,
): Promise<Made<Cylinder>> {
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    const [made] = await makeCylinders(manager, parts, actor, [request]);
    return { isNew: orThrow(made), value: await requireView(manager, request.id) };
  });
}

export function updateCylinder(
  parts: PostingParts,
  actor: Actor,
  id: string,
  version: number,
  request: z.output<typeof updateCylinderRequest>,
) {
  return changeRow<CylinderRow, Cylinder>(
    parts,
    actor,
    {
      noun: 'cylinder',
      id,
      version,
      references: REFERENCES,
      find: (manager) => cylindersRepository(manager).find(id),
      factsOf,
      changed: (row) =>
        withLimit({
          ...row,
          tag: taken(request.tag, row.tag),
          contentState: taken(request.contentState, row.contentState),
          retestDue: taken(request.retestDue, row.retestDue),
          heldBy: taken(request.heldBy, row.heldBy),
          batch: taken(request.batch, row.batch),
          ...(request.waterCapacity === undefined ? {} : waterCapacity(request.waterCapacity)),
          ...(request.stampedLimit === undefined ? {} : stampedLimit(request.stampedLimit)),
          servicePressureKPaGauge: taken(request.servicePressureKPaGauge, row.servicePressureKPaGauge),
        }),
      update: (manager, row) => cylindersRepository(manager).update(row),
    },
    (manager) => requireView(manager, id),
  );
}

/** A revised tare: what the cylinder's readings say is judged again from its day on. */
export function addTare(
  parts: PostingParts,
  actor: Actor,
  cylinderId: string,
  request: z.output<typeof addTareRequest>,
): Promise<Made<EntryGroupResponse>> {
  const { id, tare, validFrom, reason } = request;
  const row = tareRowOf(actor.firmId, cylinderId, { id, mass: tare, validFrom, reason });
  const of = { place: 'cylinder' as const, id: cylinderId };
  const revision = { id, of, requestHash: requestHash(request), reason };
  return inFirm(parts.dataSource, actor, async (manager) => {
    await lockHead(manager);
    if (!(await cylindersRepository(manager).find(cylinderId))) throw new Problem('notFound');
    if (await wasMade(manager, tareRegister(row))) {
      const outcome = await outcomeOfRevision(manager, revision, tareRegister(row));
      return { isNew: false, value: presentOutcome(outcome, actor.locale) };
    }
    refuseFuture(parts, validFrom);
    await cylindersRepository(manager).addTare(row);
    const outcome = await journalAndJudgeAgain(manager, parts, actor, revision, tareRegister(row));
    return { isNew: true, value: presentOutcome(outcome, actor.locale) };
  });
}

async function requireView(manager: EntityManager, id: string): Promise<Cylinder> {
  const found = await cylindersRepository(manager).findView(id);
  if (!found) throw new Problem('notFound');
  return presentCylinder(found);
}
