import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { Done, Notice } from '../../ui/notice.tsx';
import type { Sheet } from './sheet-state.ts';

/** After sending: how many were weighed, what contradicts, what is left. */
export function Summary({ cylinders, sheet }: { cylinders: readonly Cylinder[]; sheet: Sheet }) {
  const t = useMessages();
  const format = useFormat();
  const results = cylinders.flatMap(({ id }) => sheet.rows[id]?.result ?? []);
  const recorded = results.filter((result) => result.is === 'recorded');
  const failed = results.length - recorded.length;
  if (results.length === 0) return null;
  const count = (verdict: string) => recorded.filter((result) => result.verdict === verdict).length;
  const [within, look, not] = [count('withinScales'), count('lookAgain'), count('notExplained')];
  const left = cylinders.length - results.length;
  const parts = [
    ...(within > 0 ? [t('stockTake.summaryWithin', { count: within })] : []),
    ...(look > 0 ? [t('stockTake.summaryLook', { count: look })] : []),
    ...(not > 0 ? [t('stockTake.summaryNot', { count: not })] : []),
    ...(left > 0 ? [t('stockTake.summaryLeft', { count: left })] : []),
  ];
  return (
    <div className="flex flex-col gap-2">
      {recorded.length === 0 ? null : (
        <Done>
          {t('stockTake.summary', { count: recorded.length })} {parts.length > 0 ? `${format.list(parts)}.` : ''}
        </Done>
      )}
      {failed === 0 ? null : <Notice role="alert" title={t('stockTake.summaryFailed', { count: failed })} />}
    </div>
  );
}
