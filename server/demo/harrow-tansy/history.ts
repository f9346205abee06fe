import type { ReferenceData } from '../../../shared/reference/reference-data.ts';
import { planInstalls } from '../installs.ts';
import type { DemoHistory } from '../load-demo.ts';
import { enterRegisters, openWorkshop } from '../workshop.ts';
import { HT } from './firm.ts';
import { planLately } from './lately.ts';
import { HARROW_TANSY } from './plan.ts';
import { planStories } from './stories.ts';
import { planMonthEnds, planRacks, planService } from './three-years.ts';

/** Everything that Harrow & Tansy sent in three years, up to now; and the sites that the town's own reader sees. */
export function harrowTansyHistory(now: Date, reference: ReferenceData): DemoHistory {
  const workshop = openWorkshop(HARROW_TANSY, now, reference);
  enterRegisters(workshop);
  planLately(workshop);
  planStories(workshop);
  planInstalls(workshop);
  planRacks(workshop);
  planMonthEnds(workshop);
  planService(workshop);
  workshop.agenda.run();
  const readers = new Map([[HT.corliss.id, ['townHall', 'library', 'fireHouse'].map(workshop.ids.site)]]);
  return { lines: workshop.diary.inOrder(), readers };
}
