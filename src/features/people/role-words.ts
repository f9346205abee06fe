import { ROLES, type Role } from '../../../shared/permissions/roles.ts';
import type { Translate } from '../../lib/messages.ts';

/** Roles in the order of the table, `owner, technician` becoming one line of words. */
export const roleWords = (t: Translate, roles: readonly Role[]): string =>
  ROLES.filter((role) => roles.includes(role))
    .map((role) => t(`people.role.${role}`))
    .join(', ');

/** As a form holds them: one box each. */
export type RoleBoxes = Record<Role, boolean>;

export const boxesOf = (roles: readonly Role[]): RoleBoxes =>
  Object.fromEntries(ROLES.map((role) => [role, roles.includes(role)])) as RoleBoxes;

export const rolesOf = (boxes: RoleBoxes): Role[] => ROLES.filter((role) => boxes[role]);

/** A reader alone may be held to some sites; any other role sees the whole firm. */
export const isReaderOnly = (roles: readonly Role[]): boolean => roles.length === 1 && roles[0] === 'reader';
