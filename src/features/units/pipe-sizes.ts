import tubes from '../../../data/tubes.json';
import { pipeSizes } from '../../../shared/charge/pipe-size.ts';
import type { Tube } from '../../../shared/reference/tube.ts';
import type { Preferences } from '../../../shared/session/session.schema.ts';
import { formatNumber, NBSP } from '../../lib/format.ts';
import type { Choice } from '../../ui/field.tsx';

const all = tubes.rows as unknown as readonly Tube[];
const sizes = pipeSizes(all);

type Reads = Pick<Preferences, 'locale' | 'length'>;

/** `1/4` of the inch series; null for a metric size. */
function inchesOf(odMm: number): string | null {
  const size = sizes.find(odMm);
  const row = all.find(
    (tube) =>
      tube.standard === 'ASTM B280' && /^[\d/-]+ in$/.test(tube.nominal) && sizes.find(tube.odMm)?.odMm === size?.odMm,
  );
  return row && size ? row.nominal.replace(' in', '') : null;
}

/** A pipe as the person reads sizes: `1/4 in` where lengths are in feet, else `6.35 mm`. */
export function pipeText(odMm: number, { locale, length }: Reads): string {
  const inches = length === 'ft' ? inchesOf(odMm) : null;
  return inches ? `${inches}${NBSP}in` : `${formatNumber(locale, odMm, 2)}${NBSP}mm`;
}

/** Every nominal size, both ways of naming it, the person's own first. */
export function pipeSizeChoices({ locale, length }: Reads): Choice[] {
  return sizes.all.map(({ odMm }) => {
    const mm = `${formatNumber(locale, odMm, 2)}${NBSP}mm`;
    const inches = inchesOf(odMm);
    const inch = inches === null ? null : `${inches}${NBSP}in`;
    return {
      value: String(odMm),
      label: inch === null ? mm : length === 'ft' ? `${inch} (${mm})` : `${mm} (${inch})`,
    };
  });
}

/** The label of a step, which names pipes by their size in mm, with the names that this person knows them by. */
export const inPipeNames = (label: string, reads: Reads): string =>
  label.replace(/(\d+(?:[.,]\d+)?)[ \u00a0]mm\b/g, (_, od: string) => pipeText(Number(od.replace(',', '.')), reads));
