import type { DifferenceItem } from '../../../shared/books/books.schema.ts';
import type { Holder } from '../../../shared/statements/cylinder-statement.schema.ts';
import { roundTo } from '../../../shared/units/round.ts';
import type { Formats } from '../../lib/format.ts';
import type { Translate } from '../../lib/messages.ts';
import type { FlowPart } from './flow-parts.ts';

const formats = new Map<string, Intl.NumberFormat | Intl.DateTimeFormat>();
function kept<T extends Intl.NumberFormat | Intl.DateTimeFormat>(key: string, make: () => T): T {
  const found = (formats.get(key) as T | undefined) ?? make();
  formats.set(key, found);
  return found;
}

/** `$1,204.50`; a true minus sign as everywhere. */
export function money(locale: string, value: number, currency: string): string {
  const format = kept(`${locale} ${currency}`, () => new Intl.NumberFormat(locale, { style: 'currency', currency }));
  const text = format.format(value);
  // What rounds to nothing has no sign.
  return text.replace(/[1-9]/, '') === text ? format.format(0) : text.replace('-', '\u2212');
}

/** `November 2026` of `2026-11`. */
export function longMonth(locale: string, month: string): string {
  const options = { month: 'long', year: 'numeric', timeZone: 'UTC' } as const;
  const format = kept(`${locale} month`, () => new Intl.DateTimeFormat(locale, options));
  return format.format(new Date(`${month}-15T12:00:00Z`));
}

/** As a title begins: Spanish writes its months small. */
export const asTitle = (text: string): string => text.charAt(0).toLocaleUpperCase() + text.slice(1);

/** Stock at a glance, and what is less than that would show as it is read. */
export const bookMass = (format: Formats, massG: number): string =>
  Math.abs(massG) >= 1000 ? format.stock(massG) : format.mass(massG);

/** With its sign, also above zero; without one where no figure of it is left to show. */
export function signed(format: Formats, massG: number): string {
  const text = format.mass(massG);
  if (text === format.mass(-massG)) return format.mass(0);
  return massG > 0 ? `+${text}` : text;
}

/** `bought`; at the other side of the picture `bought, taken back`. */
export function partWords(t: Translate, { part, kind, turned }: Pick<FlowPart, 'part' | 'kind' | 'turned'>): string {
  const words = t(`books.part.${part}`);
  if (!turned) return words;
  return kind === 'open' ? t(`books.surplus.${part}`) : t('books.takenBack', { part: words });
}

/** `cyl. 7702`, `unit 0412`, the reclaimer. */
export const subjectWords = (t: Translate, { subject }: Pick<DifferenceItem, 'subject'>): string =>
  t(`log.placeNamed.${subject.kind}`, { label: subject.label });

/** Where a difference is looked into: a cylinder's statement over the two readings, else what was recorded. */
export const differencePath = ({ subject, groupId, statement }: DifferenceItem): string =>
  statement ? `/cylinders/${subject.id}/statement?from=${statement.from}&to=${statement.to}` : `/log/${groupId}`;

/** Names of those in whose hands it was, `S. Brandt, van 3`. */
export const handsWords = (t: Translate, held: readonly Holder[]): string =>
  held.length === 0
    ? t('books.handsNotKnown')
    : held.map(({ name, van }) => [name ?? t('books.handsNobody'), van].filter(Boolean).join(', ')).join('; ');

/** The same as a sentence: `In the hands of S. Brandt, van 3`. */
export const handsSentence = (t: Translate, held: readonly Holder[]): string =>
  held.length === 0 ? t('books.hands.notKnown') : t('books.hands', { who: handsWords(t, held) });

/** Twice an uncertainty is worked out, and carries no more figures than a scale shows. */
export const aboutFigure = (format: Formats, massG: number): string =>
  format.massFigure(roundTo(massG, Math.abs(massG) >= 10 ? 0 : 1));

/** A kind of place as the books name it: `atmosphere:hose`, `cylinderDifference`. */
export const placeKindWords = (t: Translate, kind: string): string =>
  t(kind === 'cylinder' ? 'books.ourCylinders' : `log.place.${kind.replace(':', '.')}`);
