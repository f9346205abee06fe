import { Link } from 'react-router-dom';
import { useMessages } from '../lib/messages.ts';

/** To the exports, which ask no more than to begin; nothing for who may not take it out (`to` null). */
export function TakeOutLink({ to, label }: { to: string | null; label?: string }) {
  const t = useMessages();
  if (to === null) return null;
  return (
    <Link to={to} className="not-on-paper inline-flex min-h-12 items-center">
      {label ?? t('ui.takeOut')}
    </Link>
  );
}
