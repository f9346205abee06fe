import type { GroupView } from '../../../shared/entries/entry.schema.ts';
import { usePermission, useSession } from '../../api/session.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { isUnanswered } from './answer-form.tsx';

const DAY_MS = 24 * 60 * 60_000;

/** What can still be done about a group: reverse it, or say how full its unit was left. */
export function GroupActions({
  group,
  onReverse,
  onAnswer,
}: {
  group: GroupView;
  onReverse: () => void;
  onAnswer: () => void;
}) {
  const t = useMessages();
  const mayPost = usePermission('entries:post');
  const mayReverse = usePermission('entries:reverse');
  const refused = useWhyNotReversed(group);
  const answers = mayPost && isUnanswered(group);
  if (!mayReverse && !answers) return null;
  return (
    <div className="flex flex-col items-start gap-2">
      {answers ? (
        <Button kind="act" onClick={onAnswer}>
          {t('log.answer.act')}
        </Button>
      ) : null}
      {!mayReverse ? null : refused === null ? (
        <Button kind="quiet" onClick={onReverse}>
          {t('log.reverse.act')}
        </Button>
      ) : (
        <p className="text-[0.9375rem] text-ink-soft">{t(refused)}</p>
      )}
    </div>
  );
}

/** The message that says why this person cannot reverse the group; null: they can. The server has the last word. */
function useWhyNotReversed(group: GroupView): string | null {
  const session = useSession();
  if (group.reversedByGroupId) return 'log.reverse.already';
  if (group.reversesGroupId) return 'log.reverse.isReversal';
  if (group.openWeighIn && group.closedByGroupId) return 'log.reverse.weighInClosed';
  if (session?.permissions.includes('registers:correct')) return null;
  const own = group.recordedBy === session?.person.id;
  const within = deviceNow().getTime() - Date.parse(group.recordedAt) <= DAY_MS;
  return own && within ? null : 'log.reverse.notYours';
}
