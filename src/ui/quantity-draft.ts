import type { Refusal } from '../../shared/problems/outcome.ts';
import { formatForInput } from '../../shared/units/format-quantity.ts';
import { parseQuantity, type UnderstoodPart } from '../../shared/units/parse-quantity.ts';
import { QUANTITIES, type QuantityKind, toBase, type UnitOf } from '../../shared/units/quantities.ts';
import type { SeparatorMeaning } from '../../shared/units/read-number.ts';

/**
 * A quantity as it stands in a form: the text, the unit of its field, and, once a switch of the unit or a stored value
 * has put the text there, the value that the text only shows. Plain JSON, so that a draft survives a reload.
 */
export interface QuantityDraft<Kind extends QuantityKind = QuantityKind> {
  text: string;
  unit: UnitOf<Kind>;
  /** The stored value: the text is its display and is not read again until a person edits it. */
  held?: { value: string; unit: UnitOf<Kind> };
  /** The answer to "1,250: which one is it?". */
  means?: SeparatorMeaning;
}

export type QuantityReading<Kind extends QuantityKind> =
  | { is: 'empty' }
  | {
      is: 'read';
      /** In the kind's base unit (g, m, mm, kPa, Pa, g/m, m2, L, N m, °C, K). */
      base: number;
      typed: { value: string; unit: UnitOf<Kind> };
      understoodAs: readonly UnderstoodPart<UnitOf<Kind>>[];
    }
  | { is: 'ambiguous'; options: readonly { means: SeparatorMeaning; value: string }[] }
  | { is: 'refused'; refusal: Refusal };

export interface ReadOptions {
  locale: string;
  allowNegative?: boolean;
}

/** The decimal separator that this locale's people type. */
export function decimalSeparatorOf(locale: string): '.' | ',' {
  let separator = separators.get(locale);
  if (!separator) {
    separator = (1.5).toLocaleString(locale).includes(',') ? ',' : '.';
    separators.set(locale, separator);
  }
  return separator;
}

const separators = new Map<string, '.' | ','>();

export const emptyQuantity = <Kind extends QuantityKind>(unit: UnitOf<Kind>): QuantityDraft<Kind> => ({
  text: '',
  unit,
});

/** A field that already holds a value, given in the kind's base unit; shown in `unit`. */
export function quantityOf<Kind extends QuantityKind>(
  kind: Kind,
  base: number,
  unit: UnitOf<Kind>,
  locale: string,
): QuantityDraft<Kind> {
  const baseUnit = QUANTITIES[kind].base as UnitOf<Kind>;
  return showTyped(kind, { value: decimalText(base), unit: baseUnit }, unit, locale);
}

/** A field that holds what a person typed earlier, exactly. */
export function quantityOfTyped<Kind extends QuantityKind>(
  kind: Kind,
  typed: { value: string; unit: UnitOf<Kind> },
  locale: string,
): QuantityDraft<Kind> {
  // `12ft 6in` is kept as 150 in: shown as a tape is read, and held as it is.
  const inches = Number(typed.value);
  if (kind === 'length' && typed.unit === 'in' && inches >= 24) {
    const feet = Math.floor(inches / 12);
    const rest = formatForInput('length', toBase('length', 'in', inches - feet * 12), 'in', { locale, decimals: 4 });
    return { text: rest === '0' ? String(feet) : `${feet}ft ${rest}in`, unit: 'ft' as UnitOf<Kind>, held: typed };
  }
  return showTyped(kind, typed, typed.unit, locale);
}

export const typeQuantity = <Kind extends QuantityKind>(
  draft: QuantityDraft<Kind>,
  text: string,
): QuantityDraft<Kind> => ({ text, unit: draft.unit });

export const answerSeparator = <Kind extends QuantityKind>(
  draft: QuantityDraft<Kind>,
  means: SeparatorMeaning,
): QuantityDraft<Kind> => ({ text: draft.text, unit: draft.unit, means });

/** Another unit for the field. What it holds is shown in the new unit and stays what it was, to the last digit. */
export function switchUnit<Kind extends QuantityKind>(
  kind: Kind,
  draft: QuantityDraft<Kind>,
  unit: UnitOf<Kind>,
  options: ReadOptions,
): QuantityDraft<Kind> {
  const reading = readQuantity(kind, draft, options);
  if (reading.is !== 'read') return { ...draft, unit };
  return showTyped(kind, reading.typed, unit, options.locale);
}

function showTyped<Kind extends QuantityKind>(
  kind: Kind,
  typed: { value: string; unit: UnitOf<Kind> },
  unit: UnitOf<Kind>,
  locale: string,
): QuantityDraft<Kind> {
  const decimals = typed.unit === unit ? 9 : (DISPLAY_DECIMALS[unit] ?? 2);
  const base = toBase(kind, typed.unit, Number(typed.value));
  return { text: formatForInput(kind, base, unit, { locale, decimals }), unit, held: typed };
}

/** Enough to recognise the value by; the value itself is held beside the text. */
const DISPLAY_DECIMALS: Readonly<Record<string, number>> = { kg: 4, t: 4, 'kg/m': 5, 'oz/ft': 4, MPa: 4, bar: 3 };

/** A double as a plain decimal without binary noise. */
const decimalText = (value: number) => {
  const text = Number(value.toPrecision(12)).toFixed(12);
  return text.replace(/\.?0+$/, '');
};

const read = new WeakMap<object, Map<string, unknown>>();

/** What a field holds: a value, nothing yet, a question, or a refusal. A draft that did not change is read once. */
export function readQuantity<Kind extends QuantityKind>(
  kind: Kind,
  draft: QuantityDraft<Kind>,
  options: ReadOptions,
): QuantityReading<Kind> {
  let readings = read.get(draft);
  if (!readings) {
    readings = new Map();
    read.set(draft, readings);
  }
  const key = `${kind} ${options.locale} ${options.allowNegative ?? ''}`;
  let reading = readings.get(key) as QuantityReading<Kind> | undefined;
  if (!reading) {
    reading = readOnce(kind, draft, options);
    readings.set(key, reading);
  }
  return reading;
}

function readOnce<Kind extends QuantityKind>(
  kind: Kind,
  draft: QuantityDraft<Kind>,
  options: ReadOptions,
): QuantityReading<Kind> {
  if (draft.held) {
    const { value, unit } = draft.held;
    return {
      is: 'read',
      base: Number(toBase(kind, unit, Number(value)).toPrecision(15)),
      typed: draft.held,
      understoodAs: [{ value, unit }],
    };
  }
  if (draft.text.trim() === '') return { is: 'empty' };
  const outcome = parseQuantity(kind, draft.text, {
    defaultUnit: draft.unit,
    decimalSeparator: decimalSeparatorOf(options.locale),
    ...(draft.means ? { separatorMeans: draft.means } : {}),
    ...(options.allowNegative === undefined ? {} : { allowNegative: options.allowNegative }),
  });
  if (outcome.ok) {
    const { base, typed, understoodAs } = outcome.value;
    return { is: 'read', base, typed, understoodAs };
  }
  const refusal = outcome.refusals[0] as Refusal;
  if (refusal.code !== 'ambiguousSeparator') return { is: 'refused', refusal };
  const { grouped } = refusal.params as { grouped: string };
  const values = refusal.allowed as readonly string[];
  return {
    is: 'ambiguous',
    options: values.map((value) => ({ value, means: value === grouped ? 'grouping' : 'decimal' })),
  };
}

/** The value in the kind's base unit, or null where there is none to calculate with. */
export function baseOf<Kind extends QuantityKind>(
  kind: Kind,
  draft: QuantityDraft<Kind>,
  options: ReadOptions,
): number | null {
  const reading = readQuantity(kind, draft, options);
  return reading.is === 'read' ? reading.base : null;
}
