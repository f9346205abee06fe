import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { LENGTH_FACTORS, MASS_FACTORS } from '../units/factors.ts';
import { roundTo } from '../units/round.ts';
import { charge, lineSetOf, pipe } from './charge-request.fixture.ts';
import { compileFormula } from './formula.ts';
import { type LineUnits, type LineWriter, SI_LINES, writtenLines } from './written-line.ts';

const FT = LENGTH_FACTORS.ft.perUnit.valueOf();
const OZ = MASS_FACTORS.oz.perUnit.valueOf();
const OZ_FT = OZ / FT;
const POUNDS: LineUnits = { length: 'ft', mass: 'lbOz', rate: 'oz/ft' };

const writer: LineWriter = {
  number: (value, most, least = 0) =>
    new Intl.NumberFormat('en-US', { maximumFractionDigits: most, minimumFractionDigits: least })
      .format(roundTo(value, most))
      .replace('-', '\u2212'),
  say: (key, params) => `${key}(${Object.values(params).join('; ')})`,
};
type Asked = Parameters<typeof charge>;
/** As people read them: no-break spaces are for the eye. */
const lines = (units: LineUnits, ...asked: Asked) =>
  writtenLines(charge(...asked).steps, units, writer).map((line) => line.join(' = ').replaceAll('\u00a0', ' '));

describe('The arithmetic of a charge, as a reader writes it', () => {
  // 41 ft of quarter-inch pipe, 25 ft pre-charged, 0.21 oz/ft, factory charge 2 lb 12 oz: 16 ft x 0.21 oz/ft = 3.36 oz.
  const typed: Asked = [
    {
      factoryChargeG: 44 * OZ,
      precharge: { scope: 'system', lengthM: 25 * FT },
      rate: { kind: 'flat', gPerM: 0.21 * OZ_FT },
      rounding: { toG: 1, direction: 'nearest' },
    },
    [pipe(41 * FT)],
  ];

  it('is in feet and ounces for who typed feet and ounces', () => {
    expect(lines(POUNDS, ...typed).slice(0, 4)).toEqual([
      '41 ft \u2212 25 ft = 16 ft',
      '16 ft × 0.21 oz/ft = 3.36 oz',
      '3.36 oz = line.round.nearest(95.25 g; 1 g) = 95 g = 3.35 oz',
      '44 oz + 3.35 oz = 47.35 oz = 2 lb 15.35 oz',
    ]);
  });

  it('works the rate in its own units where a gram scale is read, or pipe is measured in feet', () => {
    expect(lines({ ...POUNDS, mass: 'g' }, ...typed).slice(0, 3)).toEqual([
      '41 ft \u2212 25 ft = 16 ft',
      '16 ft × 0.21 oz/ft = 3.36 oz = 95.25 g',
      'line.round.nearest(95.25 g; 1 g) = 95 g',
    ]);
    expect(lines({ length: 'ft', mass: 'g', rate: 'g/m' }, {}, [pipe(40 * FT)]).slice(0, 2)).toEqual([
      '40 ft \u2212 24.61 ft = 15.39 ft',
      '4.692 m (15.39 ft) × 20 g/m = 93.84 g',
    ]);
  });

  it('says a rounding in words, in ounces where the step is one of ounces', () => {
    const rounding = { toG: OZ / 10, direction: 'up' as const };
    expect(lines(POUNDS, { ...typed[0], rounding }, typed[1])[2]).toBe('line.round.up(3.36 oz; 0.1 oz) = 3.4 oz');
    const kept = { toG: 2.835, direction: 'nearest' as const };
    expect(lines(POUNDS, { ...typed[0], rounding: kept }, typed[1])[2]).toBe(
      'line.round.nearest(3.36 oz; 0.1 oz) = 3.4 oz',
    );
    // 12.301 m - 7.5 m at 20 g/m are 96.02 g: cut to 96 g the line would say that 96 g goes up to 97 g.
    const up = { toG: 1, direction: 'up' as const };
    expect(lines(SI_LINES, { rounding: up }, [pipe(12.30001)])[2]).toBe('line.round.up(96.0002 g; 1 g) = 97 g');
  });

  it('leaves metres, grams and the decimals that say something to who reads those', () => {
    expect(lines(SI_LINES, {}, [pipe(12)]).slice(0, 3)).toEqual([
      '12.0 m \u2212 7.5 m = 4.5 m',
      '4.5 m × 20 g/m = 90 g',
      '1,200 g + 90 g = 1,290 g',
    ]);
  });

  it('says what a short pipe does without the name of a function', () => {
    expect(lines(POUNDS, { ...typed[0] }, [pipe(20 * FT)]).slice(0, 3)).toEqual([
      '20 ft \u2212 25 ft = \u22125 ft',
      '\u22125 ft × 0.21 oz/ft = \u22121.05 oz',
      'line.notBelowZero(\u22121.05 oz) = 0 oz',
    ]);
    const branch = { precharge: { scope: 'branch' as const, lengthM: 5 } };
    expect(lines(SI_LINES, branch, [pipe(8), pipe(3, 6.35, { name: 'B' })]).slice(0, 2)).toEqual([
      '(8.0 m \u2212 5.0 m) × 20 g/m = 60 g',
      '(line.notBelowZero(3.0 m \u2212 5.0 m)) × 20 g/m = 0 g',
    ]);
  });

  it('shows in metres too what goes into a formula, which counts in metres and grams', () => {
    const rate = { kind: 'formula' as const, expression: 'max(0, L - Lp) * 20.5 + N' };
    expect(lines(POUNDS, { rate }, [pipe(40 * FT)]).slice(0, 4)).toEqual([
      '40 ft = 12.192 m',
      '1',
      '24.61 ft = 7.5 m',
      'max(0, L \u2212 Lp) * 20.5 + N = 97.19 g = 3.43 oz',
    ]);
  });

  it('names the bracket that holds a length', () => {
    const rate = { kind: 'stepped' as const, steps: [{ upToM: 50 * FT, extraG: 200 }] };
    expect(lines(POUNDS, { precharge: null, rate }, [pipe(40 * FT)])[0]).toBe('line.bracket(40 ft; 50 ft) = 7.05 oz');
  });
});

/** With a pencil: the figures of a part as they stand, without what stands in brackets beside them or their units. */
function workOut(part: string): number {
  const bare = part
    .replaceAll('\u00a0', ' ')
    .replace(/(\d [a-z/]+) \(−?[\d.,]+ [a-z]+\)/g, '$1')
    .replace(/line\.notBelowZero\((.*?)\)(?=\) ×|$)/g, 'max(0, $1)')
    .replace(/ (mm²|kg\/m³|kg|g\/m|g\/ft|oz\/ft|oz|ft|g|m|t)(?![a-z])/g, '')
    .replace(/(\d),(\d)/g, '$1$2')
    .replaceAll('\u2212', '-')
    .replaceAll('×', '*');
  const compiled = compileFormula(bare, new Set());
  if (!compiled.ok) throw new Error(`${part}: ${JSON.stringify(compiled.refusals)}`);
  return compiled.value.evaluate(new Map()) ?? Number.NaN;
}

const decimalsOf = (figure: string) => /\.(\d+)/.exec(figure)?.[1]?.length ?? 0;
const PER: Record<string, number> = { m: 1, ft: FT, g: 1, kg: 1000, oz: OZ, 'g/m': 1, 'oz/ft': OZ_FT, t: 1, '': 1 };

describe('Every line in every unit', () => {
  const length = fc.oneof(
    fc.integer({ min: 0, max: 3000 }).map((cm) => cm / 100),
    fc.integer({ min: 0, max: 1200 }).map((inches) => (inches * FT) / 12),
  );
  const rate = fc.oneof(
    fc.integer({ min: 10, max: 600 }).map((tenths) => tenths / 10),
    fc.integer({ min: 10, max: 90 }).map((hundredths) => (hundredths / 100) * OZ_FT),
  );
  const units = fc.record<LineUnits>({
    length: fc.constantFrom('m', 'ft'),
    mass: fc.constantFrom('g', 'oz', 'lbOz'),
    rate: fc.constantFrom('g/m', 'oz/ft'),
  });
  const precharge = fc.oneof(
    length.map((lengthM) => ({ scope: 'system' as const, lengthM })),
    length.map((lengthM) => ({ scope: 'branch' as const, lengthM })),
    length.map((lengthM) => ({ scope: 'systemPerBranch' as const, lengthM })),
    fc.integer({ min: 0, max: 900 }).map((massG) => ({ scope: 'mass' as const, massG })),
  );
  const asked = fc.record({
    runs: fc.array(length, { minLength: 1, maxLength: 3 }),
    gPerM: rate,
    precharge,
    factory: fc.oneof(
      fc.integer({ min: 500, max: 4000 }),
      fc.integer({ min: 20, max: 200 }).map((oz) => oz * OZ),
    ),
    rounding: fc.constantFrom(
      null,
      { toG: 1, direction: 'nearest' as const },
      { toG: 5, direction: 'up' as const },
      { toG: OZ / 10, direction: 'down' as const },
    ),
    each: fc.integer({ min: -80, max: 80 }),
    job: fc.constantFrom('newInstall' as const, 'lineSetChange' as const),
  });

  it('works out with a pencil to the figure beside it, and that is the figure of the step', () => {
    fc.assert(
      fc.property(asked, units, ({ runs, gPerM, precharge, factory, rounding, each, job }, own) => {
        const { steps } = charge(
          {
            factoryChargeG: factory + 100_000, // never below zero
            precharge,
            rate: { kind: 'flat', gPerM },
            rounding,
            allowances: [{ label: 'head', gEach: each, count: 2, factor: 1.1 }],
          },
          runs.map((run, index) => pipe(run, 6.35, { name: 'ABC'.charAt(index) })),
          job === 'lineSetChange' ? { job, previousLineSet: lineSetOf([pipe(4.4), pipe(9.1)]) } : {},
        );
        for (const [index, line] of writtenLines(steps, own, writer).entries()) {
          const step = steps[index] as (typeof steps)[number];
          const parts = line.map((part) => part.replaceAll('\u00a0', ' '));
          // The reader's own figure is that of the step, to its last digit.
          const [, figure = '', unit = ''] = /^(\u2212?[\d.,]+) ?(\S*)$/.exec(parts.at(-1) as string) ?? [];
          if (!parts.at(-1)?.includes(' lb ')) {
            const told = workOut(figure) * (PER[unit] as number);
            const tolerance = 0.5000001 * 10 ** -decimalsOf(figure) * (PER[unit] as number) + 0.0006;
            expect([step.expression, parts, Math.abs(told - step.value) <= tolerance]).toEqual([
              step.expression,
              parts,
              true,
            ]);
          }
          const [first = '', second = ''] = parts;
          if (parts.length < 2 || parts.some((part) => part.includes('line.round')) || !/[×/+\u2212(] /.test(first)) {
            continue;
          }
          const arrived = roundTo(workOut(first), decimalsOf(second));
          expect([step.expression, parts, arrived]).toEqual([step.expression, parts, workOut(second)]);
        }
      }),
      { numRuns: 400 },
    );
  });

  it('of a rounding, cut as it is shown, still rounds to what it says', () => {
    const directions = fc.constantFrom('nearest' as const, 'up' as const, 'down' as const);
    fc.assert(
      fc.property(length, rate, directions, fc.constantFrom(1, 5, 10), units, (run, gPerM, direction, toG, own) => {
        const { steps } = charge({ precharge: null, rate: { kind: 'flat', gPerM }, rounding: { toG, direction } }, [
          pipe(run),
        ]);
        const index = steps.findIndex(({ code }) => code === 'rounded');
        const line = writtenLines(steps, own, writer)[index] ?? [];
        const said = line.map((part) => /line\.round\.(\w+)\((\S+?)\sg; (\S+?)\sg\)/.exec(part)).find(Boolean);
        if (!said) throw new Error(JSON.stringify(line));
        const quotient = workOut(String(said[2])) / Number(said[3]);
        const whole = { nearest: Math.round, up: Math.ceil, down: Math.floor }[direction](roundTo(quotient, 9));
        expect([line, whole * Number(said[3])]).toEqual([line, steps[index]?.value]);
      }),
      { numRuns: 300 },
    );
  });
});
