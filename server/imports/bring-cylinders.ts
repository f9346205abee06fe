import type { EntityManager } from 'typeorm';
import type { CreateCylinderRequest } from '../../shared/cylinders/cylinder.schema.ts';
import type { EntryGroupRequest } from '../../shared/ledger/entry-group.schema.ts';
import { makeCylinders } from '../cylinders/make-cylinders.ts';
import type { PostingParts } from '../entries/post-group.ts';
import { postGroupsWithin } from '../entries/post-groups.ts';
import type { Actor } from '../http/actor.ts';
import { Problem } from '../http/problem.ts';
import type { NewOrRefused } from '../journal/register-journal.ts';

export interface CylinderBodies {
  cylinder: CreateCylinderRequest;
  /** What was in it when the register begins. */
  opening: EntryGroupRequest | null;
}

/** Cylinders, and after them what was in them. */
export async function bringCylinders(
  manager: EntityManager,
  parts: PostingParts,
  actor: Actor,
  bodies: readonly CylinderBodies[],
): Promise<NewOrRefused[]> {
  const made = await makeCylinders(
    manager,
    parts,
    actor,
    bodies.map(({ cylinder }) => cylinder),
  );
  // A cylinder that is there from an earlier import has its opening from then; posting it again only compares.
  const opened = bodies.flatMap(({ opening }, index) =>
    opening && !(made[index] instanceof Problem) ? [{ index, opening }] : [],
  );
  const posted = await postGroupsWithin(
    manager,
    parts,
    actor,
    opened.map(({ opening }) => opening),
  );
  for (const [at, { index }] of opened.entries()) if (posted[at] instanceof Problem) made[index] = posted[at];
  return made;
}
