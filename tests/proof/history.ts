import { v7 as uuid } from 'uuid';
import type { SealRow } from '../../shared/proof/proof.schema.ts';
import type { TestApp } from '../support/app.ts';
import { groupOf, inCylinder, massOf, posted, startLedger, weighIn } from '../support/ledger.ts';

export const NOTE = 'Key is with Ms Vane, second door';

/**
 * A firm with something of everything in its log: registers made and changed, readings, statement, document, note,
 * reversal with replacement, two customers, two seals with records between and after them.
 */
export async function startHistory(app: TestApp) {
  const ledger = await startLedger(app);
  const { client, firm } = ledger;
  const cylinder = await ledger.cylinder('9500', { refrigerant: 'R-410A' });
  const unit = await ledger.unit('1250', '1390', { name: 'Ms Vane, back bedroom' }, 'factory');
  const other = await ledger.made('/customers', { id: uuid(), name: 'Tin Mill' });
  const otherSite = await ledger.made('/sites', {
    ...ledger.site,
    id: uuid(),
    customerId: other.id,
    name: 'Upper Yard',
  });
  const otherUnit = await ledger.unit('900', '900', { siteId: otherSite.id }, 'opening');

  const noted = weighIn(
    ledger,
    { cylinderId: cylinder.id, unitId: unit.id, beforeG: 9500, afterG: 9360 },
    { note: NOTE },
  );
  await posted(client, { ...noted, statements: [{ about: 'unit', id: unit.id, is: 'full' }] });
  await posted(
    client,
    groupOf('purchase', '2026-03-03T10:00:00Z', {
      entries: [
        massOf('1000', { place: 'supplier', id: ledger.supplier.id }, inCylinder(cylinder.id), { howKnown: 'invoice' }),
      ],
      documents: [
        {
          kind: 'invoice',
          number: '20871',
          date: '2026-03-03',
          refrigerant: 'R-410A',
          mass: { value: '1', unit: 'kg' },
        },
      ],
    }),
  );
  const first = (await posted(client, {}, '/journal/seals')).body as SealRow;

  const wrong = weighIn(
    ledger,
    { cylinderId: cylinder.id, unitId: otherUnit.id, beforeG: 10360, afterG: 10340 },
    { statements: [{ about: 'unit', id: otherUnit.id, is: 'notFull' }] },
    '2026-03-04T10:00:00Z',
  );
  await posted(client, wrong);
  await posted(
    client,
    {
      groupId: uuid(),
      schema: 1,
      reason: 'misread the scale',
      replacement: weighIn(
        ledger,
        { cylinderId: cylinder.id, unitId: otherUnit.id, beforeG: 10360, afterG: 10330 },
        { statements: [{ about: 'unit', id: otherUnit.id, is: 'notFull' }] },
        '2026-03-04T10:00:00Z',
      ),
    },
    `/entry-groups/${wrong.groupId}/reversal`,
  );
  const changed = await client.patch(`/customers/${other.id}`, 1, { name: 'Tin Mill Holdings' });
  if (changed.status !== 200) throw new Error(JSON.stringify(changed.body));
  const second = (await posted(client, {}, '/journal/seals')).body as SealRow;
  await posted(
    client,
    weighIn(
      ledger,
      { cylinderId: cylinder.id, unitId: unit.id, beforeG: 10330, afterG: 10320 },
      {},
      '2026-03-05T10:00:00Z',
    ),
  );

  /** Somebody with full rights on the database, past its triggers. `FIRM` stands for the condition on the firm. */
  const tamper = (sql: string) =>
    app.database.query(
      'superuser',
      `set session_replication_role = 'replica'; ${sql.replaceAll('FIRM', `firm_id = '${firm.id}'`)}`,
    );
  const rows = <Row extends Record<string, unknown>>(sql: string) =>
    app.database.query<Row>('superuser', sql.replaceAll('FIRM', `firm_id = '${firm.id}'`));
  return {
    ledger,
    client,
    firm,
    cylinder,
    unit,
    otherUnit,
    otherSite,
    otherCustomer: other,
    notedGroupId: noted.groupId,
    seals: { first, second },
    tamper,
    rows,
    /** Number of the record that this text stands in. */
    async recordOf(type: string, containing: string): Promise<number> {
      const [row] = await rows<{ sequence: string }>(
        `select sequence from journal_record where FIRM and type = '${type}' and position('${containing}' in content) > 0
           order by sequence limit 1`,
      );
      if (!row) throw new Error(`no ${type} with ${containing}`);
      return Number(row.sequence);
    },
  };
}
export type History = Awaited<ReturnType<typeof startHistory>>;

/**
 * The chain made to close again from a record on, as somebody would who knows how: new hashes in every row, and in every
 * seal the head that it would have sealed. Signing is what they cannot do.
 */
export const REHASH = `
  do $$
  declare
    r record;
    v_hash bytea := decode(repeat('00', 32), 'hex');
    v_sequence bigint := 0;
  begin
    for r in select * from journal_record where FIRM order by sequence loop
      v_sequence := v_sequence + 1;
      v_hash := sha256(int8send(v_sequence) || v_hash || sha256(convert_to(r.content, 'UTF8')));
      update journal_record set content_hash = sha256(convert_to(r.content, 'UTF8')), hash = v_hash
        where firm_id = r.firm_id and sequence = r.sequence;
    end loop;
    update firm_head set hash = v_hash, sequence = v_sequence where FIRM;
  end $$;`;
