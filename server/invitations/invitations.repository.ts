import { type EntityManager, IsNull, MoreThan } from 'typeorm';
import type { Invitation } from '../../shared/people/people.schema.ts';
import { decodeCursor, presentPage } from '../http/keyset.ts';
import type { Parts } from '../http/parts.ts';
import { poolOf } from '../session/pool.ts';
import { InvitationEntity } from './invitation.entity.ts';

export type InvitationRow = InvitationEntity;

export function presentInvitation(row: InvitationRow): Invitation {
  const { id, email, name, roles, siteIds, invitedAt, expiresAt, acceptedAt } = row;
  return {
    id,
    email,
    name,
    roles,
    siteIds,
    invitedAt: invitedAt.toISOString(),
    expiresAt: expiresAt.toISOString(),
    acceptedAt: acceptedAt?.toISOString() ?? null,
  };
}

/** Which firm a mailed link belongs to, before anybody is signed in. */
export async function findInvitationByToken(
  parts: Parts,
  tokenHash: Buffer,
): Promise<{ firmId: string; id: string } | null> {
  const { rows } = await poolOf(parts.dataSource).query<{ firmId: string; id: string }>(
    'SELECT firm_id AS "firmId", id FROM invitation_by_token_hash($1)',
    [tokenHash],
  );
  return rows[0] ?? null;
}

export function findInvitation(manager: EntityManager, firmId: string, id: string): Promise<InvitationRow | null> {
  return manager.getRepository(InvitationEntity).findOneBy({ firmId, id });
}

/** The row, locked, so that of two who open the same link at once one is too late. */
export function lockInvitation(manager: EntityManager, firmId: string, id: string): Promise<InvitationRow | null> {
  return manager
    .getRepository(InvitationEntity)
    .findOne({ where: { firmId, id }, lock: { mode: 'pessimistic_write' } });
}

export async function insertInvitation(
  manager: EntityManager,
  invitation: Omit<InvitationRow, 'acceptedAt' | 'acceptedBy'>,
): Promise<void> {
  await manager.getRepository(InvitationEntity).insert(invitation);
}

export async function changeInvitation(
  manager: EntityManager,
  { firmId, id }: Pick<InvitationRow, 'firmId' | 'id'>,
  change: Partial<Pick<InvitationRow, 'tokenHash' | 'expiresAt' | 'acceptedAt' | 'acceptedBy'>>,
): Promise<void> {
  await manager.getRepository(InvitationEntity).update({ firmId, id }, change);
}

/** An address has one open invitation at most: the newest. */
export async function endOpenInvitations(
  manager: EntityManager,
  { firmId, email, now }: { firmId: string; email: string; now: Date },
): Promise<void> {
  await manager
    .getRepository(InvitationEntity)
    .update({ firmId, email, acceptedAt: IsNull(), expiresAt: MoreThan(now) }, { expiresAt: now });
}

/** Whether somebody with this address is active in the firm in scope. */
export async function isActiveMember(manager: EntityManager, email: string): Promise<boolean> {
  const rows: unknown[] = await manager.query(
    'SELECT FROM membership m JOIN person p ON p.id = m.person_id WHERE m.active AND lower(p.email) = lower($1) LIMIT 1',
    [email],
  );
  return rows.length > 0;
}

/** Newest first. */
export async function listInvitations(
  manager: EntityManager,
  firmId: string,
  query: { cursor?: string | undefined; limit: number },
) {
  const [at = null, id = null] = query.cursor === undefined ? [] : decodeCursor('invitations', query.cursor, 2);
  const rows = await manager
    .getRepository(InvitationEntity)
    .createQueryBuilder('invitation')
    .where('invitation.firmId = :firmId', { firmId })
    .andWhere(at === null ? 'true' : '(invitation.invitedAt, invitation.id) < (:at::timestamptz, :id::uuid)', {
      at,
      id,
    })
    .orderBy('invitation.invitedAt', 'DESC')
    .addOrderBy('invitation.id', 'DESC')
    .limit(query.limit + 1)
    .getMany();
  return presentPage(
    rows,
    query.limit,
    'invitations',
    (row) => [row.invitedAt.toISOString(), row.id],
    presentInvitation,
  );
}
