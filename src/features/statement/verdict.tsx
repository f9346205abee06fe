import type { VERDICTS } from '../../../shared/statements/cylinder-statement.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { VERDICT_WEIGHTS } from '../../lib/verdict-weights.ts';
import { Weighed } from '../../ui/weight-mark.tsx';

/** The three words, each with its own form. Never by colour. */
export function Verdict({ verdict, className = '' }: { verdict: (typeof VERDICTS)[number]; className?: string }) {
  const t = useMessages();
  return (
    <Weighed weight={VERDICT_WEIGHTS[verdict]} className={className}>
      {t(`statement.verdict.${verdict}`)}
    </Weighed>
  );
}
