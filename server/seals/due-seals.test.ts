import { describe, expect, it } from 'vitest';
import { dueSeals, isUnsealed } from './due-seals.ts';

const firm = (
  headSequence: number,
  lastSeal: { at: string; record: number } | null,
  timeZone = 'America/New_York',
) => ({
  firmId: '018f0000-0000-7000-8000-000000000001',
  timeZone,
  headSequence,
  lastSeal: lastSeal && { at: new Date(lastSeal.at), record: lastSeal.record },
});
const isDue = (now: string, ...given: Parameters<typeof firm>) =>
  dueSeals(new Date(now), [firm(...given)]).length === 1;

describe('The daily seal', () => {
  it('is due at once where there is none yet', () => {
    expect(isDue('2026-11-30T15:00:00Z', 1, null)).toBe(true);
  });

  it('is not due for a firm without a record', () => {
    expect(isDue('2026-11-30T15:00:00Z', 0, null)).toBe(false);
  });

  it('is due once a calendar day of the firm, not of the server', () => {
    const last = { at: '2026-12-01T04:59:00Z', record: 8 }; // 23:59 on 30 November in New York
    expect(isDue('2026-12-01T04:59:59Z', 9, last)).toBe(false);
    expect(isDue('2026-12-01T05:00:00Z', 9, last)).toBe(true);
    expect(isDue('2026-12-01T05:00:00Z', 9, last, 'UTC')).toBe(false);
  });

  it('is not due when nothing was recorded since but the seal itself', () => {
    const last = { at: '2026-11-01T00:00:00Z', record: 8 };
    expect(isUnsealed(firm(8, last))).toBe(false);
    expect(isDue('2026-12-01T05:00:00Z', 8, last)).toBe(false);
    expect(isDue('2026-12-01T05:00:00Z', 9, last)).toBe(true);
  });

  it('is not due again when a clock was set back', () => {
    expect(isDue('2026-11-29T15:00:00Z', 9, { at: '2026-11-30T15:00:00Z', record: 8 })).toBe(false);
  });
});
