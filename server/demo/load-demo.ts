import type { DataSource } from 'typeorm';
import type { ReferenceData } from '../../shared/reference/reference-data.ts';
import type { Actor } from '../http/actor.ts';
import type { Parts } from '../http/parts.ts';
import { addColleague, foundFirm } from '../people/found-firm.ts';
import type { DemoFirm, DemoPerson } from './demo-firm.ts';
import { demoId } from './demo-id.ts';
import type { DiaryLine } from './demo-order.ts';
import { minutesAfter } from './diary.ts';
import { Draws } from './draws.ts';
import { performOrder, type Versions } from './perform-order.ts';

export interface DemoHistory {
  lines: readonly DiaryLine[];
  /** Sites by the id of the person who sees these alone. */
  readers: ReadonlyMap<string, string[]>;
}

/**
 * Founds a demo firm and plays what its people sent, each line at its own time and through the service that serves the
 * same request over HTTP.
 * @throws Error naming the line that was refused
 */
export async function loadFirm(
  world: { dataSource: DataSource; reference: ReferenceData; password: string },
  { firm, people }: DemoFirm,
  { lines, readers }: DemoHistory,
): Promise<void> {
  const first = lines[0];
  if (!first) throw new Error(`${firm.name} has no history`);
  const { dataSource, reference, password } = world;
  let now = minutesAfter(first.recordedAt, -30);
  const draws = new Draws(`${firm.name}, made by the server`);
  // The services of registers and log ask for these four and no more.
  const parts = { dataSource, reference, now: () => now, newId: () => demoId(now, draws) } as Parts;

  const [owner, ...colleagues] = people;
  await foundFirm(parts, firm, accountOf(owner, password));
  for (const person of colleagues) {
    const siteIds = readers.get(person.id) ?? null;
    await addColleague(parts, firm.id, accountOf(person, password), { roles: person.roles, siteIds, van: person.van });
  }
  const actors = new Map(people.map((person) => [person.id, actorOf(firm.id, person)]));
  const versions: Versions = new Map();
  for (const { recordedAt, by, order } of lines) {
    now = recordedAt;
    const actor = actors.get(by);
    if (!actor) throw new Error(`${by} does not work for ${firm.name}`);
    await performOrder(parts, actor, order, versions).catch((error: unknown) => {
      throw new Error(`The demo's ${order.call} of ${recordedAt.toISOString()} was refused.`, { cause: error });
    });
  }
}

const accountOf = ({ id, name, email, preferences }: DemoPerson, password: string) => ({
  id,
  name,
  email,
  password,
  preferences,
});

const actorOf = (firmId: string, { id, roles, preferences }: DemoPerson): Actor => ({
  personId: id,
  firmId,
  roles,
  siteIds: null,
  locale: preferences.locale,
  tokenScopes: null,
});
