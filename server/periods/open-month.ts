import { type Month, monthBefore } from '../../shared/periods/month.ts';
import type { Refusal } from '../../shared/problems/outcome.ts';
import { monthInZone } from '../../shared/units/calendar.ts';
import { problemOfRefusals } from '../http/problem.ts';
import { nextToClose } from './checklist.service.ts';
import type { FirmMonths } from './firm-months.repository.ts';

/** A month in which something can still be settled or carried: over, and not closed. @throws Problem 422 */
export function requireOpenMonth(month: Month, firm: FirmMonths, now: Date): void {
  const refusal = openMonthRefusal(month, firm, now);
  if (refusal) throw problemOfRefusals([refusal]);
}

/** The one month that can be closed now. @throws Problem 422 */
export function requireNextMonth(month: Month, firm: FirmMonths, now: Date): void {
  requireOpenMonth(month, firm, now);
  const next = nextToClose(firm, monthInZone(now.getTime(), firm.timeZone));
  if (next === null) throw problemOfRefusals([{ code: 'nothingToClose', path: '/month' }]);
  if (month !== next) {
    throw problemOfRefusals([{ code: 'monthsInOrder', path: '/month', given: month, allowed: next }]);
  }
}

function openMonthRefusal(month: Month, { firstOpenMonth, timeZone }: FirmMonths, now: Date): Refusal | null {
  if (firstOpenMonth !== null && month < firstOpenMonth) {
    return { code: 'monthClosed', path: '/month', given: month, allowed: firstOpenMonth };
  }
  const running = monthInZone(now.getTime(), timeZone);
  return month < running ? null : { code: 'monthNotOver', path: '/month', given: month, allowed: monthBefore(running) };
}
