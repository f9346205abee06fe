import { type ReactNode, useId } from 'react';
import { useMedia } from '../lib/media.ts';
import { useMessages } from '../lib/messages.ts';
import { Chevron, type Choice } from './field.tsx';

/**
 * What a list is narrowed by: one ruled line of words on a desk, one line that opens on a phone. `summary` says there
 * what is set. `search` stays in view; `end` (a download, say) is at the right edge, on a phone at the foot of the rest.
 */
export function FilterBar({
  summary,
  search,
  end,
  children,
}: {
  summary: string;
  search?: ReactNode;
  end?: ReactNode;
  children: ReactNode;
}) {
  const t = useMessages();
  const desk = useMedia('(width >= 48rem)');
  if (desk) {
    return (
      <search
        aria-label={t('ui.filter.title')}
        className="page-gutter flex flex-wrap items-center gap-x-6 border-y border-rule"
      >
        {children}
        {search || end ? (
          <span className="ml-auto flex items-center gap-5">
            {end}
            {search}
          </span>
        ) : null}
      </search>
    );
  }
  return (
    <search aria-label={t('ui.filter.title')} className="border-b border-rule">
      {search ? (
        <div className="page-gutter flex min-h-13 items-center border-b border-rule-faint">{search}</div>
      ) : null}
      <details className="group">
        <summary className="page-gutter relative flex min-h-12 items-center gap-3 pr-10!">
          <span className="type-label text-ink-soft">{t('ui.filter.title')}</span>
          <span className="min-w-0 truncate font-[600]">{summary}</span>
          <Chevron className="right-5 transition-transform group-open:rotate-180" />
        </summary>
        <div className="page-gutter grid grid-cols-2 gap-x-4 pb-3">{children}</div>
        {end ? <div className="page-gutter flex min-h-12 flex-wrap items-center gap-x-5 pb-1">{end}</div> : null}
      </details>
    </search>
  );
}

/** A word and what it is set to, in the line of the text; a native select, so the phone shows its own picker. */
export function FilterSelect({
  label,
  value,
  choices,
  any,
  onChange,
}: {
  label: string;
  value: string;
  choices: readonly Choice[];
  /** The word for no filter; none where one of the choices always holds. */
  any?: string;
  onChange: (value: string) => void;
}) {
  const id = useId();
  const missing = value !== '' && !choices.some((choice) => choice.value === value);
  return (
    <span className="flex min-w-0 items-center gap-1.5 not-desk:flex-col not-desk:items-stretch not-desk:gap-0 not-desk:pt-2">
      <label htmlFor={id} className="type-label text-[0.9375rem] text-ink-soft">
        {label}
      </label>
      <span className="relative flex min-w-0 not-desk:border-b-2 not-desk:border-edge">
        <select
          id={id}
          value={value}
          onChange={(event) => onChange(event.target.value)}
          className="min-h-11 max-w-52 min-w-0 appearance-none truncate bg-ground pr-5 font-[620] [field-sizing:content] not-desk:w-full not-desk:max-w-none"
        >
          {any === undefined ? null : <option value="">{any}</option>}
          {missing ? <option value={value}>{value}</option> : null}
          {choices.map((choice) => (
            <option key={choice.value} value={choice.value}>
              {choice.label}
            </option>
          ))}
        </select>
        <Chevron className="right-1" />
      </span>
    </span>
  );
}

/** A filter that came with a link and is not in a choice: it can be taken away. */
export function FilterTag({ label, remove, onRemove }: { label: string; remove: string; onRemove: () => void }) {
  return (
    <span className="inline-flex items-center font-[620]">
      {label}
      <button type="button" aria-label={remove} onClick={onRemove} className="grid size-11 place-items-center">
        <svg aria-hidden="true" viewBox="0 0 10 10" className="size-2.5 stroke-current stroke-[1.6]">
          <path d="M1 1l8 8M9 1L1 9" />
        </svg>
      </button>
    </span>
  );
}

/** Looks while typing pauses; the list under it follows. */
export function SearchField({
  label,
  value,
  onChange,
}: {
  label: string;
  value: string;
  onChange: (value: string) => void;
}) {
  const id = useId();
  return (
    <span className="relative flex min-w-0 items-center not-desk:flex-1">
      <label htmlFor={id} className="sr-only">
        {label}
      </label>
      <svg
        aria-hidden="true"
        viewBox="0 0 16 16"
        className="pointer-events-none absolute left-0 size-4 fill-none stroke-ink-soft stroke-[1.8]"
      >
        <path d="M10.5 10.5L15 15M6.5 11.5a5 5 0 1 0 0-10a5 5 0 0 0 0 10z" />
      </svg>
      <input
        id={id}
        type="search"
        value={value}
        placeholder={label}
        autoComplete="off"
        spellCheck={false}
        onChange={(event) => onChange(event.target.value)}
        className="min-h-11 w-full min-w-0 border-b-2 border-edge bg-transparent pl-6 placeholder:text-ink-soft focus:border-ink desk:w-60"
      />
    </span>
  );
}
