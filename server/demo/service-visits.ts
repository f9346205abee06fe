import type { UnitCondition } from '../../shared/ledger/entry-group.schema.ts';
import { laterBy, type Moment } from './diary.ts';
import type { Draws } from './draws.ts';
import type { FieldWork, HoseEnd } from './field-work.ts';
import type { Shop } from './shop.ts';
import type { FieldUnit } from './unit-plan.ts';

export type VisitKind = 'top up' | 'recharge' | 'flat' | 'put back';
/** Above this a machine is not emptied on an ordinary visit. */
const LARGE_G = 3_500;
/** Less than this is not topped up. */
const TOO_LITTLE_G = 20;

export const ENGLISH_TITLES = [
  'Flare at the wall',
  'Valve core',
  'Coil, rubbed through',
  'Service valve',
  'Braze at the tee',
];
export const SPANISH_TITLES = [
  'Abocardado en la pared',
  'Óbus de la válvula',
  'Serpentín, rozado',
  'Válvula de servicio',
  'Soldadura en la te',
];

interface VisitFacts {
  draws: Draws;
  shop: Shop;
  field: FieldWork;
  /** The one who answers for an apprentice's work. */
  supervisorOf(personId: string): string | null;
  /** What this person calls leaks. */
  titlesOf(personId: string): readonly string[];
}

/** Ordinary service: something leaked, and leaves as it ought to be. */
export class ServiceVisits {
  private readonly facts: VisitFacts;

  constructor(facts: VisitFacts) {
    this.facts = facts;
  }

  visit(moment: Moment, unit: FieldUnit, kind: VisitKind): void {
    const isRecoverable = unit.fullG <= LARGE_G && unit.beginning.kind !== 'not known';
    if (kind === 'top up' || !isRecoverable || !this.emptyAndFill(moment, unit, kind)) this.topUp(moment, unit);
  }

  /** Charged by subcooling until it is as the manual wants it. */
  topUp(moment: Moment, unit: FieldUnit, leakedShare = this.facts.draws.between(0.05, 0.2)): string {
    const { draws, shop, field } = this.facts;
    unit.contentG = Math.max(0, Math.min(unit.contentG, unit.fullG * (1 - leakedShare)));
    const missing = unit.fullG - unit.contentG;
    const answer = draws.pickWeighted<[UnitCondition | null, number]>(
      [
        ['full', 20],
        ['notKnown', 2],
        ['notFull', 1],
      ],
      ([, weight]) => weight,
    )[0];
    const massG = answer === 'notFull' ? missing * 0.6 : missing;
    const isZeroed = draws.happens(0.12);
    const from = isZeroed
      ? [{ cylinder: shop.cylinderFor(moment, unit.refrigerant, massG), massG }]
      : shop.supplyFor(moment, unit.refrigerant, massG);
    return field.weighIn(moment, {
      unit,
      kind: unit.applianceKind === 'comfortCooling' ? 'adjust' : 'refill',
      from,
      hose: draws.pick<HoseEnd>(['none', 'none', 'none', 'emptied', 'lost', 'lost, filled late']),
      mode: isZeroed ? 'zeroed' : 'gross',
      supervisedBy: this.facts.supervisorOf(moment.by),
      ...(answer ? { answer } : {}),
    });
  }

  /** Recovered (or found flat), repaired, evacuated, filled by weight. @returns false where no cylinder has room for it */
  private emptyAndFill(moment: Moment, unit: FieldUnit, kind: Exclude<VisitKind, 'top up'>): boolean {
    const { draws, shop, field } = this.facts;
    const isFlat = kind === 'flat';
    // A part was changed and nothing had leaked, or much had: what comes out shows it.
    const held = isFlat
      ? 0
      : unit.contentG * (kind === 'put back' ? draws.between(0.994, 1) : draws.between(0.5, 0.92));
    const into = isFlat ? null : shop.recoveryCylinderFor(moment, unit.refrigerant, held);
    if (!isFlat && !into) return false;
    const supervisedBy = this.facts.supervisorOf(moment.by);
    const title = draws.pick(this.facts.titlesOf(moment.by));
    const jobId = field.job(moment, { unit, kind: 'serviceWithLeak', title, hours: 4 });
    const work = { unit, jobId, supervisedBy };
    if (into)
      field.recover(laterBy(moment, 5), { ...work, into: [{ cylinder: into, massG: held }], isCompleted: true });
    else field.foundEmpty(laterBy(moment, 5), { ...work, by: 'foundFlat' });
    field.foundEmpty(laterBy(moment, 98), { ...work, by: 'vacuum' });

    const back = laterBy(moment, 150);
    if (into && kind === 'put back') {
      field.weighIn(back, { ...work, kind: 'putBack', from: [{ cylinder: into, massG: held }] });
      const missing = unit.fullG - unit.contentG;
      if (missing < TOO_LITTLE_G) return true;
      const rest = laterBy(moment, 172);
      const from = shop.supplyFor(rest, unit.refrigerant, missing);
      field.weighIn(rest, { ...work, kind: 'refill', from, hose: 'emptied' });
    } else {
      const from = shop.supplyFor(back, unit.refrigerant, unit.fullG);
      field.weighIn(back, {
        ...work,
        kind: 'fullRecharge',
        from,
        hose: draws.pick<HoseEnd>(['none', 'emptied', 'lost']),
      });
    }
    return true;
  }
}
