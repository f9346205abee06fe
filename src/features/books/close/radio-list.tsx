import { type ReactNode, useId } from 'react';
import { FieldError } from '../../../ui/field.tsx';

/** Answers one under another, each with what it means; none is chosen beforehand. */
export function RadioList({
  name,
  legend,
  value,
  error,
  choices,
  onChange,
}: {
  name: string;
  legend: string;
  value: string;
  error?: string | undefined;
  choices: readonly { value: string; label: string; hint: ReactNode }[];
  onChange: (value: string) => void;
}) {
  const id = useId();
  return (
    <fieldset aria-describedby={error ? `${id}-error` : undefined}>
      <legend className="type-label pb-1 text-ink-soft">{legend}</legend>
      <div className="border-t border-rule">
        {choices.map((choice) => (
          <label
            key={choice.value}
            className="flex min-h-14 items-center gap-3 border-b border-rule py-1.5 hover:bg-well has-focus-visible:outline-3 has-focus-visible:outline-ink"
          >
            <span className="relative grid size-6 shrink-0 place-items-center rounded-full border-2 border-edge bg-sheet has-checked:border-rest">
              <input
                type="radio"
                name={name}
                value={choice.value}
                checked={choice.value === value}
                aria-invalid={error ? true : undefined}
                onChange={() => onChange(choice.value)}
                className="peer absolute inset-0 cursor-pointer appearance-none opacity-0"
              />
              <span aria-hidden="true" className="hidden size-3 rounded-full bg-rest peer-checked:block" />
            </span>
            <span className="leading-tight">
              <span className="font-[600]">{choice.label}</span>
              <span className="block text-[0.9375rem] text-ink-soft">{choice.hint}</span>
            </span>
          </label>
        ))}
      </div>
      {error ? <FieldError id={`${id}-error`}>{error}</FieldError> : null}
    </fieldset>
  );
}
