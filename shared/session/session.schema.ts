import { z } from 'zod';
import { id, shortText } from '../lists/list.schema.ts';
import { role } from '../permissions/roles.ts';
import { gwpSet } from '../reference/gwp.ts';

/** Language and regional form: dates and decimals follow it. */
export const LOCALES = ['en-US', 'en-GB', 'es-US', 'es-ES'] as const;
export const locale = z.enum(LOCALES);
export type Locale = z.output<typeof locale>;

/** What a person sees and types; never what is stored. */
export const preferences = z.strictObject({
  locale: locale,
  mass: z.enum(['g', 'kg', 'oz', 'lbOz']),
  length: z.enum(['m', 'ft']),
  pressure: z.enum(['psig', 'bar', 'kPa']),
  temperature: z.enum(['C', 'F']),
  vacuum: z.enum(['micron', 'Pa']),
  theme: z.enum(['system', 'light', 'dark']),
});
export type Preferences = z.output<typeof preferences>;

export const JURISDICTIONS = ['US', 'EU'] as const;
export const jurisdiction = z.enum(JURISDICTIONS);

export const firm = z.strictObject({
  id,
  name: z.string(),
  jurisdiction,
  timeZone: z.string(),
  locale,
  gwpSet,
});

/** Blanks around it and capitals come from phone keyboards; both are taken away before it is judged. */
export const emailAddress = z.string().max(300).trim().toLowerCase().pipe(z.email().max(254));
/** Length is what makes a password strong (NIST SP 800-63B, 5.1.1.2); no composition rules. */
export const newPassword = z.string().min(12).max(200);

export const signInRequest = z.strictObject({ email: emailAddress, password: z.string().min(1).max(200) });
export const chooseFirmRequest = z.strictObject({ firmId: id });

export const sessionResponse = z.strictObject({
  person: z.strictObject({ id, name: z.string(), email: z.string(), preferences, version: z.int() }),
  firm,
  /** All firms of this person; a session has chosen one. */
  firms: z.array(z.strictObject({ id, name: z.string() })),
  roles: z.array(role),
  permissions: z.array(z.string()),
  /** A reader's sites; null: all sites of the firm. */
  siteIds: z.array(id).nullable(),
});
export type Session = z.output<typeof sessionResponse>;

export const updateMeRequest = z.strictObject({
  name: shortText(120).optional(),
  preferences: preferences.partial().optional(),
});
export const changePasswordRequest = z.strictObject({ currentPassword: z.string().min(1).max(200), newPassword });

/** One's own account; `version` belongs into `If-Match` when changing it. */
export const meResponse = sessionResponse.shape.person;

export const requestPasswordReset = z.strictObject({ email: emailAddress });
export const completePasswordReset = z.strictObject({ token: z.string().min(20).max(200), newPassword });
