/** The device's clock. Outside `lib` nothing reads it: a form takes the moment once, when it opens. */
export const deviceNow = (): Date => new Date();

const two = (value: number) => String(value).padStart(2, '0');

/** A moment as a field of type `datetime-local` holds it, on the device's own clock: `2026-11-30T16:12`. */
export function toLocalInput(moment: Date): string {
  return `${toDayInput(moment)}T${two(moment.getHours())}:${two(moment.getMinutes())}`;
}

/** A day as a field of type `date` holds it, on the device's own calendar. */
export function toDayInput(moment: Date): string {
  return `${moment.getFullYear()}-${two(moment.getMonth() + 1)}-${two(moment.getDate())}`;
}

/**
 * What a field of type `datetime-local` holds as an instant with its offset (RFC 3339), on the device's own clock; null
 * where it is not whole. An hour that the clock skips or repeats is the one that the browser takes.
 */
export function instantOfLocal(text: string): string | null {
  const moment = new Date(text);
  if (!/^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}/.test(text) || Number.isNaN(moment.getTime())) return null;
  const east = -moment.getTimezoneOffset();
  const size = Math.abs(east);
  const offset = `${east < 0 ? '-' : '+'}${two(Math.floor(size / 60))}:${two(size % 60)}`;
  return `${text.slice(0, 16)}:${two(moment.getSeconds())}${offset}`;
}
