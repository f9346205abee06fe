import { TZDate } from '@date-fns/tz';

/** `2026-11-30` in the zone that the date carries. */
const dayOf = (date: TZDate): string =>
  [date.getFullYear(), date.getMonth() + 1, date.getDate()].map((part) => String(part).padStart(2, '0')).join('-');

/**
 * Mondays to Fridays counted back from now, so that a history can be told in working days whatever day it is today. Day
 * 0 is today, also on a Sunday.
 */
export class WorkingDays {
  private readonly days: TZDate[];
  private readonly timeZone: string;

  constructor(now: Date, timeZone: string, count: number) {
    this.timeZone = timeZone;
    const today = new TZDate(now.getTime(), timeZone);
    this.days = [today];
    const day = new TZDate(today.getTime(), timeZone);
    while (this.days.length <= count) {
      day.setDate(day.getDate() - 1);
      if (day.getDay() !== 0 && day.getDay() !== 6) this.days.push(new TZDate(day.getTime(), timeZone));
    }
  }

  /** `hour` with its minutes as a fraction: 13.5 is half past one. */
  at(daysAgo: number, hour: number): Date {
    const day = this.require(daysAgo);
    const minutes = Math.round(hour * 60);
    const local = new TZDate(
      day.getFullYear(),
      day.getMonth(),
      day.getDate(),
      Math.floor(minutes / 60),
      minutes % 60,
      this.timeZone,
    );
    return new Date(local.getTime());
  }

  /** The calendar day there. */
  day(daysAgo: number): string {
    return dayOf(this.require(daysAgo));
  }

  /** The calendar day so many days, weekends included, before or (below zero) after today. */
  calendarDay(daysAgo: number): string {
    const day = new TZDate(this.require(0).getTime(), this.timeZone);
    day.setDate(day.getDate() - daysAgo);
    return dayOf(day);
  }

  private require(daysAgo: number): TZDate {
    const day = this.days[daysAgo];
    if (!day) throw new RangeError(`${daysAgo} working days ago lies before the demo's history`);
    return day;
  }
}
