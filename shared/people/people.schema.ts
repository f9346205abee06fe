import { z } from 'zod';
import { day, id, instant, pageQuery, shortText } from '../lists/list.schema.ts';
import { role, tokenScope } from '../permissions/roles.ts';
import { emailAddress, locale, newPassword } from '../session/session.schema.ts';

export const person = z.strictObject({
  id,
  name: z.string(),
  email: z.string(),
  roles: z.array(role),
  siteIds: z.array(id).nullable(),
  active: z.boolean(),
  /** Van or bench this person's cylinders are on; free text of the firm. */
  van: z.string().nullable(),
  lastSignInAt: instant.nullable(),
  version: z.int(),
});
export type Person = z.output<typeof person>;

export const updatePersonRequest = z.strictObject({
  roles: z.array(role).min(1).optional(),
  siteIds: z.array(id).nullable().optional(),
  active: z.boolean().optional(),
  van: shortText(60).nullable().optional(),
});

export const inviteRequest = z.strictObject({
  id,
  email: emailAddress,
  name: shortText(120),
  roles: z.array(role).min(1),
  siteIds: z.array(id).nullable().optional(),
  locale: locale.optional(),
});
export const listPeopleQuery = pageQuery.extend({
  role: role.optional(),
  active: z.enum(['true', 'false']).optional(),
});

export const invitation = z.strictObject({
  id,
  email: z.string(),
  name: z.string(),
  roles: z.array(role),
  siteIds: z.array(id).nullable(),
  invitedAt: instant,
  expiresAt: instant,
  acceptedAt: instant.nullable(),
});
export type Invitation = z.output<typeof invitation>;
/** What became of the mail is said at once; it can be sent again. */
export const sentInvitation = invitation.extend({ mailSent: z.boolean() });
export type SentInvitation = z.output<typeof sentInvitation>;

/** What the page behind the mailed link shows before anything is typed. */
export const invitationTokenRequest = z.strictObject({ token: z.string().min(20).max(200) });
export const invitationPreview = z.strictObject({
  firmName: z.string(),
  email: z.string(),
  name: z.string(),
  /** The address has an account already: its password is asked for and not a new one. */
  hasAccount: z.boolean(),
});
export const acceptInvitationRequest = z.strictObject({
  token: z.string().min(20).max(200),
  name: shortText(120),
  password: newPassword,
});

export const createTokenRequest = z.strictObject({
  id,
  name: shortText(80),
  scopes: z.array(tokenScope).min(1),
  expiresOn: day,
});
export const personalToken = z.strictObject({
  id,
  name: z.string(),
  scopes: z.array(tokenScope),
  createdAt: instant,
  expiresOn: day,
  lastUsedAt: instant.nullable(),
});
export type PersonalToken = z.output<typeof personalToken>;
/** The secret is shown once, here, and never again. */
export const createdToken = personalToken.extend({ secret: z.string() });
