import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { BeamSpec } from './beam-spec.ts';
import { layOutBeam } from './lay-out-beam.ts';
import { meets, placeLabels } from './place-labels.ts';
import { chargeBeam, cylinderBeam, periodBeam, unitBeam, weighInBeam } from './presets.ts';

const GRAMS = { gramsPer: 1, unit: 'g' };
const show = (value: number) => value.toLocaleString('en-US');
const beamWidth = fc.integer({ min: 280, max: 1200 });
const mass = fc.integer({ min: 1, max: 40_000 });

/** No label touches another or leaves the drawing, no stem crosses a text, no two figures touch. */
function expectReadable(spec: BeamSpec, width: number) {
  const layout = layOutBeam(spec, width, show);
  for (const [labels, stems] of [
    [layout.above, true],
    [layout.below, false],
    [layout.namesAbove, false],
  ] as const) {
    for (const [index, label] of labels.entries()) {
      expect(label.x).toBeGreaterThanOrEqual(0);
      expect(label.x + label.width).toBeLessThanOrEqual(width);
      for (const other of labels.slice(index + 1)) expect(meets(label, other, { gap: 8, stems })).toBe(false);
    }
  }
  return layout;
}

describe('Labels on the beam', () => {
  it('never collide, whatever is to be said and however narrow the place', () => {
    const text = fc.string({ unit: fc.constantFrom(...'abcmW 0123.,'), minLength: 1, maxLength: 34 });
    const spec = fc.record({
      end: fc.integer({ min: 10, max: 100_000 }),
      marks: fc.array(fc.tuple(fc.double({ min: 0, max: 1.3, noNaN: true }), text), { maxLength: 5 }),
      poise: fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), text),
      cuts: fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { maxLength: 4 }),
    });
    fc.assert(
      fc.property(spec, beamWidth, ({ end, marks, poise, cuts }, width) => {
        const edges = [0, ...cuts.sort((a, b) => a - b)];
        expectReadable(
          {
            domain: [0, end],
            unit: 'g',
            segments: edges.slice(1).map((to, index) => ({
              from: (edges[index] as number) * end,
              to: to * end,
              kind: 'rest' as const,
              label: `part ${index} ${Math.round(to * end)} g`,
            })),
            marks: marks.map(([at, label]) => ({ at: at * end, label, kind: 'limit' as const })),
            poise: { at: poise[0] * end, label: poise[1], kind: 'move' as const },
          },
          width,
        );
      }),
      { numRuns: 600 },
    );
  });

  it('all find their place where there are three of a usual length, even at one point', () => {
    fc.assert(
      fc.property(
        beamWidth,
        fc.tuple(...[0, 1, 2].map(() => fc.double({ min: 0, max: 1, noNaN: true }))),
        (width, at) => {
          const wishes = at.map((share, key) => ({ key: String(key), at: share * width, width: 110, weight: 1 }));
          expect(placeLabels(wishes, { width, gap: 8, rows: 4, stems: true })).toHaveLength(3);
        },
      ),
    );
  });

  it('give way by weight: a note is dropped before a stop', () => {
    const wishes = [
      { key: 'note', at: 100, width: 250, weight: 1 },
      { key: 'stop', at: 110, width: 250, weight: 4 },
    ];
    expect(placeLabels(wishes, { width: 280, gap: 8, rows: 1, stems: true }).map((label) => label.key)).toEqual([
      'stop',
    ]);
  });
});

describe('Every preset of the beam', () => {
  it('stays readable from 280 to 1200 px for any masses', () => {
    fc.assert(
      fc.property(mass, mass, mass, beamWidth, (a, b, c, width) => {
        const label = (name: string, massG: number) => ({ massG, label: `${name} ${show(massG)} g` });
        expectReadable(
          chargeBeam(
            {
              factory: label('factory', a),
              extra: label('extra', b - c),
              total: label('total', Math.max(a + b - c, 0)),
              noCheckUpTo: label('no room check up to', 1842),
              stops: [label('room limit', c)],
            },
            GRAMS,
          ),
          width,
        );
        expectReadable(
          cylinderBeam(
            {
              tare: label('tare', a),
              heel: label('heel', 200),
              contents: label('contents', b),
              fillLimit: label('fill limit', a + c),
              gross: label('on the scale', a + b),
            },
            GRAMS,
          ),
          width,
        );
        expectReadable(
          weighInBeam(
            {
              start: label('start', a + b),
              now: label('now', a + c),
              stop: label('stop', a),
              toleranceG: 5,
              gone: 'gone in 68 g',
            },
            GRAMS,
          ),
          width,
        );
        expectReadable(
          unitBeam(
            { book: label('in the unit', a), lost: label('lost', b), fullCharge: label('full charge', c) },
            GRAMS,
          ),
          width,
        );
        expectReadable(
          periodBeam(
            {
              cameIn: [
                { ...label('on hand', a), kind: 'rest' },
                { ...label('bought', b), kind: 'move' },
              ],
              wentOut: [
                { ...label('into units', b), kind: 'move' },
                { ...label('on hand at the end', a), kind: 'rest' },
              ],
            },
            GRAMS,
          ),
          width,
        );
      }),
      { numRuns: 300 },
    );
  });

  it('is drawn to scale: half the mass is half the way', () => {
    const layout = layOutBeam(
      { domain: [0, 2000], unit: 'g', segments: [{ from: 0, to: 1000, kind: 'rest', label: 'factory' }] },
      600,
      show,
    );
    const [segment] = layout.segments;
    expect(segment?.width).toBeCloseTo((layout.right - layout.left) / 2, 6);
  });

  it('counts downwards from left to right when a cylinder becomes lighter', () => {
    const layout = layOutBeam(
      weighInBeam(
        {
          start: { massG: 8505, label: 'start 8,505 g' },
          now: { massG: 8437, label: '8,437 g' },
          stop: { massG: 8415, label: 'stop 8,415 g' },
          toleranceG: 5,
          gone: '68 g in',
        },
        GRAMS,
      ),
      324,
      show,
    );
    const [start, stop] = layout.marks;
    expect(start?.x).toBeLessThan(layout.poiseX ?? 0);
    expect(layout.poiseX).toBeLessThan(stop?.x ?? 0);
  });

  it('puts ticks at round values only', () => {
    const layout = layOutBeam({ domain: [0, 2000], unit: 'g', segments: [] }, 324, show);
    expect(layout.figures.map((figure) => figure.text)).toEqual(['0', '500', '1,000', '1,500', '2,000\u00a0g']);
  });

  it('points to a limit that the scale does not reach instead of squeezing the charge', () => {
    const spec = chargeBeam(
      {
        factory: { massG: 600, label: 'factory 600 g' },
        extra: { massG: 40, label: 'extra 40 g' },
        total: { massG: 640, label: 'total 640 g' },
        noCheckUpTo: { massG: 1842, label: 'no room check up to 1,842 g' },
      },
      GRAMS,
    );
    expect(spec.domain[1]).toBeLessThan(1842);
    expect(layOutBeam(spec, 324, show).marks[0]).toMatchObject({ beyond: true });
  });
});
