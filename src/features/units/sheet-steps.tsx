import type { ChargeResponse } from '../../../shared/charge/charge.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { useWrittenLines } from '../../lib/written-lines.ts';
import { Part } from './part.tsx';
import { inPipeNames } from './pipe-sizes.ts';

/** The arithmetic, line by line, as it can be checked with a pencil; each with its source at the right edge. */
export function SheetSteps({ steps }: { steps: ChargeResponse['steps'] }) {
  const t = useMessages();
  const preferences = usePreferences();
  const { lines, hasOther, inSi, turn } = useWrittenLines(steps);
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
              {lines[index]?.slice(0, -1).map((part) => `${part} = `)}
              <strong className="font-[680] whitespace-nowrap">{lines[index]?.at(-1)}</strong>
            </p>
            <p className="type-label row-span-2 max-w-40 self-start pt-1 text-right text-[0.875rem] leading-tight text-ink-soft desk:max-w-60">
              {step.source}
            </p>
            <p className="type-label text-[0.875rem] leading-tight text-ink-soft">
              {inPipeNames(step.label, preferences)}
            </p>
          </li>
        ))}
      </ol>
      {hasOther ? (
        <button
          type="button"
          onClick={turn}
          className="type-label inline-flex min-h-12 items-center text-rest underline underline-offset-[3px] print:hidden"
        >
          {t(inSi ? 'line.inOwn' : 'line.inSi')}
        </button>
      ) : null}
    </Part>
  );
}
