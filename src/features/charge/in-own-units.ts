import type { Preferences } from '../../../shared/session/session.schema.ts';
import { formatsFor } from '../../lib/format.ts';
import { decimalSeparatorOf } from '../../ui/quantity-draft.ts';
import { pipeName } from './pipe-choices.ts';

const FIGURE = /(\d[\d.,]*)(?: (to|a|y) (\d[\d.,]*))?[ \u00a0](mm|m|g\/m|g)(?![\w/²³])/g;

/**
 * A sentence of the engine, which counts in mm, m, g and g/m, with its figures in this person's units. Where two figures
 * that differ would then read the same (a run a hair over its limit) the sentence stays as it is.
 */
export function inOwnUnits(sentence: string, preferences: Preferences): string {
  const { length, mass, locale } = preferences;
  const ounces = mass === 'oz' || mass === 'lbOz';
  if (length === 'm' && !ounces) return sentence;
  const format = formatsFor(preferences);
  const decimal = decimalSeparatorOf(locale);
  const read = (figure: string) => Number(figure.replaceAll(decimal === ',' ? '.' : ',', '').replace(decimal, '.'));
  const said = new Map<string, string>();
  let tells = true;
  const own = (figure: string, unit: string): string => {
    // The full stop of a sentence, or a comma after the figure, is none of its digits.
    const value = read(figure);
    const text =
      unit === 'mm'
        ? pipeName(value, preferences)
        : unit === 'm'
          ? format.length(value)
          : unit === 'g'
            ? format.mass(value)
            : format.rate(value);
    const before = said.get(text);
    if (before !== undefined && before !== `${value} ${unit}`) tells = false;
    said.set(text, `${value} ${unit}`);
    return text;
  };
  const turned = sentence.replace(FIGURE, (_, first: string, to: string | undefined, second: string, unit: string) =>
    to ? `${own(first, unit)} ${to} ${own(second, unit)}` : own(first, unit),
  );
  return tells ? turned : sentence;
}
