import type { DifferenceItem } from '../../../shared/books/books.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { VERDICT_WEIGHTS } from '../../lib/verdict-weights.ts';
import { Weighed } from '../../ui/weight-mark.tsx';

/** What is to be said of a difference: one of the three words, or that a certificate names it. Never by colour. */
export function Verdict({ verdict, className = '' }: { verdict: DifferenceItem['verdict']; className?: string }) {
  const t = useMessages();
  return verdict === null ? (
    <span className={className}>{t('books.byCertificate')}</span>
  ) : (
    <Weighed weight={VERDICT_WEIGHTS[verdict]} className={className}>
      {t(`statement.verdict.${verdict}`)}
    </Weighed>
  );
}
