import { z } from 'zod';

export const ROLES = ['technician', 'complianceManager', 'owner', 'reader'] as const;
export const role = z.enum(ROLES);
export type Role = z.output<typeof role>;

/** Who may do what, as one table. An owner can do what a compliance manager can. */
export const PERMISSIONS = {
  'records:read': ['technician', 'complianceManager', 'owner', 'reader'],
  'entries:post': ['technician', 'complianceManager', 'owner'],
  'entries:reverse': ['technician', 'complianceManager', 'owner'],
  'charge-sheets:make': ['technician', 'complianceManager', 'owner'],
  'units:write': ['technician', 'complianceManager', 'owner'],
  'cylinders:write': ['technician', 'complianceManager', 'owner'],
  'tools:write': ['technician', 'complianceManager', 'owner'],
  'jobs:write': ['technician', 'complianceManager', 'owner'],
  'customers:write': ['complianceManager', 'owner'],
  'sites:write': ['complianceManager', 'owner'],
  'parties:write': ['complianceManager', 'owner'],
  'registers:correct': ['complianceManager', 'owner'],
  'people:read': ['technician', 'complianceManager', 'owner'],
  'people:manage': ['owner'],
  'exports:make': ['complianceManager', 'owner'],
  'seals:make': ['owner'],
  'books:read': ['complianceManager', 'owner'],
  'books:settle': ['complianceManager', 'owner'],
  'periods:close': ['owner'],
  'tokens:own': ['technician', 'complianceManager', 'owner'],
} as const satisfies Record<string, readonly Role[]>;
export type Permission = keyof typeof PERMISSIONS;

/** May someone with these roles do this? Several roles add up. */
export function isPermitted(permission: Permission, roles: readonly Role[]): boolean {
  return roles.some((held) => (PERMISSIONS[permission] as readonly Role[]).includes(held));
}

/** Scopes of a personal token, each a set of permissions; a token never does more than its person. */
export const TOKEN_SCOPES = {
  read: ['records:read', 'people:read'],
  post: ['records:read', 'entries:post', 'charge-sheets:make', 'jobs:write'],
  registers: [
    'records:read',
    'units:write',
    'cylinders:write',
    'tools:write',
    'customers:write',
    'sites:write',
    'parties:write',
  ],
} as const satisfies Record<string, readonly Permission[]>;
export const tokenScope = z.enum(Object.keys(TOKEN_SCOPES) as [keyof typeof TOKEN_SCOPES]);
export type TokenScope = z.output<typeof tokenScope>;
