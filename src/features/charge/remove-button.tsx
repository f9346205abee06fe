import { useMessages } from '../../lib/messages.ts';

/** At the right edge of a row of a list; says what it takes away. */
export function RemoveButton({ what, onClick }: { what: string; onClick: () => void }) {
  const t = useMessages();
  return (
    <button
      type="button"
      aria-label={t('chargeScreen.remove', { what })}
      onClick={onClick}
      className="absolute top-1 -right-2 grid size-12 place-items-center text-ink-soft hover:text-ink"
    >
      <svg aria-hidden="true" viewBox="0 0 16 16" className="size-3.5 stroke-current stroke-2">
        <path d="M2 2l12 12M14 2L2 14" />
      </svg>
    </button>
  );
}
