import { describe, expect, it } from 'vitest';
import { createCylinderRequest } from '../../../shared/cylinders/cylinder.schema.ts';
import { entryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { newId } from '../../lib/new-id.ts';
import { emptyQuantity, typeQuantity } from '../../ui/quantity-draft.ts';
import {
  beginningRequest,
  cylinderRequest,
  emptyRegisterDraft,
  type RegisterDraft,
  readRegisterDraft,
} from './register-draft.ts';

const SENT = '2026-11-30T16:12:00.000Z';
const pounds = (text: string) => typeQuantity<'mass'>(emptyQuantity('lb'), text);
const begin = (change: Partial<RegisterDraft> = {}): RegisterDraft => ({
  ...emptyRegisterDraft(newId, { mass: 'lb', pressure: 'psi' }, { local: '2026-11-30T16:12', day: '2026-11-30' }),
  tag: '7741',
  refrigerant: 'R-32',
  tare: pounds('13 lb 7 oz'),
  ...change,
});
const requests = (draft: RegisterDraft, locale = 'en-US') => {
  const read = readRegisterDraft(draft, locale);
  return {
    cylinder: cylinderRequest(draft, read),
    beginning: beginningRequest(draft, read, { toolId: null, deviceSentAt: SENT }),
  };
};
const complaints = (result: { error?: { issues: readonly { path: PropertyKey[] }[] } | undefined }) =>
  result.error?.issues.map(({ path }) => path.join('/')) ?? [];

describe('A cylinder that is registered', () => {
  it('is sent as it was typed, with nothing for what was left blank', () => {
    const { cylinder } = requests(begin());
    expect(createCylinderRequest.safeParse(cylinder).error).toBeUndefined();
    expect(cylinder).toMatchObject({
      tare: { mass: { value: '215', unit: 'oz' } },
      waterCapacity: null,
      stampedLimit: null,
      servicePressureKPaGauge: null,
      owner: { kind: 'ours' },
      retestDue: null,
    });
  });

  it('carries its service pressure in kPa, gauge: 400 psig is 2,757.9', () => {
    const draft = begin({
      servicePressure: typeQuantity<'pressureGauge'>(emptyQuantity<'pressureGauge'>('psi'), '400'),
    });
    expect(requests(draft).cylinder.servicePressureKPaGauge).toBeCloseTo(2757.903, 3);
  });

  it('names the places of what is missing or cannot be read, instead of leaving it out', () => {
    const draft = begin({
      tag: ' ',
      tare: pounds(''),
      waterCapacity: pounds('heavy'),
      servicePressure: typeQuantity<'pressureGauge'>(emptyQuantity<'pressureGauge'>('psi'), 'strong'),
    });
    expect(complaints(createCylinderRequest.safeParse(requests(draft).cylinder))).toEqual(
      expect.arrayContaining(['tag', 'tare/mass/value', 'waterCapacity/value', 'servicePressureKPaGauge']),
    );
  });
});

describe('How its content begins', () => {
  it('is a purchase by the label, whose invoice may follow', () => {
    const draft = begin();
    draft.purchase = { ...draft.purchase, supplierId: newId(), mass: pounds('25') };
    const { beginning } = requests(draft);
    expect(entryGroupRequest.safeParse(beginning).error).toBeUndefined();
    expect(beginning).toMatchObject({
      kind: 'purchase',
      entries: [{ howKnown: 'label', mass: { value: '25', unit: 'lb' }, to: { place: 'cylinder', id: draft.id } }],
      documents: [],
    });
  });

  it('carries the invoice with the same mass, once there is one', () => {
    const draft = begin();
    draft.purchase = {
      ...draft.purchase,
      supplierId: newId(),
      mass: pounds('25'),
      by: 'invoice',
      invoiceNumber: ' 20871 ',
    };
    const { beginning } = requests(draft);
    expect(entryGroupRequest.safeParse(beginning).error).toBeUndefined();
    expect(beginning?.documents).toEqual([
      { kind: 'invoice', number: '20871', date: '2026-11-30', refrigerant: 'R-32', mass: { value: '25', unit: 'lb' } },
    ]);
  });

  it('is an opening of one gross reading, where it was there already', () => {
    const draft = begin({ begins: 'weighed' });
    draft.weighing = { ...draft.weighing, gross: pounds('31.25') };
    const { beginning } = requests(draft);
    expect(entryGroupRequest.safeParse(beginning).error).toBeUndefined();
    expect(beginning).toMatchObject({
      kind: 'opening',
      entries: [],
      readings: [{ moment: 'only', mode: 'gross', value: '31.25', unit: 'lb', toolId: null }],
    });
  });

  it('is nothing at all, where it is empty', () => {
    expect(requests(begin({ begins: 'empty' })).beginning).toBeNull();
  });

  it('keeps its ids over a second try, so that nothing is posted twice', () => {
    const draft = begin();
    expect(requests(draft).beginning?.groupId).toBe(requests(draft).beginning?.groupId);
    expect(requests(draft).cylinder.id).toBe(draft.id);
  });
});
