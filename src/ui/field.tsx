import { type InputHTMLAttributes, memo, type ReactNode, type Ref, type SelectHTMLAttributes, useId } from 'react';

/**
 * `row`: label left, blank right, as on a test certificate; for field screens and long forms.
 * `stack`: label over the blank; for short forms and dialogs.
 */
export type FieldLayout = 'row' | 'stack';

export interface FieldIds {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
}

interface FieldProps {
  label: ReactNode;
  /** What was understood, or a fact that helps; under the label. */
  hint?: ReactNode;
  /** What is wrong, with the value given and the value allowed. */
  error?: ReactNode;
  layout?: FieldLayout;
  /** Between the blank and the error: a question that the field asks back. */
  below?: ReactNode;
  children: (ids: FieldIds) => ReactNode;
}

/** A label, its blank, and what has to be said about it, tied together for a screen reader. */
export function Field({ label, hint, error, layout = 'stack', below, children }: FieldProps) {
  const id = useId();
  const hintId = hint ? `${id}-hint` : '';
  const errorId = error ? `${id}-error` : '';
  const ids: FieldIds = {
    id,
    'aria-describedby': [errorId, hintId].filter(Boolean).join(' ') || undefined,
    'aria-invalid': error ? true : undefined,
  };
  const row = layout === 'row';
  return (
    <div className={row ? 'py-1.5' : ''} data-field="">
      <div
        className={
          row
            ? 'grid grid-cols-[minmax(0,5fr)_minmax(0,6fr)] items-center gap-x-3 xs:grid-cols-[minmax(0,1fr)_minmax(0,1fr)]'
            : 'flex flex-col gap-1'
        }
      >
        <div className={row ? 'flex min-w-0 flex-col leading-tight' : 'flex items-baseline justify-between gap-3'}>
          <label htmlFor={id} className="type-label text-ink-soft">
            {label}
          </label>
          {hint ? (
            <span id={hintId} className="type-label text-[0.875rem] leading-tight text-ink-soft">
              {hint}
            </span>
          ) : null}
        </div>
        {children(ids)}
      </div>
      {below}
      {error ? <FieldError id={errorId}>{error}</FieldError> : null}
    </div>
  );
}

/** Said by words, weight and a mark, not by colour: red belongs to danger alone. */
export function FieldError({ id, children }: { id?: string; children: ReactNode }) {
  return (
    <p
      id={id}
      role="alert"
      className="mt-1.5 flex gap-2 border-l-4 border-ink pl-2.5 text-[0.9375rem] leading-snug font-[600]"
    >
      {children}
    </p>
  );
}

/** The look that every blank shares: a sheet with a ruled foot, heavier when it is wrong. */
export const blank = (invalid: boolean, big: boolean) =>
  `w-full min-w-0 bg-sheet border-0 border-b-2 ${invalid ? 'border-ink shadow-[inset_0_-2px_0_var(--color-ink)]' : 'border-edge focus-within:border-ink'} ${
    big ? 'min-h-14 text-[1.25rem] font-[560]' : 'min-h-[3.125rem] text-[1.0625rem]'
  }`;

interface TextFieldProps extends Omit<FieldProps, 'children'> {
  big?: boolean;
}

export function TextField({
  label,
  hint,
  error,
  layout = 'stack',
  big = false,
  below,
  ...input
}: TextFieldProps & InputHTMLAttributes<HTMLInputElement> & { ref?: Ref<HTMLInputElement> }) {
  return (
    <Field label={label} hint={hint} error={error} layout={layout} below={below}>
      {(ids) => (
        <input {...ids} {...input} className={`${blank(!!error, big)} px-3 ${layout === 'row' ? 'text-right' : ''}`} />
      )}
    </Field>
  );
}

export interface Choice {
  value: string;
  label: string;
}

/** A native select: the phone's own picker, the desk's own keys. `groups` for long lists. */
export function SelectField({
  label,
  hint,
  error,
  layout = 'stack',
  big = false,
  below,
  choices,
  groups,
  placeholder,
  ...select
}: TextFieldProps &
  SelectHTMLAttributes<HTMLSelectElement> & {
    choices?: readonly Choice[];
    groups?: readonly { label: string; choices: readonly Choice[] }[];
    /** Shown, and chosen, while nothing is. */
    placeholder?: string;
    ref?: Ref<HTMLSelectElement>;
  }) {
  return (
    <Field label={label} hint={hint} error={error} layout={layout} below={below}>
      {(ids) => (
        <span className={`${blank(!!error, big)} relative flex`}>
          <select
            {...ids}
            {...select}
            className={`w-full min-w-0 appearance-none truncate bg-transparent py-1 pr-8 pl-3 ${big ? 'type-narrow text-[1.125rem]' : layout === 'row' ? 'type-label' : ''} ${layout === 'row' ? 'text-right [text-align-last:right]' : ''}`}
          >
            {placeholder === undefined ? null : <option value="">{placeholder}</option>}
            <Options choices={choices} groups={groups} />
          </select>
          <Chevron />
        </span>
      )}
    </Field>
  );
}

/** Long lists are drawn once, as long as the same list is handed in. */
const Options = memo(function Options({
  choices,
  groups,
}: {
  choices: readonly Choice[] | undefined;
  groups: readonly { label: string; choices: readonly Choice[] }[] | undefined;
}) {
  return (
    <>
      {choices?.map((choice) => (
        <option key={choice.value} value={choice.value}>
          {choice.label}
        </option>
      ))}
      {groups?.map((group) => (
        <optgroup key={group.label} label={group.label}>
          {group.choices.map((choice) => (
            <option key={choice.value} value={choice.value}>
              {choice.label}
            </option>
          ))}
        </optgroup>
      ))}
    </>
  );
});

/** The small mark at the right edge of what opens. */
export function Chevron({ className = 'right-3' }: { className?: string }) {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 10 6"
      className={`pointer-events-none absolute top-1/2 h-1.5 w-2.5 -translate-y-1/2 fill-none stroke-current stroke-[1.6] ${className}`}
    >
      <path d="M1 1l4 4 4-4" />
    </svg>
  );
}

/** A handful of answers side by side, as a native radio group: one is always chosen. */
export function ChoiceField({
  label,
  name,
  value,
  choices,
  onChange,
}: {
  label: ReactNode;
  name: string;
  value: string;
  choices: readonly Choice[];
  onChange: (value: string) => void;
}) {
  return (
    <fieldset className="py-1.5">
      <legend className="type-label mb-1 text-ink-soft">{label}</legend>
      <div className="flex flex-wrap border border-edge bg-sheet">
        {choices.map((choice, index) => (
          <label
            key={choice.value}
            className={`type-narrow relative flex min-h-12 flex-1 items-center justify-center border-edge px-2 py-1 text-center leading-tight has-checked:bg-ink has-checked:font-[600] has-checked:text-ground has-focus-visible:z-1 has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-ink ${index > 0 ? 'border-l' : ''}`}
          >
            <input
              type="radio"
              name={name}
              value={choice.value}
              checked={choice.value === value}
              onChange={() => onChange(choice.value)}
              className="absolute inset-0 cursor-pointer appearance-none opacity-0"
            />
            {choice.label}
          </label>
        ))}
      </div>
    </fieldset>
  );
}

/** Yes or no, with the whole line as its target. */
export function CheckField({
  label,
  hint,
  ...input
}: { label: ReactNode; hint?: ReactNode } & InputHTMLAttributes<HTMLInputElement> & { ref?: Ref<HTMLInputElement> }) {
  const id = useId();
  return (
    <label htmlFor={id} className="flex min-h-12 items-center gap-3 py-1.5">
      <span className="relative grid size-6 shrink-0 place-items-center border-2 border-edge bg-sheet has-checked:border-rest has-checked:bg-rest has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-ink">
        <input
          id={id}
          type="checkbox"
          {...input}
          className="peer absolute inset-0 cursor-pointer appearance-none opacity-0"
        />
        <svg
          aria-hidden="true"
          viewBox="0 0 16 16"
          className="hidden size-4 fill-none stroke-on-rest stroke-[2.4] peer-checked:block"
        >
          <path d="M2.5 8.5l3.5 3.5 7.5-8" />
        </svg>
      </span>
      <span className="leading-tight">
        {label}
        {hint ? <span className="type-label block text-[0.875rem] text-ink-soft">{hint}</span> : null}
      </span>
    </label>
  );
}
