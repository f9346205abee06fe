import type { GwpSet } from '../../../shared/reference/gwp.ts';
import type { Locale } from '../../../shared/session/session.schema.ts';

/** The set that the law of the region counts by, for someone whose firm has not chosen one. */
export const usualGwpSet = (locale: Locale): GwpSet => (locale.endsWith('-US') ? 'US-84.64' : 'EU-2024-573');
