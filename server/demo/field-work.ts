import type { EmptyBy, GroupKind, UnitCondition } from '../../shared/ledger/entry-group.schema.ts';
import type { StockCylinder } from './cylinder-plan.ts';
import type { GroupBody } from './demo-order.ts';
import { type DemoScale, gramsOf, typedSteps, wholeSteps } from './demo-scale.ts';
import { type Diary, laterBy, type Moment, minutesAfter } from './diary.ts';
import { entry, grossReading, inCylinder, inUnit } from './group-parts.ts';
import type { Supply } from './shop.ts';
import type { FieldUnit } from './unit-plan.ts';

/** What became of the hose's content; `none`: valves at its ends, nothing to speak of. */
export type HoseEnd = 'none' | 'emptied' | 'lost' | 'lost, filled late';

export interface WorkOn {
  unit: FieldUnit;
  jobId?: string | null;
  supervisedBy?: string | null;
  note?: string;
}

export interface WeighIn extends WorkOn {
  kind: GroupKind;
  /** One cylinder after the other. */
  from: readonly Supply[];
  hose?: HoseEnd;
  mode?: 'gross' | 'zeroed';
  /** The answer to "is it full now?"; none where nothing was asked or nobody answered. */
  answer?: UnitCondition;
  chargeSheetId?: string | null;
  reason?: string;
  /** The weigh-in that was left open, whose start reading stands there. */
  closes?: { groupId: string; startedAt: Date };
  sentAfterMinutes?: number;
}

/** What people do at a unit with refrigerant. Writes the groups that their screens send, and keeps what is really where. */
export class FieldWork {
  private readonly diary: Diary;
  private readonly scaleOf: (personId: string) => DemoScale;

  constructor(diary: Diary, scaleOf: (personId: string) => DemoScale) {
    this.diary = diary;
    this.scaleOf = scaleOf;
  }

  /** From a cylinder into the unit until the scale shows the target; a scale shows whole steps. */
  weighIn(moment: Moment, weighIn: WeighIn): string {
    const { diary } = this;
    const parts = weighIn.from.map((supply, index) => this.draw(laterBy(moment, 16 * index), weighIn, supply));
    const end = minutesAfter(moment.at, 16 * parts.length - 2);
    const body = {
      ...groupOf(weighIn),
      kind: weighIn.kind,
      chargeSheetId: weighIn.chargeSheetId ?? null,
      closesGroupId: weighIn.closes?.groupId ?? null,
      occurredAt: (weighIn.closes?.startedAt ?? end).toISOString(),
      readings: parts.flatMap(({ readings }) => readings).slice(weighIn.closes ? 1 : 0),
      entries: parts.flatMap(({ entries }) => entries),
      statements: weighIn.answer ? [{ about: 'unit' as const, id: weighIn.unit.id, is: weighIn.answer }] : [],
      reason: weighIn.reason ?? null,
    };
    return diary.post(moment, body, weighIn.sentAfterMinutes ?? 16 * parts.length + 3);
  }

  private draw(moment: Moment, { unit, hose: hoseEnd = 'none', mode = 'gross' }: WeighIn, { cylinder, massG }: Supply) {
    const { diary } = this;
    const scale = this.scaleOf(moment.by);
    const hose = mode === 'zeroed' ? 'none' : hoseEnd;
    const inHose = typedSteps(scale.hoseSteps, scale);
    const hoseG = hose === 'none' ? 0 : gramsOf(inHose);
    const steps = Math.max(1, wholeSteps(massG, scale));
    const mass = typedSteps(steps, scale);
    const isFullAtStart = hose === 'emptied' || hose === 'lost';
    const end = minutesAfter(moment.at, 14);

    if (isFullAtStart) cylinder.contentG -= hoseG;
    const before = reading(diary, moment.at, { cylinder, scale, moment: 'before', mode, steps: 0 });
    if (hose !== 'none') before.hoseFull = isFullAtStart;
    if (hose !== 'none') before.hose = inHose;
    cylinder.contentG -= gramsOf(mass) + (hose === 'lost, filled late' ? hoseG : 0) - (hose === 'emptied' ? hoseG : 0);
    const after = reading(diary, end, { cylinder, scale, moment: 'after', mode, steps });
    unit.contentG += gramsOf(mass);

    const { refrigerant } = cylinder;
    const out = { refrigerant, from: inCylinder(cylinder) };
    const entries = [entry(diary, end, { ...out, mass, to: inUnit(unit), howKnown: 'weighed' })];
    if (hose === 'lost' || hose === 'lost, filled late') {
      const to = { place: 'atmosphere' as const, as: 'hose' as const };
      entries.push(entry(diary, end, { ...out, mass: inHose, to, howKnown: 'estimated' }));
    }
    return { readings: [before, after], entries };
  }

  /** A start without an end: the reading before, and nothing yet. */
  openWeighIn(
    moment: Moment,
    work: WorkOn & { kind: GroupKind; cylinder: StockCylinder; chargeSheetId?: string | null },
  ) {
    const scale = this.scaleOf(moment.by);
    const before = reading(this.diary, moment.at, { ...work, scale, moment: 'before', mode: 'gross', steps: 0 });
    before.hoseFull = false;
    const { kind, chargeSheetId = null } = work;
    const body = { ...groupOf(work), kind, chargeSheetId, openWeighIn: true, readings: [before] };
    return this.diary.post(moment, body, 1);
  }

  /**
   * Out of the unit into one or several cylinders, weighed where it arrives. Completed, it says that the unit is empty;
   * what little is left then goes with the vacuum.
   */
  recover(
    moment: Moment,
    work: WorkOn & {
      kind?: GroupKind;
      into: readonly { cylinder: StockCylinder; massG: number }[];
      isCompleted: boolean;
    },
  ): string {
    const { unit, into, isCompleted } = work;
    const { diary } = this;
    const scale = this.scaleOf(moment.by);
    const readings: NonNullable<GroupBody['readings']> = [];
    const entries: NonNullable<GroupBody['entries']> = [];
    let at = moment.at;
    for (const { cylinder, massG } of into) {
      const steps = wholeSteps(massG, scale);
      const mass = typedSteps(steps, scale);
      readings.push(grossReading(diary, at, { cylinder, scale, moment: 'before' }));
      at = minutesAfter(at, 25);
      cylinder.contentG += gramsOf(mass);
      unit.contentG -= gramsOf(mass);
      readings.push(grossReading(diary, at, { cylinder, scale, moment: 'after' }));
      const { refrigerant } = cylinder;
      const places = { from: inUnit(unit), to: inCylinder(cylinder) };
      entries.push(entry(diary, at, { refrigerant, mass, ...places, howKnown: 'weighed' }));
    }
    if (isCompleted) unit.contentG = 0;
    const body = {
      ...groupOf(work),
      kind: work.kind ?? ('recovery' as const),
      occurredAt: at.toISOString(),
      readings,
      entries,
      statements: isCompleted ? [said(unit, 'empty', 'recovery')] : [],
    };
    return diary.post(moment, body, 25 * into.length + 5);
  }

  /** The whole circuit is empty, whatever shows it. */
  foundEmpty(moment: Moment, work: WorkOn & { by: EmptyBy }): string {
    const statements = [said(work.unit, 'empty', work.by)];
    work.unit.contentG = 0;
    return this.diary.post(moment, { ...groupOf(work), kind: 'vacuum', statements }, 7);
  }

  /** A job, closed some hours later unless it is still open. */
  job(
    moment: Moment,
    { unit, kind, title, hours }: { unit: FieldUnit; kind: JobKind; title: string; hours: number | null },
  ): string {
    const id = this.diary.id(moment.at);
    const openedAt = moment.at.toISOString();
    this.diary.write(moment, { call: 'createJob', request: { id, unitId: unit.id, kind, openedAt, title } });
    if (hours !== null) {
      const closed = laterBy(moment, hours * 60);
      this.diary.write(closed, { call: 'updateJob', id, request: { closedAt: closed.at.toISOString() } });
    }
    return id;
  }
}

type JobKind = 'install' | 'serviceWithLeak' | 'recovery' | 'decommission' | 'relocation' | 'retrofit';

const groupOf = ({ unit, jobId = null, supervisedBy = null, note }: WorkOn) => ({
  unitId: unit.id,
  jobId,
  supervisedBy,
  note: note ?? null,
});

const said = (unit: FieldUnit, is: UnitCondition, by: EmptyBy) => ({ about: 'unit' as const, id: unit.id, is, by });

type Reading = NonNullable<GroupBody['readings']>[number];

/** A scale that was zeroed shows what has left the cylinder since, below zero. */
function reading(
  diary: Diary,
  at: Date,
  what: {
    cylinder: StockCylinder;
    scale: DemoScale;
    moment: 'before' | 'after';
    mode: 'gross' | 'zeroed';
    steps: number;
  },
): Reading {
  if (what.mode === 'gross') return grossReading(diary, at, what);
  const shown = typedSteps(what.steps, what.scale);
  const value = what.steps > 0 ? `-${shown.value}` : shown.value;
  const { cylinder, scale, moment } = what;
  const id = diary.id(at);
  return {
    id,
    cylinderId: cylinder.id,
    toolId: scale.id,
    at: at.toISOString(),
    moment,
    mode: 'zeroed',
    ...shown,
    value,
  };
}
