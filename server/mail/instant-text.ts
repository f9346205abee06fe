/** In UTC and saying so, because a mail is read anywhere. */
export function instantText(at: Date, locale: string): string {
  return `${new Intl.DateTimeFormat(locale, { dateStyle: 'long', timeStyle: 'short', timeZone: 'UTC' }).format(at)} UTC`;
}
