import { useMessages } from '../lib/messages.ts';

/** How far a piece of work has come, one question a screen: a short ruled bar for each step. */
export function Steps({ step, count, label }: { step: number; count: number; label?: string }) {
  const t = useMessages();
  const text = t('ui.steps.of', { step, count });
  return (
    <div
      className="page-gutter flex gap-1 pt-3"
      role="progressbar"
      aria-label={label ?? text}
      aria-valuemin={1}
      aria-valuemax={count}
      aria-valuenow={step}
      aria-valuetext={text}
    >
      {Array.from({ length: count }, (_, index) => (
        <span
          // biome-ignore lint/suspicious/noArrayIndexKey: the steps are their numbers
          key={index}
          className={`h-1 flex-1 ${index + 1 < step ? 'bg-rest' : index + 1 === step ? 'bg-ink' : 'bg-rule'}`}
        />
      ))}
    </div>
  );
}
