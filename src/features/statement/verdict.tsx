import type { VERDICTS } from '../../../shared/statements/cylinder-statement.schema.ts';
import { useMessages } from '../../lib/messages.ts';

type Word = (typeof VERDICTS)[number];

/** The three words, each with its own form: an empty, a half and a full weight. Never by colour. */
export function Verdict({ verdict, className = '' }: { verdict: Word; className?: string }) {
  const t = useMessages();
  return (
    <span className={`inline-flex items-center gap-2 whitespace-nowrap ${WEIGHT[verdict]} ${className}`}>
      <VerdictMark verdict={verdict} />
      {t(`statement.verdict.${verdict}`)}
    </span>
  );
}

const WEIGHT: Record<Word, string> = { withinScales: '', lookAgain: 'font-[600]', notExplained: 'font-[700]' };

function VerdictMark({ verdict }: { verdict: Word }) {
  return (
    <svg aria-hidden="true" viewBox="0 0 10 10" className="size-2.5 shrink-0 fill-none stroke-current">
      <path d="M.75 .75h8.5v8.5H.75z" strokeWidth="1.5" />
      {verdict === 'withinScales' ? null : (
        <path d={verdict === 'lookAgain' ? 'M.75 9.25h8.5V.75z' : 'M.75 .75h8.5v8.5H.75z'} className="fill-current" />
      )}
    </svg>
  );
}
