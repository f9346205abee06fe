import { useEffect, useMemo, useState } from 'react';
import type { judgeRoomLimit } from '../../../shared/room-limit/judge-room-limit.ts';
import type { RoomLimitResponse } from '../../../shared/room-limit/room-limit.schema.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { baseOf } from '../../ui/quantity-draft.ts';
import type { ChargeDraft } from './charge-draft.ts';
import { useReference } from './reference-tables.ts';

interface Judge {
  judge: typeof judgeRoomLimit;
}
let fetched: Judge | undefined;

/** The rows of the manual's table that are whole; null: none. */
export function roomTableOf({ roomTable }: Pick<ChargeDraft, 'roomTable'>, locale: string) {
  const rows = roomTable
    .map((row) => ({
      chargeG: baseOf('mass', row.charge, { locale }),
      minimumAreaM2: baseOf('area', row.area, { locale }),
    }))
    .filter(
      (row): row is { chargeG: number; minimumAreaM2: number } => row.chargeG !== null && row.minimumAreaM2 !== null,
    );
  return rows.length > 0 ? rows : null;
}

/** The room's verdict on this charge; null where no room is given, or its rules are still on their way. */
export function useRoom(draft: ChargeDraft, totalG: number | null): RoomLimitResponse | null {
  const { locale } = usePreferences();
  const { reference } = useReference(draft.refrigerant);
  const [ready, setReady] = useState(fetched);
  const areaM2 = baseOf('area', draft.roomArea, { locale });
  const wanted = areaM2 !== null || draft.roomTable.length > 0;
  useEffect(() => {
    if (!wanted || ready) return;
    let current = true;
    // The rules of rooms are fetched when somebody gives a room: most charges stay below the first limit.
    import('../../../shared/room-limit/judge-room-limit.ts').then(
      (module) => {
        fetched = { judge: module.judgeRoomLimit };
        if (current) setReady(fetched);
      },
      () => undefined,
    );
    return () => {
      current = false;
    };
  }, [wanted, ready]);
  return useMemo(() => {
    if (!ready || !wanted || totalG === null || draft.refrigerant === '') return null;
    const outcome = ready.judge(
      {
        refrigerant: draft.refrigerant,
        chargeG: totalG,
        areaM2,
        mounting: draft.mounting,
        standard: draft.roomStandard,
        manualTable: roomTableOf({ roomTable: draft.roomTable }, locale),
      },
      reference,
    );
    return outcome.ok ? outcome.value : null;
  }, [
    ready,
    wanted,
    totalG,
    areaM2,
    draft.refrigerant,
    draft.mounting,
    draft.roomStandard,
    draft.roomTable,
    locale,
    reference,
  ]);
}
