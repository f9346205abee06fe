import { v7 as uuid } from 'uuid';
import type { ExportView } from '../../shared/exports/export.schema.ts';
import type { TestApp } from './app.ts';
import type { TestClient } from './test-client.ts';

/** Exports as a client asks for them, waits for them and fetches them. */
export function exportRequests(app: () => TestApp, usual: () => TestClient) {
  const ask = (what: string, format = 'csv', filters: object = {}, client: TestClient = usual()) =>
    client.post<ExportView>('/exports', { id: uuid(), what, format, filters });
  return {
    ask,
    async asked(...parameters: Parameters<typeof ask>): Promise<ExportView> {
      const answer = await ask(...parameters);
      if (answer.status !== 201) throw new Error(`${answer.status}: ${JSON.stringify(answer.body)}`);
      return answer.body;
    },
    async ended(id: string, client: TestClient = usual()): Promise<ExportView> {
      for (;;) {
        const { body } = await client.get<ExportView>(`/exports/${id}`);
        if (body.state !== 'queued' && body.state !== 'running') return body;
        await soon();
      }
    },
    async download(id: string, client: TestClient = usual()): Promise<{ status: number; bytes: Buffer }> {
      const headers = { Cookie: String(client.cookie) };
      const response = await fetch(`${app().url}/api/v1/exports/${id}/file`, { headers });
      return { status: response.status, bytes: Buffer.from(await response.arrayBuffer()) };
    },
    set: (id: string, change: string) =>
      app().database.query('superuser', `update export set ${change} where id = $1`, [id]),
  };
}

const soon = () => new Promise((resolve) => setTimeout(resolve, 50));

/** Asks again until it is so. */
export async function until(isSo: () => Promise<boolean> | boolean): Promise<void> {
  while (!(await isSo())) await soon();
}
