import { emptyQuantity, type QuantityDraft } from '../../ui/quantity-draft.ts';
import type { Habits } from './weigh-in-state.ts';

const KEY = 'tarewright.weigh-in';

/** The hose of this device's technician: asked once, offered after that. */
export interface HoseHabit {
  length: QuantityDraft<'length'>;
  bore: QuantityDraft<'pipeDiameter'>;
}

interface Kept extends Habits {
  hoseSize: HoseHabit;
}

const first: Kept = {
  toolId: null,
  mode: 'gross',
  unit: 'g',
  hose: { full: true, content: null },
  hosePlan: null,
  hoseSize: { length: emptyQuantity('m'), bore: emptyQuantity('mm') },
};

/** What was chosen the last time on this device; without storage the usual choice. */
export function readHabits(): Kept {
  try {
    return { ...first, ...(JSON.parse(localStorage.getItem(KEY) ?? '{}') as Partial<Kept>) };
  } catch {
    return first;
  }
}

export function keepHabits(change: Partial<Kept>): void {
  try {
    localStorage.setItem(KEY, JSON.stringify({ ...readHabits(), ...change }));
  } catch {
    // the next weigh-in asks again
  }
}
