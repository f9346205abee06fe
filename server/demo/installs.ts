import { laterBy } from './diary.ts';
import type { HoseEnd } from './field-work.ts';
import type { Workshop } from './workshop.ts';

/** Less than this nobody puts on a scale. */
const TOO_LITTLE_G = 15;
const HOSE_ENDS: readonly HoseEnd[] = ['emptied', 'lost', 'none'];

/** New machines, each on its day: registered, piped, calculated, and what the longer pipe needs weighed in. */
export function planInstalls({ agenda, register, field, shop, days }: Workshop): void {
  for (const unit of register.units) {
    const { beginning } = unit;
    if (beginning.kind !== 'installed') continue;
    unit.visits.push(beginning.daysAgo);
    agenda.promise(beginning.daysAgo, beginning.by, 3, (moment) => {
      const title = `Install ${unit.model?.name ?? ''}`;
      const day = days.day(beginning.daysAgo);
      const jobId = field.job(laterBy(moment, 1), { unit, kind: 'install', title, hours: 6 });
      const { extraG, chargeSheetId } = register.install(moment, unit, { day, jobId, pipe: beginning.pipe });
      if (extraG < TOO_LITTLE_G) return;
      const weighing = laterBy(moment, 190);
      const from = shop.supplyFor(weighing, unit.refrigerant, extraG);
      const beyondManual = {
        reason: 'Line set longer than the manual allows; the maker’s service desk gave the rate by telephone.',
        note: 'The customer wanted the outdoor unit behind the bay doors.',
      };
      const hose = from.length > 1 ? 'lost, filled late' : (HOSE_ENDS[beginning.daysAgo % HOSE_ENDS.length] ?? 'none');
      const papers = chargeSheetId ? { chargeSheetId } : beyondManual;
      field.weighIn(weighing, { unit, jobId, kind: 'extraCharge', from, hose, ...papers });
    });
  }
}
