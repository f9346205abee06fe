/**
 * A re-test is due by month and year: it may be made on any day of that month, and a cylinder is overdue from the first
 * day of the next (49 CFR 180.205(c)). What was filled before stays in service until it is empty.
 * @param retestDue any day of the month, `2026-11-01`
 * @returns the first day on which it is overdue, `2026-12-01`
 */
export function retestOverdueFrom(retestDue: string): string {
  const [year = 0, month = 0] = retestDue.split('-').map(Number);
  return month === 12
    ? `${String(year + 1).padStart(4, '0')}-01-01`
    : `${retestDue.slice(0, 4)}-${String(month + 1).padStart(2, '0')}-01`;
}

/** @param day the calendar day in question */
export const isRetestOverdue = (retestDue: string | null, day: string): boolean =>
  retestDue !== null && day >= retestOverdueFrom(retestDue);
