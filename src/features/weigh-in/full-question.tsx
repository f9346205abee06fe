import { useMessages } from '../../lib/messages.ts';
import type { FullAnswer } from './weigh-in-state.ts';

const ANSWERS: readonly FullAnswer[] = ['full', 'notFull', 'moreThanFull', 'notKnown'];

/** The one question of an addition: how full is the unit now. Nothing is chosen beforehand: an answer is a statement. */
export function FullQuestion({
  answer,
  onAnswer,
  why,
  answers = ANSWERS,
}: {
  answer: FullAnswer | null;
  onAnswer: (answer: FullAnswer) => void;
  /** Why it is asked. */
  why: string;
  answers?: readonly FullAnswer[];
}) {
  const t = useMessages();
  return (
    <fieldset className="border-l-4 border-ink pl-4">
      <legend className="float-left w-full text-[1.1875rem] font-[650]">{t('weighIn.full.title')}</legend>
      <p className="clear-left pt-1 pb-2 text-[0.9375rem] leading-snug text-ink-soft">{why}</p>
      {answers.map((value) => (
        <label
          key={value}
          className={`relative flex min-h-14 items-center justify-between gap-3 border-t border-rule py-1.5 hover:bg-well has-focus-visible:z-1 has-focus-visible:outline-3 has-focus-visible:outline-ink ${answer === value ? 'pl-3 shadow-[inset_4px_0_0_var(--color-rest)]' : ''}`}
        >
          <span className="leading-tight">
            <span className="font-[600]">{t(`weighIn.full.${value}`)}</span>
            <span className="type-label block text-[0.9375rem] text-ink-soft">{t(`weighIn.full.${value}.detail`)}</span>
          </span>
          <input
            type="radio"
            name="full"
            checked={answer === value}
            onChange={() => onAnswer(value)}
            className="absolute inset-0 cursor-pointer appearance-none opacity-0"
          />
        </label>
      ))}
    </fieldset>
  );
}
