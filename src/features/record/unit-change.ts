import type { z } from 'zod';
import type {
  addFullChargeRequest,
  addUnitRefrigerantRequest,
  addUnitSiteRequest,
} from '../../../shared/unit-register/unit.schema.ts';

/** What holds of a unit from a moment on. Its id is made with the form, so that a second try records nothing twice. */
export type UnitChange =
  | { is: 'site'; body: z.input<typeof addUnitSiteRequest> }
  | { is: 'refrigerant'; body: z.input<typeof addUnitRefrigerantRequest> }
  | { is: 'fullCharge'; body: z.input<typeof addFullChargeRequest> };

/** Which blank of the form stands behind each place of a change, so that a refusal is shown at its blank. */
const BLANKS: Record<UnitChange['is'], readonly (readonly [pointer: string, field: string])[]> = {
  site: [
    ['/siteId', 'siteId'],
    ['/validFrom', 'at'],
  ],
  refrigerant: [
    ['/refrigerant', 'refrigerant'],
    ['/validFrom', 'at'],
    ['/jobId', 'unitId'],
  ],
  fullCharge: [
    ['/mass', 'mass'],
    ['/method', 'method'],
    ['/validFrom', 'at'],
    ['/jobId', 'unitId'],
  ],
};

export const blankOfChange = (is: UnitChange['is'], pointer: string): string | undefined =>
  BLANKS[is].find(([place]) => pointer === place || pointer.startsWith(`${place}/`))?.[1];
