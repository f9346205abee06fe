import { expect } from 'vitest';
import type { CheckImportRequest, ImportView } from '../../shared/imports/import.schema.ts';
import type { ImportKind } from '../../shared/imports/import-fields.ts';
import { startTestApp, TEST_START, type TestApp } from './app.ts';
import { type Ledger, startLedger } from './ledger.ts';
import type { Answered, TestClient } from './test-client.ts';

/** Steps of an import through HTTP, each firm's own. */
export function importsOf(app: () => TestApp, ledger: () => Ledger) {
  return { upload, ended, check, run, bring, headSequence };

  async function upload(
    kind: string,
    file: string | Uint8Array,
    name = 'table.csv',
    client: TestClient = ledger().client,
  ) {
    const form = new FormData();
    form.set('kind', kind);
    form.set('file', new Blob([file as never]), name);
    const body = new Response(form);
    const type = String(body.headers.get('content-type'));
    const raw = new Uint8Array(await body.arrayBuffer());
    return client.send<ImportView>('POST', '/imports', { raw, headers: { 'Content-Type': type } });
  }

  async function ended(answer: Answered<ImportView>): Promise<ImportView> {
    if (answer.status !== 200) throw new Error(JSON.stringify(answer.body));
    await app().parts.background.settled();
    return (await ledger().client.get<ImportView>(`/imports/${answer.body.id}`)).body;
  }

  /** Reads, maps by the guess, and checks. */
  async function check(kind: ImportKind, file: string | Uint8Array, change: Partial<CheckImportRequest> = {}) {
    const read = await upload(kind, file);
    if (read.status !== 201) throw new Error(JSON.stringify(read.body));
    const request: CheckImportRequest = {
      columns: guessed(read.body),
      massUnit: 'kg',
      decimal: read.body.read.decimal,
      dateOrder: 'dmy',
      since: '2025-01-01',
      ...change,
    };
    return ended(await ledger().client.post(`/imports/${read.body.id}/check`, request));
  }
  async function run({ id }: ImportView) {
    return ended(await ledger().client.post(`/imports/${id}/run`));
  }
  async function bring(kind: ImportKind, file: string | Uint8Array, change: Partial<CheckImportRequest> = {}) {
    const checked = await check(kind, file, change);
    expect([checked.state, checked.errors]).toEqual(['checked', []]);
    return run(checked);
  }
  async function headSequence() {
    const [head] = await app().database.query<{ sequence: string }>(
      'superuser',
      'select sequence from firm_head where firm_id = $1',
      [ledger().firm.id],
    );
    return head?.sequence;
  }
}

/** Which column holds what, as the server thinks. */
export const guessed = ({ fields }: ImportView): Record<string, number> =>
  Object.fromEntries(fields.flatMap(({ name, guess }) => (guess === null ? [] : [[name, guess]])));

export const errorsOf = ({ errors }: ImportView) => errors.map(({ row, column, code }) => [row, column, code]);

/** With a clock that goes on while the server works, as every clock does. */
export function startImportApp(): Promise<TestApp> {
  let time = Date.parse(TEST_START);
  return startTestApp({ parts: { now: () => new Date(++time) } });
}

/** A firm of its own for each test: all of its rows come from the file. */
export const startImportLedger = (app: TestApp): Promise<Ledger> => startLedger(app, { timeZone: 'Europe/Madrid' });

export const CYLINDERS = [
  'Tag,Kind,Refrigerant,Owner,Tare,Content,Re-test,Held by',
  'A1,refillable,R-32,,7.6,11.34,2028-05-01,',
  'A2,disposable,r-410a,Fallow Gas,"25 lb 4 oz",,,',
].join('\r\n');

export const HOW = { massUnit: 'kg', decimal: 'point', dateOrder: 'dmy', since: '2025-01-01' } as const;
