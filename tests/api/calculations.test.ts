import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { everyCalculation } from '../../shared/calculations/calculations.ts';
import { startTestApp, type TestApp } from '../support/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await startTestApp();
});
afterAll(() => app.close());

/** An invented unit: R-32, 1,200 g in it, 7.5 m pre-charged, 20 g/m. */
const buildCharge = (change: { basis?: object; lengthM?: number; lineSet?: object } = {}) => ({
  job: 'newInstall',
  basis: {
    refrigerant: 'R-32',
    factoryChargeG: 1200,
    precharge: { scope: 'system', lengthM: 7.5, allocation: null },
    rate: { kind: 'flat', gPerM: 20 },
    metering: 'unknown',
    allowances: [],
    limits: { minLengthM: 3, maxLengthM: 25, maxBranchM: null, maxRiseM: 10, maxDropM: null, maxTotalChargeG: null },
    rounding: { toG: 1, direction: 'nearest' },
    shortLine: 'none',
    ...change.basis,
  },
  lineSet: {
    branches: [
      {
        name: 'A',
        parent: null,
        liquidOdMm: 6.35,
        gasOdMm: 9.52,
        lengthM: change.lengthM ?? 12,
        riseM: 3,
        bends: 0,
        equivalentMPerBend: 0,
      },
    ],
    ...change.lineSet,
  },
  previousLineSet: null,
  gwpSet: 'EU-2024-573',
});
const charge = (body: unknown, headers?: Record<string, string>) =>
  app.visitor().post('/calculations/charge', body, headers ? { headers } : {});

describe('The extra charge, asked for by anybody', () => {
  it.each([
    [12, 90, 1290],
    [7.5, 0, 1200],
    [5, 0, 1200],
  ])(
    'for %d m is %d g, %d g in all (the example of the brief: (12.0 - 7.5) m x 20 g/m)',
    async (lengthM, extraG, totalG) => {
      const { status, body } = await charge(buildCharge({ lengthM }));
      expect(status).toBe(200);
      expect(body).toMatchObject({ extraG, totalG, weighInG: extraG, recoverG: 0, gwpSet: 'EU-2024-573' });
      expect(body.steps.length).toBeGreaterThan(1);
    },
  );

  it('out of the limits is refused with the value, the limit and its place, and no figure', async () => {
    const { status, body, headers } = await charge(buildCharge({ lengthM: 26 }));
    expect(status).toBe(422);
    expect(headers.get('content-type')).toMatch(/^application\/problem\+json/);
    expect(body.errors).toMatchObject([{ path: '/lineSet/branches', given: 26, allowed: 25 }]);
    expect(JSON.stringify(body)).not.toMatch(/extraG|totalG/);
  });

  it('is worked out by the manual’s formula too, and a formula that reaches further is refused at its place', async () => {
    const by = (expression: string) =>
      charge(buildCharge({ basis: { precharge: null, rate: { kind: 'formula', expression } } }));
    expect((await by('(L - 7.5) * 20')).body).toMatchObject({ extraG: 90 });
    const hostile = await by('constructor.constructor("return process")()');
    expect(hostile.status).toBe(422);
    expect(hostile.body.errors[0].path).toBe('/basis/rate/expression');
  });

  it('is explained and refused in the language asked for', async () => {
    const spanish = { 'Accept-Language': 'es-ES,es;q=0.9' };
    const english = await charge(buildCharge({ lengthM: 26 }));
    const refused = await charge(buildCharge({ lengthM: 26 }), spanish);
    expect(refused.body.title).toBe('No válido');
    expect(refused.body.errors[0].message).not.toBe(english.body.errors[0].message);
    const explained = await charge(buildCharge(), spanish);
    const labels = (answer: { body: { steps: { label: string }[] } }) => answer.body.steps.map(({ label }) => label);
    expect(labels(explained)).not.toEqual(labels(await charge(buildCharge())));
  });

  it('names a key that it does not know and a number that came as text', async () => {
    const { body } = await charge({
      ...buildCharge(),
      colour: 'red',
      basis: { ...buildCharge().basis, factoryChargeG: '1200' },
    });
    expect(body.code).toBe('requestNotValid');
    expect(body.errors).toEqual(
      expect.arrayContaining([
        expect.objectContaining({ path: '/colour', code: 'unknownKey' }),
        expect.objectContaining({ path: '/basis/factoryChargeG', code: 'wrongType', given: '1200', allowed: 'number' }),
      ]),
    );
  });
});

describe('Every calculation', () => {
  it.each(everyCalculation().map(({ path }) => path))(
    '%s is there for anybody, and refuses an empty request field by field',
    async (path) => {
      const { status, body } = await app.visitor().post(path, {});
      expect(status).toBe(422);
      expect(body.errors.length).toBeGreaterThan(0);
      for (const error of body.errors) {
        expect(error.code).toMatch(/^[a-z]\w+$/);
        expect(error.message).not.toMatch(/^problem\./);
      }
    },
  );

  it('says its cautions in words (70 % for flammables is common practice, no standard)', async () => {
    const { status, body } = await app
      .visitor()
      .post('/calculations/cylinder-fill', { refrigerant: 'R-290', waterCapacityG: 20000, tareG: 12000 });
    expect(status).toBe(200);
    expect(body.cautions.length).toBeGreaterThan(0);
    for (const caution of body.cautions) expect(caution.message).toMatch(/\s/);
  });

  it('reads no session: it works the same with a cookie that is none', async () => {
    const visitor = app.visitor();
    visitor.cookie = 'tarewright=s%3Anonsense.nonsense';
    expect((await visitor.post('/calculations/charge', buildCharge())).status).toBe(200);
  });

  it('cannot be asked more than 600 times a minute from one address, and says how many are left', async () => {
    const limited = await startTestApp();
    try {
      const ask = () => limited.visitor().post('/calculations/joint-torque', { odMm: 6.35 });
      const first = await ask();
      expect(first.status).toBe(200);
      expect(first.headers.get('ratelimit-policy')).toContain('q=600; w=60');
      expect(first.headers.get('ratelimit')).toContain('r=599');
      for (let batch = 0; batch < 20; batch++) await Promise.all(Array.from({ length: 30 }, ask));
      const refused = await ask();
      expect(refused.status).toBe(429);
      expect(refused.body).toMatchObject({ code: 'tooManyRequests', status: 429 });
      expect(refused.headers.get('content-type')).toMatch(/^application\/problem\+json/);
      expect(Number(refused.headers.get('retry-after'))).toBeGreaterThan(0);
      expect((await limited.visitor().get('/health')).status).toBe(200);
    } finally {
      await limited.close();
    }
  });
});
