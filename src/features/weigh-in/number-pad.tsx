import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { decimalSeparatorOf } from '../../ui/quantity-draft.ts';
import {
  type Key,
  type KeyedReading,
  press,
  READING_UNITS,
  type ReadingUnit,
  readTyped,
  shown,
} from './scale-reading.ts';

interface Props {
  label: string;
  reading: KeyedReading;
  onChange: (reading: KeyedReading) => void;
  /** A zeroed scale shows below zero what has left it. */
  below?: boolean;
  /** What the figure is wrong about; the window says so. */
  invalid?: boolean;
  describedBy?: string;
}

/** The window of the scale: the one figure of the screen. Typed on the pad below it, or on a keyboard. */
export function ReadingWindow({ label, reading, onChange, below = false, invalid = false, describedBy }: Props) {
  const { locale } = usePreferences();
  const decimal = decimalSeparatorOf(locale);
  const text = shown(reading, locale, decimal);
  return (
    <label className="block">
      <span className="type-label text-ink-soft">{label}</span>
      <span className="flex items-baseline gap-2.5 border-b-2 border-edge pb-1 focus-within:border-ink">
        {below ? (
          <span aria-hidden="true" className="type-figure text-[clamp(2.5rem,14vw,4.25rem)]">
            {'\u2212'}
          </span>
        ) : null}
        <input
          value={text}
          placeholder="0"
          inputMode="none"
          autoComplete="off"
          aria-invalid={invalid || undefined}
          aria-describedby={describedBy}
          onChange={(event) => onChange(readTyped(event.target.value, reading.unit, decimal))}
          className="type-figure min-w-0 flex-1 bg-transparent text-[clamp(2.5rem,14vw,4.25rem)] placeholder:text-rule"
        />
        <span className="text-[1.5rem] font-[500]">{unitName(reading.unit)}</span>
      </span>
    </label>
  );
}

/** `lb oz` shows its pounds inside the window already. */
export const unitName = (unit: ReadingUnit): string => (unit === 'lbOz' ? 'oz' : unit);

/** Pounds and ounces need a key between them; it stands where the others clear. */
const rowsFor = (unit: ReadingUnit): readonly (readonly Key[])[] => [
  ['7', '8', '9', 'back'],
  ['4', '5', '6', unit === 'lbOz' ? 'pounds' : 'clear'],
  ['1', '2', '3', 'point'],
];

/** What else may be done while reading: left and right of the nought, where the thumb is. */
export type PadActions = readonly [PadAction, PadAction];
export interface PadAction {
  label: string;
  onPress: () => void;
  disabled?: boolean;
}

/** Keys as large as a gloved thumb; the unit of the scale's own display sits among them. */
export function NumberPad({
  reading,
  onChange,
  beside,
}: Pick<Props, 'reading' | 'onChange'> & { beside?: PadActions }) {
  const t = useMessages();
  const { locale } = usePreferences();
  const decimal = decimalSeparatorOf(locale);
  const key = (name: Key, span = '') => (
    <button
      key={name}
      type="button"
      aria-label={/\d/.test(name) || name === 'pounds' ? undefined : t(`weighIn.key.${name}`)}
      onClick={() => onChange(press(reading, name))}
      className={`min-h-14 border-r border-b border-rule text-[1.5rem] font-[480] hover:bg-well active:bg-rest-wash ${span}`}
    >
      {label(name, decimal)}
    </button>
  );
  return (
    <fieldset className="grid grid-cols-4 border-t border-l border-rule bg-sheet">
      <legend className="sr-only">{t('weighIn.pad')}</legend>
      {rowsFor(reading.unit).flatMap((row) => row.map((name) => key(name)))}
      {beside ? (
        <>
          <ActionKey action={beside[0]} />
          {key('0')}
          <ActionKey action={beside[1]} />
        </>
      ) : (
        key('0', 'col-span-3')
      )}
      <UnitKey reading={reading} onChange={onChange} />
    </fieldset>
  );
}

function ActionKey({ action }: { action: PadAction }) {
  return (
    <button
      type="button"
      onClick={action.onPress}
      disabled={action.disabled}
      className="type-label min-h-14 border-r border-b border-rule px-1 text-[0.9375rem] leading-tight font-[600] hover:bg-well active:bg-rest-wash disabled:font-[400] disabled:text-ink-soft"
    >
      {action.label}
    </button>
  );
}

/** Another unit starts the reading anew: digits of one unit mean nothing in another. */
function UnitKey({ reading, onChange }: Pick<Props, 'reading' | 'onChange'>) {
  const t = useMessages();
  return (
    <span className="relative grid min-h-14 place-items-center border-r border-b border-rule bg-well has-focus-visible:z-1 has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-ink">
      <span aria-hidden="true" className="type-narrow font-[600]">
        {reading.unit === 'lbOz' ? 'lb oz' : reading.unit}
      </span>
      <select
        aria-label={t('weighIn.unitOfScale')}
        value={reading.unit}
        onChange={(event) => onChange({ text: '', unit: event.target.value as ReadingUnit })}
        className="absolute inset-0 size-full cursor-pointer appearance-none opacity-0"
      >
        {READING_UNITS.map((unit) => (
          <option key={unit} value={unit}>
            {t(`weighIn.unit.${unit}`)}
          </option>
        ))}
      </select>
    </span>
  );
}

function label(key: Key, decimal: string) {
  switch (key) {
    case 'point':
      return decimal;
    case 'pounds':
      return 'lb';
    case 'clear':
      return 'C';
    case 'back':
      return (
        <svg aria-hidden="true" viewBox="0 0 24 16" className="mx-auto h-4 w-6 fill-none stroke-current stroke-[1.6]">
          <path d="M8 1h15v14H8L1 8zM12 5l6 6M18 5l-6 6" />
        </svg>
      );
    default:
      return key;
  }
}
