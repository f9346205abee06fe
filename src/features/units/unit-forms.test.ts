import { describe, expect, it } from 'vitest';
import { addChargeBasisRequest } from '../../../shared/charge-sheets/charge-sheet.schema.ts';
import { addLineSetRequest, createUnitRequest } from '../../../shared/unit-register/unit.schema.ts';
import { emptyQuantity, typeQuantity } from '../../ui/quantity-draft.ts';
import { type BasisValues, basisRequest, basisValues, emptySize, emptyStep, RATE_KINDS } from './basis-values.ts';
import { branchesOf, type LineSetValues, lineSetRequest, nextBranchName } from './line-set-values.ts';
import { changedUnitRequest, emptyUnit, type NewUnitValues, newUnitRequest, serialPlaces } from './unit-values.ts';

const READS = { locale: 'en-US', mass: 'g', length: 'ft', pressure: 'psig' } as const;
const MIDNIGHT = '2026-11-30T00:00:00-05:00';
const SITE = '0193a000-0000-7000-8000-000000000001';
let ids = 10;
const newId = () => `0193a000-0000-7000-8000-${String(ids++).padStart(12, '0')}`;
const mass = (text: string) => typeQuantity(emptyQuantity<'mass'>('g'), text);
const length = (text: string) => typeQuantity(emptyQuantity<'length'>('ft'), text);
const rate = (text: string) => typeQuantity(emptyQuantity<'massPerLength'>('g/m'), text);

function unitOf(change: Partial<NewUnitValues>) {
  const values: NewUnitValues = {
    ...emptyUnit(READS, { newId, today: '2026-11-30', siteId: SITE }),
    tag: '0412',
    name: 'back bedroom',
    refrigerant: 'R-32',
    fullCharge: mass('1200'),
    initialMass: mass('2 lb 10 oz'),
    ...change,
  };
  return newUnitRequest(values, { locale: 'en-US', instantOf: () => MIDNIGHT });
}

describe('A new unit', () => {
  it('begins with its factory charge and its full charge, each as it was typed', () => {
    const request = createUnitRequest.parse(unitOf({}).request);
    expect(request.initialCharge).toMatchObject({ state: 'factory', mass: { value: '42', unit: 'oz' }, at: MIDNIGHT });
    expect(request.fullCharge).toMatchObject({ mass: { value: '1200', unit: 'g' }, method: 'manufacturer' });
  });
  it('may honestly be not known, not determined and without a readable nameplate', () => {
    const request = createUnitRequest.parse(
      unitOf({ initial: 'notKnown', fullChargeKnown: 'no', nameplateReadable: false }).request,
    );
    expect(request).toMatchObject({ initialCharge: { state: 'notKnown' }, fullCharge: null, nameplateReadable: false });
    expect(request.serials).toEqual([]);
  });
  it('asks where a separator may mean two things, and says what is missing', () => {
    expect(unitOf({ fullCharge: mass('1,200') }).unreadable).toEqual(['fullCharge']);
    const missing = createUnitRequest.safeParse(unitOf({ tag: '', initialMass: mass('') }).request);
    expect(missing.error?.issues.map(({ path }) => path.join('/'))).toEqual(['tag', 'initialCharge/mass']);
  });
  it('leaves empty rows of serials out and still finds the row that is wrong', () => {
    const serials = [
      { part: 'outdoor', serial: '', model: '' },
      { part: 'indoor', serial: 'HI4-1', model: '' },
    ];
    expect(createUnitRequest.parse(unitOf({ serials }).request).serials).toEqual([
      { part: 'indoor', serial: 'HI4-1', model: null },
    ]);
    expect(serialPlaces(serials)).toContainEqual(['/serials/0', 'serials.1.serial']);
  });
});

describe('A changed unit', () => {
  it('sends only what was changed', () => {
    const before = emptyUnit(READS, { newId, today: '2026-11-30', siteId: SITE });
    const now = { ...before, name: 'front bedroom' };
    expect(changedUnitRequest(now, before, 'en-US').request).toEqual({ name: 'front bedroom' });
  });
});

describe('A line set', () => {
  const lineSet = (change: Partial<LineSetValues['branches'][number]>) => {
    const [branch] = branchesOf(null, READS);
    const values = {
      id: newId(),
      validFrom: '2026-11-30T10:00',
      branches: [
        { ...(branch as NonNullable<typeof branch>), liquidOd: '6.35', length: length('39ft 4in'), ...change },
      ],
      note: '',
    };
    return lineSetRequest(values, { locale: 'en-US', instantOf: () => MIDNIGHT, notWhole: (typed) => `not ${typed}` });
  };

  it('keeps what was typed beside the metres', () => {
    // 39 ft 4 in = 472 in = 11.9888 m (1 in = 25.4 mm, exact).
    expect(addLineSetRequest.parse(lineSet({}).request).branches[0]).toMatchObject({
      liquidOdMm: 6.35,
      lengthM: 11.9888,
      typedLength: { value: '472', unit: 'in' },
    });
  });
  it('may fall as well as rise, and names a count that is no whole number', () => {
    const { request } = lineSet({ rise: length('-3 m') });
    expect(addLineSetRequest.parse(request).branches[0]?.riseM).toBe(-3);
    expect(lineSet({ bends: '1.5' }).unreadable).toEqual([{ field: 'branches.0.bends', message: 'not 1.5' }]);
  });
  it('counts a pipe as checked only where it is a reused one', () => {
    expect(lineSet({ reuseChecked: true }).request.branches[0]).toMatchObject({ reused: false, reuseChecked: false });
  });
  it('names branches A, B, C and takes the first that is free', () => {
    expect(nextBranchName([{ name: 'A' }, { name: 'C' }])).toBe('B');
  });
});

describe('A charge basis', () => {
  const basisOf = (change: Partial<BasisValues>) =>
    basisRequest(
      {
        ...basisValues(null, READS, { id: newId(), validFrom: '2026-11-30T10:00' }),
        document: 'Installation manual',
        page: '14',
        factoryCharge: mass('1200'),
        prechargeLength: length('7.5 m'),
        rate: rate('20'),
        sizes: [{ ...emptySize(READS), od: '6.35', rate: rate('20') }],
        steps: [{ ...emptyStep(READS), upTo: length('10 m'), extra: mass('0') }],
        expression: '20 * (L - Lp)',
        fixedMass: mass('-40'),
        ...change,
      },
      { locale: 'en-US', refrigerant: 'R-32', instantOf: () => MIDNIGHT, notNumber: (typed) => `not ${typed}` },
    );

  it.each(RATE_KINDS)('of the kind %s is what the shared schema takes', (rateKind) => {
    const request = addChargeBasisRequest.parse(basisOf({ rateKind }).request);
    expect(request.basis.rate.kind).toBe(rateKind);
    expect(request.manual).toEqual({ document: 'Installation manual', page: '14' });
  });
  it('has no pre-charged length where brackets or a letter say it all', () => {
    expect(basisOf({ rateKind: 'stepped' }).request.basis.precharge).toBeNull();
    expect(basisOf({ rateKind: 'flat' }).request.basis.precharge).toMatchObject({ scope: 'system', lengthM: 7.5 });
  });
  it('names what the manual has to say and does not', () => {
    const missing = addChargeBasisRequest.safeParse(basisOf({ document: '', rate: rate('') }).request);
    expect(missing.error?.issues.map(({ path }) => path.join('/')).sort()).toEqual([
      'basis/rate/gPerM',
      'manual/document',
    ]);
    const { unreadable } = basisOf({ allowances: [{ label: 'head', each: mass('50'), count: 'two', factor: '' }] });
    expect(unreadable).toEqual([{ field: 'allowances.0.count', message: 'not two' }]);
  });
  it('begins with the one on record', () => {
    const { request } = basisOf({ rateKind: 'byLiquidPipe' });
    const { basis } = addChargeBasisRequest.parse(request);
    const stored = {
      id: newId(),
      unitId: SITE,
      validFrom: MIDNIGHT,
      basis,
      manual: { document: 'M', page: null },
      note: null,
    };
    const again = basisRequest(basisValues(stored, READS, { id: newId(), validFrom: '' }), {
      locale: 'en-US',
      refrigerant: 'R-32',
      instantOf: () => MIDNIGHT,
      notNumber: String,
    });
    expect(addChargeBasisRequest.parse(again.request).basis).toEqual(basis);
  });
});
