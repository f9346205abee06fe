import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 as uuid } from 'uuid';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { writeDocument } from '../../server/documents/write-document.ts';
import { type ExportWorker, startExportWorker } from '../../server/exports/export-worker.ts';
import { startTestApp, type TestApp } from '../support/app.ts';
import {
  groupOf,
  inCylinder,
  inUnit,
  type Ledger,
  massOf,
  posted,
  readingOf,
  startLedger,
  weighIn,
} from '../support/ledger.ts';
import { readPdf } from '../support/read-pdf.ts';
import type { TestClient } from '../support/test-client.ts';

const home = mkdtempSync(path.join(tmpdir(), 'tarewright-documents-'));
/** Where the papers of this run are left for somebody to look at. */
const pictures = process.env.DOCUMENT_FOLDER;
let app: TestApp;
let us: Ledger;
let eu: Ledger;
let worker: ExportWorker;
const ids = { us: { unit: '', cylinder: '', job: '' }, eu: { unit: '', cylinder: '', job: '' } };

beforeAll(async () => {
  app = await startTestApp({ environment: { TAREWRIGHT_HOME: home } });
  us = await startLedger(app, { name: 'Harrow & Tansy', timeZone: 'America/New_York' });
  eu = await startLedger(app, {
    name: 'Brenhaven Kälte',
    jurisdiction: 'EU',
    locale: 'es-ES',
    gwpSet: 'EU-2024-573',
    timeZone: 'Europe/Madrid',
  });
  for (const [ledger, own] of [
    [us, ids.us],
    [eu, ids.eu],
  ] as const) {
    own.cylinder = (await ledger.cylinder('9500', { tag: '7741' })).id;
    const unit = await ledger.unit(
      '1250',
      '1500',
      { tag: '0412', serials: [{ part: 'outdoor', serial: 'SN-18', model: 'M-2' }] },
      'factory',
    );
    own.unit = unit.id;
    own.job = uuid();
    await ledger.made('/jobs', {
      id: own.job,
      unitId: unit.id,
      kind: 'install',
      title: 'back bedroom',
      openedAt: '2026-03-01T08:00:00Z',
    });
    const group = weighIn(ledger, { cylinderId: own.cylinder, unitId: unit.id, beforeG: 9500, afterG: 9410 });
    const answer = await ledger.post({ ...group, jobId: own.job, note: 'Łódź, 12 ≥ 11 → fine' });
    if (answer.status !== 201) throw new Error(JSON.stringify(answer.body));
  }
  await us.client.post('/journal/seals');
  worker = await startExportWorker({
    parts: app.parts,
    jobsUrl: app.database.urls.jobs,
    writeDocument,
    pollEverySeconds: 0.5,
  });
});
afterAll(async () => {
  await worker.stop();
  await app.close();
  rmSync(home, { recursive: true, force: true });
});

async function paper(client: TestClient, what: string, filters: object) {
  const id = uuid();
  const answer = await client.post('/exports', { id, what, format: 'pdf', filters });
  if (answer.status !== 201) throw new Error(`${answer.status}: ${JSON.stringify(answer.body)}`);
  for (;;) {
    const { body } = await client.get(`/exports/${id}`);
    if (body.state === 'done') break;
    if (body.state !== 'queued' && body.state !== 'running') throw new Error(JSON.stringify(body));
    await new Promise((resolve) => setTimeout(resolve, 50));
  }
  const response = await fetch(`${app.url}/api/v1/exports/${id}/file`, { headers: { Cookie: String(client.cookie) } });
  const bytes = Buffer.from(await response.arrayBuffer());
  if (pictures) writeFileSync(path.join(pictures, `${what}-${client === us.client ? 'us' : 'eu'}.pdf`), bytes);
  return readPdf(bytes);
}
const months = { from: '2026-01', to: '2026-12' };

describe('A paper', () => {
  it.each([
    ['Letter, English', () => us, ids.us, { width: 612, height: 792 }, /1 of 1/, /made .* by Person/],
    ['A4, Spanish', () => eu, ids.eu, { width: 595.28, height: 841.89 }, /1 de 1/, /hecho el .* por Person/],
  ])('of each kind has its page number, who made it, and no grey: %s', async (_, ledger, own, size, page, made) => {
    const statement = { cylinderId: own.cylinder, from: '2026-01-01', to: '2026-11-30' };
    for (const [what, filters] of [
      ['unitLog', { unitId: own.unit }],
      ['chargeLabel', { unitId: own.unit }],
      ['jobRecord', { jobId: own.job }],
      ['cylinderStatement', statement],
      ['periodReport', months],
      ['disposalReport', months],
    ] as const) {
      const read = await paper(ledger().client, what, filters);
      expect(read.pages, what).toHaveLength(1);
      expect(read.pages[0]?.size, what).toEqual(size);
      expect(read.pages[0]?.text, what).toMatch(page);
      expect(read.pages[0]?.text, what).toMatch(made);
      expect(read.pages[0]?.text, what).not.toMatch(/doc\.|log\.|undefined|NaN|\{\{/);
      expect(read.colours, what).toEqual(new Set(['0 0 0']));
    }
  });
});

describe('A job record of a recovery', () => {
  /** Source: 40 CFR 82.156(a), Table 1. */
  it('says to which level the unit was evacuated, which was required and by which clause', async () => {
    const clause = '40 CFR 82.156(a), Table 1';
    const required = { value: '10', unit: 'inHgVacuum' };
    const recordOf = async (locale: 'en-US' | 'es-ES', level: object) => {
      const ledger = await startLedger(app, { locale });
      const unit = await ledger.unit('1340', '1340');
      const into = await ledger.cylinder(null, { kind: 'recovery' });
      const job = { id: uuid(), unitId: unit.id, kind: 'recovery', openedAt: '2026-03-02T08:00:00Z' };
      await ledger.made('/jobs', job);
      await posted(
        ledger.client,
        groupOf('recovery', '2026-03-02T10:00:00Z', {
          unitId: unit.id,
          jobId: job.id,
          entries: [massOf('1340', inUnit(unit.id), inCylinder(into.id))],
          statements: [{ about: 'unit', id: unit.id, is: 'empty', by: 'recovery' }],
          recoveryLevel: { required, clause, ...level },
        }),
      );
      const { pages } = await paper(ledger.client, 'jobRecord', { jobId: job.id });
      return pages.map(({ text }) => text).join(' ');
    };
    expect(await recordOf('en-US', { reached: { value: '10.5', unit: 'inHgVacuum' } })).toContain(
      `Evacuation: reached 10.5 in Hg vacuum; required 10 in Hg vacuum (${clause}).`,
    );
    expect(await recordOf('es-ES', { exception: 'leaking' })).toContain(
      `Evacuación: alcanzado no indicado; exigido 10 in Hg de vacío (${clause}). Rige otro nivel: tiene fugas.`,
    );
  });
});

describe('A unit log', () => {
  it('names the unit, each entry with its mass and both ends, and the last seal', async () => {
    const { pages } = await paper(us.client, 'unitLog', { unitId: ids.us.unit });
    const text = pages[0]?.text ?? '';
    expect(text).toContain('Unit log');
    expect(text).toMatch(/0412, back bedroom/);
    expect(text).toMatch(/cyl\. 7741\s+unit 0412/);
    // 90 g by the exact ounce, 28.349523125 g
    expect(text).toMatch(/extra charge.*3\.2/);
    expect(text).toMatch(/Last seal 20\d\d-\d\d-\d\d: record \d+, [0-9a-f]{4}( [0-9a-f]{4}){3}/);
    expect(text).toMatch(/Log up to record \d+: [0-9a-f]{4}/);
  });

  it('goes over as many pages as it takes, each with its number and the head of the table', async () => {
    const unit = await us.unit('1250', '9000', { tag: '0500' }, 'factory');
    const cylinder = await us.cylinder('90000', { tag: '8000' });
    for (let n = 0; n < 45; n++) {
      const at = `2026-04-01T${String(8 + Math.floor(n / 6)).padStart(2, '0')}:${String((n % 6) * 10).padStart(2, '0')}:00Z`;
      const group = weighIn(
        us,
        { cylinderId: cylinder.id, unitId: unit.id, beforeG: 90000 - n * 20, afterG: 89980 - n * 20 },
        {},
        at,
      );
      const answer = await us.post(group);
      if (answer.status !== 201) throw new Error(JSON.stringify(answer.body));
    }
    const { pages } = await paper(us.client, 'unitLog', { unitId: unit.id });
    expect(pages.length).toBeGreaterThan(1);
    pages.forEach(({ text }, index) => {
      expect(text).toContain(`${index + 1} of ${pages.length}`);
      expect(text).toMatch(/from\s+to/);
    });
    expect(pages.flatMap(({ text }) => text.match(/extra charge/g) ?? [])).toHaveLength(45);
  });
});

describe('A charge label', () => {
  it('says what Regulation (EU) 2024/573, Article 12(3), asks for', async () => {
    const text = (await paper(eu.client, 'chargeLabel', { unitId: ids.eu.unit })).pages[0]?.text ?? '';
    expect(text).toContain('Contiene gases fluorados de efecto invernadero');
    expect(text).toContain('R-410A');
    expect(text).toMatch(/Carga de fábrica\s+1,250 kg/);
    expect(text).toMatch(/Añadido en el lugar\s+0,090 kg/);
    expect(text).toMatch(/Total\s+1,340 kg/);
    // Annex I: R-32 675, R-125 3500, half and half by mass: 2087.5; 1.340 kg is 2.797 t
    expect(text).toMatch(/GWP\s+2087,5/);
    expect(text).toMatch(/CO\s?2\s?e\s+2,797 t/);
  });

  it('leaves a line to write on where the log does not know', async () => {
    const unit = await eu.unit('0', null, { tag: '0999' }, 'notKnown');
    const text = (await paper(eu.client, 'chargeLabel', { unitId: unit.id })).pages[0]?.text ?? '';
    expect(text).toMatch(/Total\s+_+ kg/);
    expect(text).not.toMatch(/Total\s+0/);
  });
});

describe('A charge label of what is no fluorinated gas, or was not always this machine', () => {
  it('does not call R-290 a fluorinated greenhouse gas', async () => {
    const unit = await eu.unit('300', '300', { tag: '0290', refrigerant: 'R-290' }, 'factory');
    const text = (await paper(eu.client, 'chargeLabel', { unitId: unit.id })).pages[0]?.text ?? '';
    expect(text).toContain('Refrigerante de esta unidad');
    expect(text).not.toContain('fluorados');
  });

  it('says the day as it was where the machine stands', async () => {
    const ledger = await startLedger(app, { timeZone: 'America/New_York' });
    const site = await ledger.made('/sites', {
      ...ledger.site,
      id: uuid(),
      name: 'Quay Street',
      timeZone: 'America/New_York',
    });
    const unit = await ledger.unit('1250', '1500', { siteId: site.id }, 'factory');
    const { id } = await ledger.cylinder('9500');
    const late = '2026-03-04T01:30:00Z';
    await posted(
      ledger.client,
      weighIn(ledger, { cylinderId: id, unitId: unit.id, beforeG: 9500, afterG: 9410 }, {}, late),
    );
    const text = (await paper(ledger.client, 'chargeLabel', { unitId: unit.id })).pages[0]?.text ?? '';
    expect(text).toMatch(/Charged on\s+Mar 3, 2026/);
  });
});

describe('A period report', () => {
  it('keeps what was lost before our care apart from emissions, as the page of emissions does', async () => {
    const ledger = await startLedger(app, { gwpSet: 'AR4' });
    const unit = await ledger.unit('0', '1290', {}, 'notKnown');
    const { id: cylinderId } = await ledger.cylinder('9500');
    // scenarios, S8 case 1: 300 g before our care, then 150 g inferred.
    for (const [beforeG, afterG, at] of [
      [9500, 9200, '2026-03-02T10:00:00Z'],
      [9200, 9050, '2026-05-04T10:00:00Z'],
    ] as const)
      await posted(
        ledger.client,
        groupOf('refill', at, {
          unitId: unit.id,
          readings: [
            readingOf(cylinderId, ledger.scale.id, 'before', beforeG),
            readingOf(cylinderId, ledger.scale.id, 'after', afterG),
          ],
          entries: [massOf(String(beforeG - afterG), inCylinder(cylinderId), inUnit(unit.id))],
          statements: [{ about: 'unit', id: unit.id, is: 'full' }],
        }),
      );
    const emissions = (await ledger.client.get('/emissions?from=2026-01&to=2026-12&by=refrigerant')).body.lines[0];
    expect(emissions).toMatchObject({ totalG: 150, beforeOurCareG: 300 });
    const text = (await paper(ledger.client, 'periodReport', months)).pages[0]?.text ?? '';
    // 150 g in ounces; AR4: R-410A 2087.5, 0.150 kg is 0.313 t; 300 g is 10.6 oz and 0.626 t
    expect(text).toMatch(/To the atmosphere[\s\S]*?5\.3 oz/);
    expect(text).not.toMatch(/15\.9 oz/);
    expect(text).toMatch(/0\.313 t/);
    expect(text).toMatch(/10\.6 oz, 0\.626 t/);
  });
});

describe('A cylinder statement', () => {
  it('adds up: opening, opened with, in, out, differences, closing', async () => {
    const filters = { cylinderId: ids.eu.cylinder, from: '2026-01-01', to: '2026-11-30' };
    const text = (await paper(eu.client, 'cylinderStatement', filters)).pages[0]?.text ?? '';
    expect(text).toMatch(/Abierto con[\s\S]*?9500 g/);
    expect(text).toMatch(/9410 g/);
  });

  it('gives opening, closing and the verdict in the three words', async () => {
    const filters = { cylinderId: ids.us.cylinder, from: '2026-01-01', to: '2026-11-30' };
    const text = (await paper(us.client, 'cylinderStatement', filters)).pages[0]?.text ?? '';
    expect(text).toMatch(/Within the scales|Look again|Not explained|Not judged/);
    // 9,500 g less 90 g, in ounces
    expect(text).toMatch(/331\.9 oz/);
  });
});

describe('A job record', () => {
  it('shows words in the letters of Europe, what was read on the scale and what was noted', async () => {
    const text = (await paper(us.client, 'jobRecord', { jobId: ids.us.job })).pages[0]?.text ?? '';
    expect(text).toContain('Installation: back bedroom, 0412');
    expect(text).toMatch(/Łódź, 12 >= 11\s+fine/);
    expect(text).toMatch(/17200 g/);
    expect(text).toMatch(/17110 g/);
  });

  it('gives each reading its own time: a weigh-in that stayed open was read again hours later', async () => {
    const ledger = await startLedger(app);
    const unit = await ledger.unit('1250', '1500', {}, 'factory');
    const { id: cylinderId } = await ledger.cylinder('9500');
    const jobId = uuid();
    await ledger.made('/jobs', {
      id: jobId,
      unitId: unit.id,
      kind: 'install',
      title: 'back bedroom',
      openedAt: '2026-03-01T08:00:00Z',
    });
    const group = weighIn(ledger, { cylinderId, unitId: unit.id, beforeG: 9500, afterG: 9410 }, { jobId });
    const [before, after] = group.readings;
    await posted(ledger.client, { ...group, readings: [before, { ...after, at: '2026-03-02T18:30:00Z' }] });
    const text = (await paper(ledger.client, 'jobRecord', { jobId })).pages[0]?.text ?? '';
    expect(text).toMatch(/10:00\sAM[\s\S]*?17200 g/);
    expect(text).toMatch(/6:30\sPM[\s\S]*?17110 g/);
  });
});

describe('A disposal report', () => {
  it('lists units, months and shipments with its source, and says where there is nothing', async () => {
    const text = (await paper(us.client, 'disposalReport', months)).pages[0]?.text ?? '';
    expect(text).toContain('No job of this period took a unit out of service.');
    expect(text).toContain('Nothing was recovered in this period.');
    expect(text).toContain('Nothing was sent in this period.');
    expect(text).toContain('40 CFR 82.156(a)(3)');
  });

  it('counts by month what came from units above 5 and below 50 lb whose job takes them out of service, and shows the rest apart', async () => {
    const recovery = await us.cylinder('100', { tag: 'R-01', kind: 'recovery', contentState: 'recovered' });
    let netG = 100;
    const recover = async (tag: string, full: { value: string; unit: string } | null, kind: string, takenG: number) => {
      const unit = await us.unit(
        '30000',
        null,
        {
          tag,
          name: 'roof',
          fullCharge: full && { id: uuid(), mass: full, method: 'manufacturer', validFrom: '2026-01-05T08:00:00Z' },
        },
        'opening',
      );
      const jobId = uuid();
      await us.made('/jobs', { id: jobId, unitId: unit.id, kind, openedAt: '2026-05-04T08:00:00Z' });
      const reading = (moment: string, net: number) => ({
        id: uuid(),
        cylinderId: recovery.id,
        toolId: us.scale.id,
        moment,
        mode: 'gross',
        value: String(net + 7700),
        unit: 'g',
      });
      const answer = await us.post({
        groupId: uuid(),
        schema: 1,
        kind: 'recovery',
        occurredAt: '2026-05-04T10:00:00Z',
        unitId: unit.id,
        jobId,
        readings: [reading('before', netG), reading('after', netG + takenG)],
        entries: [
          {
            id: uuid(),
            refrigerant: 'R-410A',
            mass: { value: String(takenG), unit: 'g' },
            from: { place: 'unit', id: unit.id },
            to: { place: 'cylinder', id: recovery.id },
            howKnown: 'weighed',
          },
        ],
      });
      if (answer.status !== 201) throw new Error(JSON.stringify(answer.body));
      netG += takenG;
    };
    await recover('D5.0', { value: '5', unit: 'lb' }, 'decommission', 1000);
    await recover('D5.1', { value: '5.1', unit: 'lb' }, 'decommission', 2000);
    await recover('D49.9', { value: '49.9', unit: 'lb' }, 'decommission', 3000);
    await recover('D50.0', { value: '50', unit: 'lb' }, 'decommission', 4000);
    await recover('D-none', null, 'decommission', 500);
    await recover('S10', { value: '10', unit: 'lb' }, 'serviceWithLeak', 600);

    const { pages } = await paper(us.client, 'disposalReport', { from: '2026-05', to: '2026-05' });
    const text = pages.map((each) => each.text).join('\n');
    const [record = '', rest = ''] = text.split('Other recoveries');
    for (const tag of ['D5.0', 'D5.1', 'D49.9', 'D50.0', 'D-none']) expect(record).toContain(tag);
    expect(record).not.toContain('S10');
    expect(rest).toContain('S10');
    // 5.1 and 49.9 lb and the one not determined: 5,500 g. At 5.0 and at 50.0 lb the law asks nothing here: with the service 5,600 g.
    expect(record).toMatch(/May 2026\s+R-410A\s+194\.0\s+197\.5/);
  });
});

describe('A paper about nothing', () => {
  it('fails with its reason: a unit that is not there, or another firm’s', async () => {
    for (const unitId of [uuid(), ids.eu.unit]) {
      const id = uuid();
      await us.client.post('/exports', { id, what: 'unitLog', format: 'pdf', filters: { unitId } });
      let state = 'queued';
      let problem: { code: string } | null = null;
      while (state === 'queued' || state === 'running') {
        ({ state, problem } = (await us.client.get(`/exports/${id}`)).body);
        await new Promise((resolve) => setTimeout(resolve, 50));
      }
      expect(state).toBe('failed');
      expect(problem).toMatchObject({ code: 'noSubject' });
    }
  });
});
