import type { Role } from '../../shared/permissions/roles.ts';
import type { Preferences, Session } from '../../shared/session/session.schema.ts';
import { demoId } from './demo-id.ts';
import { Draws } from './draws.ts';

export interface DemoPerson {
  id: string;
  name: string;
  email: string;
  roles: Role[];
  /** For the list that the start command prints. */
  roleWords: string;
  van: string | null;
  preferences: Preferences;
}

export interface DemoFirm {
  firm: Session['firm'];
  /** The owner stands first and founds the firm. */
  people: readonly [DemoPerson, ...DemoPerson[]];
}

/** Ids of firms and people are the same in every installation: that is how a later start knows its demo firms. */
const BEGINNING = new Date('2021-03-01T08:00:00Z');
export function lastingIds(name: string): () => string {
  const draws = new Draws(name);
  return () => demoId(BEGINNING, draws);
}

export const usPreferences = (locale: 'en-US' | 'es-US'): Preferences => ({
  locale,
  mass: 'lbOz',
  length: 'ft',
  pressure: 'psig',
  temperature: 'F',
  vacuum: 'micron',
  theme: 'system',
});

export const euPreferences = (locale: 'en-GB' | 'es-ES'): Preferences => ({
  locale,
  mass: 'kg',
  length: 'm',
  pressure: 'bar',
  temperature: 'C',
  vacuum: 'Pa',
  theme: 'system',
});
