import { beforeAll, describe, expect, it } from 'vitest';
import { formatsFor } from '../../lib/format.ts';
import { loadMessages, startMessages, translate } from '../../lib/messages.ts';
import { changePreferences, preferencesFor } from '../../lib/preferences.ts';
import { layOutBeam } from '../../ui/beam/lay-out-beam.ts';
import { beamSummary, fullCylinderBeam, isNearLimit, isOverLimit, smallCylinderBeam } from './cylinder-beam.ts';

const GRAMS = { gramsPer: 1, unit: 'g' };
const words = () => ({ t: translate, format: formatsFor(preferencesFor('en-GB')) });
/** A figure and its unit stay on one line; here a plain space is easier to read. */
const plain = (text: string | undefined) => text?.replaceAll('\u00a0', ' ');
/** The cylinder of the look's pictures: 11.34 kg of R-32 over a tare of 6,105 g. */
const bottle = { tag: '7741', tareG: 6105, contentG: 11_340, limitG: 12_224 };

beforeAll(async () => {
  changePreferences(preferencesFor('en-GB'));
  await startMessages();
  await loadMessages('cylinders-screen');
});

describe('A cylinder on its beam', () => {
  it('lies as on the scale: tare, heel and what is beyond it, one after the other, to scale', () => {
    const { segments } = fullCylinderBeam(bottle, 669, words(), GRAMS);
    expect(segments.map(({ from, to, kind }) => [from, to, kind])).toEqual([
      [0, 6105, 'free'],
      [6105, 6774, 'gone'],
      [6774, 17_445, 'rest'],
    ]);
    expect(segments.map(({ label }) => plain(label))).toEqual([
      'tare 6,105 g',
      'heel 669 g',
      'beyond the heel 10,671 g',
    ]);
  });

  it('has its poise where the scale stands and its fill limit as a stop, both gross', () => {
    const { poise, marks } = fullCylinderBeam(bottle, null, words(), GRAMS);
    expect([poise?.at, plain(poise?.label)]).toEqual([17_445, 'on the scale 17,445 g']);
    expect(marks?.map(({ at, kind, label }) => [at, kind, plain(label)])).toEqual([
      [18_329, 'stop', 'fill limit 18,329 g'],
    ]);
  });

  it('holds no more heel than content, and none when it is empty', () => {
    const nearlyEmpty = fullCylinderBeam({ ...bottle, contentG: 300 }, 669, words(), GRAMS);
    expect(nearlyEmpty.segments.map(({ to, kind }) => [to, kind])).toEqual([
      [6105, 'free'],
      [6405, 'gone'],
    ]);
    const empty = fullCylinderBeam({ ...bottle, contentG: 0 }, 669, words(), GRAMS);
    expect(empty.segments.map(({ kind }) => kind)).toEqual(['free']);
  });

  it('shows what is past its limit beyond the stop, with room on the scale for both', () => {
    const { domain, poise, marks } = smallCylinderBeam({ ...bottle, limitG: 9137 }, words(), GRAMS);
    expect(poise?.at).toBeGreaterThan(marks?.[0]?.at ?? 0);
    expect(domain[1]).toBeGreaterThan(poise?.at ?? 0);
  });

  it('has no stop where it has no limit, and says so', () => {
    const noLimit = { ...bottle, limitG: null };
    expect(smallCylinderBeam(noLimit, words(), GRAMS).marks).toEqual([]);
    expect(plain(beamSummary(noLimit, words()))).toBe('Cylinder 7741: tare 6,105 g, contents 11,340 g, no fill limit.');
    expect(plain(beamSummary(bottle, words()))).toBe(
      'Cylinder 7741: tare 6,105 g, contents 11,340 g, fill limit 12,224 g.',
    );
  });

  it('names in a list only its limit, as the scale would show it: the other figures stand in the columns', () => {
    const layout = layOutBeam(smallCylinderBeam(bottle, words(), GRAMS), 400, String);
    expect(layout.above.map(({ text }) => plain(text))).toEqual(['limit 18,329 g']);
    expect(layout.below).toEqual([]);
  });

  it('counts in the unit that the person reads, at the same places', () => {
    const pounds = fullCylinderBeam(bottle, null, words(), { gramsPer: 453.59237, unit: 'lb' });
    expect(pounds.poise?.at).toBeCloseTo(38.46, 2);
    expect(pounds.unit).toBe('lb');
  });
});

describe('A fill limit', () => {
  it('is passed above it and not at it; the last twentieth is near it', () => {
    expect([isOverLimit({ contentG: 100, limitG: 100 }), isOverLimit({ contentG: 100.1, limitG: 100 })]).toEqual([
      false,
      true,
    ]);
    expect([95, 95.1, 100, 101].map((contentG) => isNearLimit({ contentG, limitG: 100 }))).toEqual([
      false,
      true,
      true,
      false,
    ]);
    expect([isOverLimit({ contentG: 100, limitG: null }), isNearLimit({ contentG: 100, limitG: null })]).toEqual([
      false,
      false,
    ]);
  });
});
