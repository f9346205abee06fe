import type { ReactNode } from 'react';
import { readNumber, type SeparatorMeaning } from '../../shared/units/read-number.ts';
import { useMessages } from '../lib/messages.ts';
import { usePreferences } from '../lib/preferences.ts';
import { type FieldLayout, TextField } from './field.tsx';
import { decimalSeparatorOf } from './quantity-draft.ts';

/** An amount of money as it stands in a form. Plain JSON, so that a draft survives a reload. */
export interface AmountDraft {
  text: string;
  /** The answer to "1,250: which one is it?", or what is known of an amount that was not typed here. */
  means?: SeparatorMeaning | undefined;
}

/** A stored amount (decimal text) as this locale's people type it. */
export const amountDraft = (stored: string | null | undefined, locale: string): AmountDraft =>
  stored ? { text: stored.replace('.', decimalSeparatorOf(locale)), means: 'decimal' } : { text: '' };

/** Null: nothing stands there. The empty text: it cannot be read, or may be read in two ways. */
export function readAmount({ text, means }: AmountDraft): string | null {
  if (text.trim() === '') return null;
  const read = readNumber(text, means);
  return read.is === 'number' ? read.value : '';
}

/** Without grouping, so that neither answer looks like what was typed. */
const plain = (value: string, locale: string) =>
  new Intl.NumberFormat(locale, { useGrouping: false, maximumFractionDigits: 3 }).format(Number(value));

/** A blank for money. A separator before three digits may mean two things, and is asked about. */
export function AmountInput({
  label,
  draft,
  onChange,
  error,
  layout = 'stack',
}: {
  label: string;
  draft: AmountDraft;
  onChange: (draft: AmountDraft) => void;
  error?: ReactNode;
  layout?: FieldLayout;
}) {
  const t = useMessages();
  const { locale } = usePreferences();
  const read = readNumber(draft.text, draft.means);
  return (
    <TextField
      layout={layout}
      inputMode="decimal"
      autoComplete="off"
      label={label}
      value={draft.text}
      // The question says what is missing.
      error={read.is === 'ambiguous' ? undefined : error}
      onChange={({ target }) => onChange({ text: target.value })}
      below={
        read.is === 'ambiguous' ? (
          <fieldset className="mt-1.5 border-l-4 border-ink pl-2.5">
            <legend className="float-left mb-1 w-full text-[0.9375rem] font-[600]">
              {t('ui.ambiguous', { typed: draft.text.trim() })}
            </legend>
            <div className="clear-left grid grid-cols-2 gap-2">
              {(['decimal', 'grouping'] as const).map((means) => (
                <button
                  key={means}
                  type="button"
                  className="min-h-12 border border-edge bg-sheet px-2 font-[600] hover:border-ink"
                  onClick={() => onChange({ text: draft.text, means })}
                >
                  {plain(means === 'decimal' ? read.decimal : read.grouped, locale)}
                </button>
              ))}
            </div>
          </fieldset>
        ) : undefined
      }
    />
  );
}
