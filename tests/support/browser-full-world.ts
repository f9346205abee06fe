import { v7 as uuid } from 'uuid';
import type { TestApp } from './app.ts';
import { CONTENT_G, startWorld } from './browser-world.ts';
import { groupOf, inCylinder, inUnit, massOf, posted, readingOf, SINCE, TARE_G, weighIn } from './ledger.ts';

/** The world of a walk with something of everything that a list, a table or a page may have to show. */
export async function startFullWorld(app: TestApp) {
  const world = await startWorld(app);
  const { ledger, unit, cylinder, technician } = world;
  const { client, made, scale, site } = ledger;
  const r32 = { refrigerant: 'R-32' };

  await made(`/units/${unit.id}/line-sets`, {
    id: uuid(),
    validFrom: SINCE,
    branches: [{ name: 'A', liquidOdMm: 6.35, gasOdMm: 9.52, lengthM: 12, riseM: 3 }],
  });
  const sheet = await client.post(`/units/${unit.id}/charge-sheets`, {
    id: uuid(),
    request: {
      job: 'newInstall',
      basis: {
        ...r32,
        factoryChargeG: 1200,
        precharge: { scope: 'system', lengthM: 7.5 },
        rate: { kind: 'flat', gPerM: 20 },
      },
      lineSet: { branches: [{ name: 'A', liquidOdMm: 6.35, gasOdMm: 9.52, lengthM: 12 }] },
      gwpSet: 'EU-2024-573',
    },
    manual: { document: 'Installation manual', page: '14' },
  });
  if (sheet.status !== 201) throw new Error(`charge sheet: ${JSON.stringify(sheet.body)}`);

  // Weighed in, found to be wrong, reversed and entered right.
  const afterG = CONTENT_G - 90;
  const wrong = {
    ...weighIn({ scale }, { cylinderId: cylinder.id, unitId: unit.id, beforeG: CONTENT_G, afterG }),
    entries: [massOf('90', inCylinder(cylinder.id), inUnit(unit.id), r32)],
    chargeSheetId: sheet.body.id,
  };
  await posted(client, wrong);
  await posted(
    client,
    {
      groupId: uuid(),
      schema: 1,
      reason: 'read wrongly off the scale',
      replacement: {
        ...weighIn({ scale }, { cylinderId: cylinder.id, unitId: unit.id, beforeG: CONTENT_G, afterG: afterG + 5 }),
        entries: [massOf('85', inCylinder(cylinder.id), inUnit(unit.id), r32)],
      },
    },
    `/entry-groups/${wrong.groupId}/reversal`,
  );

  // A cylinder whose weigh-in waits for its end reading.
  const waiting = await ledger.cylinder('8000', { ...r32, tag: '7742', heldBy: technician.id, contentState: 'virgin' });
  const open = groupOf('extraCharge', '2026-11-30T14:00:00Z', {
    unitId: unit.id,
    readings: [readingOf(waiting.id, scale.id, 'before', 8000)],
    entries: [],
    openWeighIn: true,
  });
  await posted(client, open);

  // One that does not balance, and one that is nearly full and due for its re-test.
  const short = await ledger.cylinder('5000', { ...r32, tag: '7702' });
  await posted(client, {
    ...groupOf('weighing', '2026-11-20T08:00:00Z', { readings: [readingOf(short.id, scale.id, 'only', 4870)] }),
  });
  const recovery = await ledger.cylinder('9000', {
    tag: 'R-09',
    kind: 'recovery',
    contentState: 'recovered',
    waterCapacity: { value: '12', unit: 'kg' },
    retestDue: '2026-12-05',
  });
  const unknown = await ledger.unit(
    '0',
    null,
    { tag: '0355', name: 'server room, north', siteId: site.id },
    'notKnown',
  );
  await posted(client, {
    ...weighIn(
      { scale },
      { cylinderId: recovery.id, unitId: unknown.id, beforeG: 9000, afterG: 8550 },
      {},
      '2026-11-29T09:30:00Z',
    ),
    kind: 'putBack',
  });

  await made('/customers', { id: uuid(), name: 'Millrace Dental' });
  await made('/parties', { id: uuid(), kind: 'reclaimer', name: 'Clean Gas' });
  const invited = await client.post('/invitations', {
    id: uuid(),
    email: 'j.frayne@example.test',
    name: 'J. Frayne',
    roles: ['technician'],
    siteIds: null,
  });
  if (invited.status !== 201) throw new Error(`invitation: ${JSON.stringify(invited.body)}`);
  const [mail] = await app.mails();
  const invitationLink = /https?:\S+invitation\S+/.exec(mail?.text ?? '')?.[0] ?? '';
  const reader = await app.addPerson(['reader'], {
    firmId: ledger.firm.id,
    siteIds: [site.id],
    name: 'Wexcombe Mill office',
  });
  return {
    ...world,
    reader,
    sheetId: String(sheet.body.id),
    wrongGroupId: wrong.groupId,
    openGroupId: open.groupId,
    waiting,
    short,
    recovery,
    unknown,
    invitationPath: invitationLink.replace(app.url, ''),
    tareG: TARE_G,
  };
}
export type FullWorld = Awaited<ReturnType<typeof startFullWorld>>;
