import type { ChargeResponse } from '../../../shared/charge/charge.schema.ts';
import { formatNumber, NBSP } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { decimalSeparatorOf } from '../../ui/quantity-draft.ts';
import { Part } from './part.tsx';

/** The arithmetic, line by line, as it can be checked with a pencil; each with its source at the right edge. */
export function SheetSteps({ steps }: { steps: ChargeResponse['steps'] }) {
  const t = useMessages();
  const { locale } = usePreferences();
  const separator = decimalSeparatorOf(locale);
  return (
    <Part title={t('units.sheet.steps')}>
      <ol>
        {steps.map((step, index) => (
          <li
            // biome-ignore lint/suspicious/noArrayIndexKey: a line is its place in the working
            key={index}
            className="grid grid-cols-[minmax(0,1fr)_auto] grid-rows-[auto_1fr] items-baseline gap-x-4 border-b border-rule-faint py-1.5"
          >
            <p className="leading-snug">
              {asWritten(step.expression, separator)} ={' '}
              <strong className="font-[680] whitespace-nowrap">
                {formatNumber(locale, step.value, 5)}
                {step.unit === '' ? '' : `${NBSP}${step.unit}`}
              </strong>
            </p>
            <p className="type-label row-span-2 max-w-40 self-start pt-1 text-right text-[0.875rem] leading-tight text-ink-soft desk:max-w-60">
              {step.source}
            </p>
            <p className="type-label text-[0.875rem] leading-tight text-ink-soft">{step.label}</p>
          </li>
        ))}
      </ol>
    </Part>
  );
}

/** The engine's signs as people write them here: decimal separator, times and minus. The figures stay as they are. */
const asWritten = (expression: string, separator: string) =>
  expression
    .replace(/(\d)\.(\d)/g, `$1${separator}$2`)
    .replace(/ x /g, ' × ')
    .replace(/ - /g, ' \u2212 ')
    .replace(/\bmm2\b/g, 'mm²')
    .replace(/\bkg\/m3\b/g, 'kg/m³');
