import type { JURISDICTIONS } from '../session/session.schema.ts';

export type Jurisdiction = (typeof JURISDICTIONS)[number];

/** What a firm pays in until its first price says otherwise (ISO 4217). */
export const USUAL_CURRENCY: Readonly<Record<Jurisdiction, string>> = { US: 'USD', EU: 'EUR' };
