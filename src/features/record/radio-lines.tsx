import { FieldError } from '../../ui/field.tsx';

export interface RadioLine {
  value: string;
  label: string;
  detail?: string;
}

/** Answers of one question as ruled lines, each 56 px high. Nothing is chosen beforehand: an answer is a statement. */
export function RadioLines({
  legend,
  hideLegend = false,
  name,
  value,
  lines,
  error,
  onChange,
}: {
  legend: string;
  hideLegend?: boolean;
  name: string;
  value: string;
  lines: readonly RadioLine[];
  error?: string | undefined;
  onChange: (value: string) => void;
}) {
  return (
    <fieldset>
      <legend className={hideLegend ? 'sr-only' : 'type-label pb-1 text-ink-soft'}>{legend}</legend>
      {lines.map((line) => (
        <label
          key={line.value}
          className={`relative flex min-h-14 items-center gap-3 border-t border-rule py-1.5 last-of-type:border-b hover:bg-well has-focus-visible:z-1 has-focus-visible:outline-3 has-focus-visible:outline-ink ${value === line.value ? 'pl-3 shadow-[inset_4px_0_0_var(--color-rest)]' : ''}`}
        >
          <span
            aria-hidden="true"
            className={`size-5 shrink-0 rounded-full border-2 ${value === line.value ? 'border-rest bg-rest shadow-[inset_0_0_0_3px_var(--color-ground)]' : 'border-edge'}`}
          />
          <span className="leading-tight">
            <span className="font-[600]">{line.label}</span>
            {line.detail ? (
              <span className="type-label block text-[0.9375rem] text-ink-soft">{line.detail}</span>
            ) : null}
          </span>
          <input
            type="radio"
            name={name}
            checked={value === line.value}
            aria-invalid={error ? true : undefined}
            onChange={() => onChange(line.value)}
            className="absolute inset-0 cursor-pointer appearance-none opacity-0"
          />
        </label>
      ))}
      {error ? <FieldError>{error}</FieldError> : null}
    </fieldset>
  );
}
