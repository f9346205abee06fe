/**
 * Days and months in a time zone. The zone data is the runtime's own; whoever stores a day stores its version beside it
 * (`process.versions.tz`).
 */
const formats = new Map<string, Intl.DateTimeFormat>();

function formatFor(timeZone: string): Intl.DateTimeFormat {
  const held = formats.get(timeZone);
  if (held) return held;
  const format = new Intl.DateTimeFormat('en-CA', { timeZone, year: 'numeric', month: '2-digit', day: '2-digit' });
  formats.set(timeZone, format);
  return format;
}

/** The calendar day there at this instant (milliseconds since 1970, UTC): `2026-11-30`. */
export function dayInZone(at: number, timeZone: string): string {
  const parts = Object.fromEntries(
    formatFor(timeZone)
      .formatToParts(at)
      .map(({ type, value }) => [type, value]),
  );
  return `${String(parts.year).padStart(4, '0')}-${parts.month}-${parts.day}`;
}

/** `2026-11`. */
export const monthInZone = (at: number, timeZone: string): string => dayInZone(at, timeZone).slice(0, 7);
