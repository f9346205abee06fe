import { memo, type ReactNode, useMemo, useState } from 'react';
import { formatQuantity, unitSymbol } from '../../shared/units/format-quantity.ts';
import { fromBase, QUANTITIES, type QuantityKind, type UnitOf } from '../../shared/units/quantities.ts';
import { formatNumber, NBSP } from '../lib/format.ts';
import { type Translate, useMessages } from '../lib/messages.ts';
import { usePreferences } from '../lib/preferences.ts';
import { exampleIn } from './example-in.ts';
import { blank, Chevron, Field, type FieldLayout } from './field.tsx';
import {
  answerSeparator,
  type QuantityDraft,
  type QuantityReading,
  readQuantity,
  switchUnit,
  typeQuantity,
} from './quantity-draft.ts';

interface Props<Kind extends QuantityKind> {
  kind: Kind;
  label: string;
  draft: QuantityDraft<Kind>;
  onChange: (draft: QuantityDraft<Kind>) => void;
  /** Units that the field offers; one alone is shown as a word. */
  units: readonly UnitOf<Kind>[];
  /** In the kind's base unit; said in the field's own when broken. */
  min?: number;
  max?: number;
  allowNegative?: boolean;
  /** A refusal from elsewhere: a limit of the manual, an answer of the server. */
  error?: ReactNode;
  hint?: ReactNode;
  layout?: FieldLayout;
  big?: boolean;
  /** Shown in the blank while it is empty, as an example of how to write it. */
  example?: string;
  name?: string;
  autoFocus?: boolean;
  disabled?: boolean;
}

const METRIC = new Set<string>([
  'g',
  'kg',
  'm',
  'cm',
  'mm',
  'g/m',
  'kg/m',
  'kPa',
  'bar',
  'Pa',
  'm2',
  'L',
  'm3',
  'K',
  'N.m',
]);

/**
 * A blank for a quantity. It takes what people write (`12ft 6in`, `3/8`, `11 lb 4.5 oz`, `7,5`), says what it
 * understood, and asks where a separator may mean two things. The unit at its right edge changes the display only.
 */
function QuantityInputOnce<Kind extends QuantityKind>(props: Props<Kind>) {
  const { kind, label, draft, onChange, units, layout = 'row', big = layout === 'row', allowNegative } = props;
  const t = useMessages();
  const { locale } = usePreferences();
  const [left, setLeft] = useState(draft.text !== '');
  const options = useMemo(
    () => ({ locale, ...(allowNegative === undefined ? {} : { allowNegative }) }),
    [locale, allowNegative],
  );
  const reading = readQuantity(kind, draft, options);
  const own = ownError(props, reading, t, locale);
  // Half a word is no mistake yet: the form of a value is judged when the field is left, its size at once. What the field
  // says itself names the value as it was typed, and goes before what is said of it from elsewhere.
  const saysItself = own !== undefined && (left || reading.is !== 'refused' || props.error !== undefined);
  const error = saysItself ? own : (unitNotOffered(props, reading, t, locale) ?? props.error);
  const understood = reading.is === 'read' ? understoodText(kind, draft.unit, reading, locale) : null;
  const metric = METRIC.has(draft.unit) && !allowNegative;
  return (
    <Field
      label={label}
      layout={layout}
      hint={understood ?? props.hint}
      error={error}
      below={
        reading.is === 'ambiguous' ? (
          <WhichOne kind={kind} draft={draft} options={reading.options} onChange={onChange} />
        ) : undefined
      }
    >
      {(ids) => (
        <span className={`${blank(!!error, big)} flex items-stretch has-disabled:opacity-60`}>
          <input
            {...ids}
            name={props.name}
            // biome-ignore lint/a11y/noAutofocus: only where a page asks one question and nothing stands before it
            autoFocus={props.autoFocus}
            disabled={props.disabled}
            value={draft.text}
            inputMode={metric ? 'decimal' : 'text'}
            autoComplete="off"
            autoCorrect="off"
            spellCheck={false}
            placeholder={props.example && exampleIn(kind, props.example, draft.unit, locale)}
            className={`min-w-0 flex-1 bg-transparent py-1 pl-3 placeholder:font-[400] placeholder:text-ink-soft ${layout === 'row' ? 'text-right' : ''}`}
            onChange={(event) => onChange(typeQuantity(draft, event.target.value))}
            onFocus={(event) => event.target.select()}
            onBlur={() => setLeft(true)}
          />
          <UnitSwitch
            kind={kind}
            label={label}
            unit={draft.unit}
            units={units}
            locale={locale}
            disabled={props.disabled ?? false}
            onChange={(unit) => onChange(switchUnit(kind, draft, unit, options))}
          />
        </span>
      )}
    </Field>
  );
}

/** Drawn again only when what it shows has changed: hand in a stable `onChange` on a screen that answers while typing. */
export const QuantityInput = memo(QuantityInputOnce) as typeof QuantityInputOnce;

function UnitSwitch<Kind extends QuantityKind>({
  kind,
  label,
  unit,
  units,
  locale,
  disabled,
  onChange,
}: {
  kind: Kind;
  label: string;
  unit: UnitOf<Kind>;
  units: readonly UnitOf<Kind>[];
  locale: string;
  disabled: boolean;
  onChange: (unit: UnitOf<Kind>) => void;
}) {
  const t = useMessages();
  if (units.length < 2 && units.includes(unit)) {
    return (
      <span className="type-label flex items-center pr-3 pl-2 text-[1.0625rem] font-[400] text-ink-soft">
        {unitSymbol(kind, unit, locale)}
      </span>
    );
  }
  const offered = units.includes(unit) ? units : [unit, ...units];
  return (
    <span className="relative flex shrink-0 text-ink-soft">
      <select
        aria-label={t('ui.unitOf', { label })}
        value={unit}
        disabled={disabled}
        onChange={(event) => onChange(event.target.value as UnitOf<Kind>)}
        className="type-label min-w-12 appearance-none bg-transparent py-1 pr-6 pl-2 text-right text-[1.0625rem] font-[400]"
      >
        {offered.map((offer) => (
          <option key={offer} value={offer}>
            {unitSymbol(kind, offer, locale)}
          </option>
        ))}
      </select>
      <Chevron className="right-2" />
    </span>
  );
}

/** Two buttons, because a separator before three digits is never guessed. */
function WhichOne<Kind extends QuantityKind>({
  kind,
  draft,
  options,
  onChange,
}: {
  kind: Kind;
  draft: QuantityDraft<Kind>;
  options: Extract<QuantityReading<Kind>, { is: 'ambiguous' }>['options'];
  onChange: (draft: QuantityDraft<Kind>) => void;
}) {
  const t = useMessages();
  const { locale } = usePreferences();
  return (
    <fieldset className="mt-1.5 border-l-4 border-ink pl-2.5">
      <legend className="float-left mb-1 w-full text-[0.9375rem] font-[600]">
        {t('ui.ambiguous', { typed: draft.text.trim() })}
      </legend>
      <div className="clear-left grid grid-cols-2 gap-2">
        {options.map(({ means, value }) => (
          <button
            key={means}
            type="button"
            className="min-h-12 border border-edge bg-sheet px-2 font-[600] hover:border-ink"
            onClick={() => onChange(answerSeparator(draft, means))}
          >
            {plainNumber(value, locale)}
            {NBSP}
            <span className="type-label font-[400]">{unitSymbol(kind, draft.unit, locale)}</span>
          </button>
        ))}
      </div>
    </fieldset>
  );
}

/** A unit that can be read, but that what is asked for cannot be recorded in. Only once somebody has said so. */
function unitNotOffered<Kind extends QuantityKind>(
  { kind, units, error }: Props<Kind>,
  reading: QuantityReading<Kind>,
  t: Translate,
  locale: string,
): string | undefined {
  if (error === undefined || reading.is !== 'read' || units.includes(reading.typed.unit)) return undefined;
  return t('ui.quantity.unknownUnit', {
    typed: unitSymbol(kind, reading.typed.unit, locale),
    units: units.map((unit) => unitSymbol(kind, unit, locale)).join(', '),
  });
}

/** Without grouping, so that the two answers cannot look like what was typed. */
const plainNumber = (value: string, locale: string) =>
  new Intl.NumberFormat(locale, { useGrouping: false, maximumFractionDigits: 3 }).format(Number(value));

/** `39 ft 4 in = 11.99 m`: the parts as read, and the base unit where it is another one. */
function understoodText<Kind extends QuantityKind>(
  kind: Kind,
  fieldUnit: UnitOf<Kind>,
  reading: Extract<QuantityReading<Kind>, { is: 'read' }>,
  locale: string,
): ReactNode {
  const parts = reading.understoodAs
    .map(
      (part) =>
        `${part.fraction ?? formatNumber(locale as 'en-US', Number(part.value), 6)}${NBSP}${unitSymbol(kind, part.unit, locale)}`,
    )
    .join(' ');
  const base = QUANTITIES[kind].base as UnitOf<Kind>;
  const single = reading.understoodAs.length === 1 && reading.understoodAs[0]?.unit === base;
  // Shown in another unit than it is stored in: two decimals of g or m are more than anybody reads off.
  if (single && fieldUnit !== base) {
    return `= ${formatNumber(locale as 'en-US', reading.base, 2)}${NBSP}${unitSymbol(kind, base, locale)}`;
  }
  if (single) return `= ${parts}`;
  return `${parts} = ${formatQuantity(kind, reading.base, base as never, { locale })}`;
}

function ownError<Kind extends QuantityKind>(
  { kind, draft, min, max, example, units }: Props<Kind>,
  reading: QuantityReading<Kind>,
  t: Translate,
  locale: string,
): string | undefined {
  if (reading.is === 'refused') {
    const typed = draft.text.trim();
    const { code, params } = reading.refusal;
    if (code === 'unknownUnit') {
      return t('ui.quantity.unknownUnit', {
        typed: String(params?.unit ?? typed),
        units: units.map((unit) => unitSymbol(kind, unit, locale)).join(', '),
      });
    }
    if (code === 'negative') return t('ui.quantity.negative', { typed });
    if (code === 'partTooLarge') {
      return t('ui.quantity.partTooLarge', { typed, allowed: params?.allowed ?? '', unit: params?.unit ?? '' });
    }
    return t('ui.quantity.notANumber', {
      typed,
      example: example ?? `12${NBSP}${unitSymbol(kind, draft.unit, locale)}`,
    });
  }
  if (reading.is !== 'read') return undefined;
  // As exact as it was typed: a limit of 0.001 g is not 0 g.
  const say = (base: number) =>
    `${formatNumber(locale as 'en-US', fromBase(kind, draft.unit, base), 6)}${NBSP}${unitSymbol(kind, draft.unit, locale)}`;
  if (min !== undefined && reading.base < min) {
    return t('ui.quantity.tooSmall', { given: say(reading.base), allowed: say(min) });
  }
  if (max !== undefined && reading.base > max) {
    return t('ui.quantity.tooLarge', { given: say(reading.base), allowed: say(max) });
  }
  return undefined;
}
