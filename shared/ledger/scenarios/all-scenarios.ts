import { newInstall } from './s01-new-install.ts';
import { scaleZeroed } from './s02-scale-zeroed.ts';
import { overshoot } from './s03-overshoot.ts';
import { cylinderChanged } from './s04-cylinder-changed.ts';
import { openWeighIn } from './s05-open-weigh-in.ts';
import { refillAtFullCharge } from './s06-refill-at-full-charge.ts';
import { refillOffFullCharge } from './s07-refill-off-full-charge.ts';
import { bookNotKnown } from './s08-book-not-known.ts';
import { twoRefills } from './s09-two-refills.ts';
import { putBack } from './s10-put-back.ts';
import { foundFlat } from './s11-found-flat.ts';
import { warrantyReplacement } from './s12-warranty-replacement.ts';
import { recoveryTwoCylinders } from './s13-recovery-two-cylinders.ts';
import { recoverySurplus } from './s14-recovery-surplus.ts';
import { neverSeenBefore } from './s15-never-seen-before.ts';
import { relocationRetrofit } from './s16-relocation-retrofit.ts';
import { transfer } from './s17-transfer.ts';
import { reclaimer } from './s18-reclaimer.ts';
import { cylinderBought } from './s19-cylinder-bought.ts';
import { readingAgainstBook } from './s20-reading-against-book.ts';
import { lateEntries } from './s21-late-entries.ts';
import { reversals } from './s22-reversals.ts';
import type { Scenario } from './scenario.ts';

export const SCENARIOS: readonly Scenario[] = [
  newInstall,
  scaleZeroed,
  overshoot,
  cylinderChanged,
  openWeighIn,
  refillAtFullCharge,
  refillOffFullCharge,
  bookNotKnown,
  twoRefills,
  putBack,
  foundFlat,
  warrantyReplacement,
  recoveryTwoCylinders,
  recoverySurplus,
  neverSeenBefore,
  relocationRetrofit,
  transfer,
  reclaimer,
  cylinderBought,
  readingAgainstBook,
  lateEntries,
  reversals,
];
