import type { DifferenceItem } from '../../../shared/books/books.schema.ts';
import { useMessages } from '../../lib/messages.ts';
import { Weighed } from '../../ui/weight-mark.tsx';

const WEIGHTS = { withinScales: 'empty', lookAgain: 'half', notExplained: 'full' } as const;

/** What is to be said of a difference: one of the three words, or that a certificate names it. Never by colour. */
export function Verdict({ verdict, className = '' }: { verdict: DifferenceItem['verdict']; className?: string }) {
  const t = useMessages();
  return verdict === null ? (
    <span className={className}>{t('books.byCertificate')}</span>
  ) : (
    <Weighed weight={WEIGHTS[verdict]} className={className}>
      {t(`statement.verdict.${verdict}`)}
    </Weighed>
  );
}
