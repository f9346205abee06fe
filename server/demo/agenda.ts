import type { Moment } from './diary.ts';
import type { Draws } from './draws.ts';
import type { WorkingDays } from './working-days.ts';

/** When a visit may begin: before and after a break, twice. */
const SLOT_HOURS = [8.1, 10.35, 13, 15.25] as const;
const LATEST_HOURS = 0.45;

interface Appointment {
  at: Date;
  run(moment: Moment): void;
  by: string;
}

/**
 * Who is where when. A van does one thing at a time, so that its cylinders are never in two places; work that fills half
 * a day takes two slots. What is agreed on is done in the order of time, whatever the order it was agreed in.
 */
export class Agenda {
  private readonly taken = new Set<string>();
  private readonly appointments: Appointment[] = [];
  private readonly days: WorkingDays;
  private readonly draws: Draws;
  private readonly holderOf: (personId: string) => string;

  constructor(days: WorkingDays, draws: Draws, holderOf: (personId: string) => string) {
    this.days = days;
    this.draws = draws;
    this.holderOf = holderOf;
  }

  /** At this hour, whatever else that day holds. */
  at(daysAgo: number, hour: number, by: string, run: Appointment['run']): void {
    this.appointments.push({ at: this.days.at(daysAgo, hour), by, run });
  }

  /** In free slots of the day, and not to the minute. @returns whether there were any */
  visit(daysAgo: number, by: string, slots: 1 | 2 | 3, run: Appointment['run']): boolean {
    const wanted = Array.from({ length: slots }, (_, index) => index);
    const free = SLOT_HOURS.map((_, slot) => slot).filter((slot) =>
      wanted.every((index) => slot + index < SLOT_HOURS.length && !this.isTaken(daysAgo, by, slot + index)),
    );
    if (free.length === 0) return false;
    const first = this.draws.pick(free);
    for (const index of wanted) this.taken.add(this.key(daysAgo, by, first + index));
    this.at(daysAgo, (SLOT_HOURS[first] ?? 0) + this.draws.between(0, LATEST_HOURS), by, run);
    return true;
  }

  /** As `visit`, for what was promised for that day. @throws Error when the day is full */
  promise(daysAgo: number, by: string, slots: 1 | 2 | 3, run: Appointment['run']): void {
    if (!this.visit(daysAgo, by, slots, run)) throw new Error(`nobody is free ${daysAgo} working days ago`);
  }

  /** Does everything, in the order of time. */
  run(): void {
    for (const { at, by, run } of this.appointments.toSorted((a, b) => a.at.getTime() - b.at.getTime())) {
      run({ at, by });
    }
  }

  private isTaken = (daysAgo: number, by: string, slot: number): boolean => this.taken.has(this.key(daysAgo, by, slot));
  private key = (daysAgo: number, by: string, slot: number): string => `${daysAgo} ${this.holderOf(by)} ${slot}`;
}
