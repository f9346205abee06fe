import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { isRetestOverdue } from '../../../shared/cylinders/retest.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMessages } from '../../lib/messages.ts';
import { SignalWord } from '../../ui/caution.tsx';
import { isNearLimit, isOverLimit } from './cylinder-beam.ts';

/** What has to be known of a cylinder before it is picked up, in words; people's harm with its signal word. */
export function CylinderMarks({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const dangers = dangersOf(cylinder);
  const marks = marksOf(cylinder, toDayInput(deviceNow()));
  if (dangers.length === 0 && marks.length === 0) return null;
  return (
    <span className="flex flex-wrap items-center gap-x-2 gap-y-1">
      {dangers.map((danger) => (
        <span key={danger} className="inline-flex items-center gap-2 text-[0.875rem]">
          <span className="inline-flex">
            <SignalWord signal="danger" />
          </span>
          {t(`cylinders.mark.${danger}`)}
        </span>
      ))}
      {marks.map((mark) => (
        <span
          key={mark}
          className="type-label border border-edge px-1 text-[0.8125rem] leading-[1.125rem] whitespace-nowrap text-ink-soft"
        >
          {t(`cylinders.mark.${mark}`)}
        </span>
      ))}
    </span>
  );
}

/** Stands in the way of using or filling it safely. */
export function dangersOf(cylinder: Cylinder): ('overLimit' | 'mixed' | 'pressure')[] {
  return [
    ...(isOverLimit(cylinder) ? (['overLimit'] as const) : []),
    ...(cylinder.mixed ? (['mixed'] as const) : []),
    ...(cylinder.pressureRatingHolds === false ? (['pressure'] as const) : []),
  ];
}

/** @param today a calendar day, `2026-11-30` */
export function marksOf(cylinder: Cylinder, today: string): string[] {
  return [
    ...(cylinder.openWeighInGroupId ? ['openWeighIn'] : []),
    ...(isNearLimit(cylinder) ? ['nearLimit'] : []),
    ...(isRetestOverdue(cylinder.retestDue, today) ? ['retestOverdue'] : []),
    ...(cylinder.lastWeighedAt === null && cylinder.contentG > 0 ? ['neverWeighed'] : []),
  ];
}
