/** A sentence cut at its placeholders: plain text, or the value that stands there. */
type Piece = string | { value: string; asNumber: boolean };
export type Sentence = readonly Piece[];

/** The only two forms that the catalogue uses, `{{name}}` and `{{name, number}}`. */
const PLACEHOLDER = /\{\{\s*(\w+)\s*(,\s*number\s*)?\}\}/g;

/** @returns null for a sentence with something else in braces, or one that refers to another: the catalogue has none */
export function cutSentence(text: string): Sentence | null {
  const pieces: Piece[] = [];
  let end = 0;
  for (const match of text.matchAll(PLACEHOLDER)) {
    if (match.index > end) pieces.push(text.slice(end, match.index));
    pieces.push({ value: String(match[1]), asNumber: match[2] !== undefined });
    end = match.index + match[0].length;
  }
  if (end < text.length) pieces.push(text.slice(end));
  const isPlain = pieces.every((piece) => typeof piece !== 'string' || !/\{\{|\$t\(/.test(piece));
  return isPlain ? pieces : null;
}

const numberFormats = new Map<string, Intl.NumberFormat>();

/** Made once a locale; making one takes longer than a whole sentence. */
export function numberFormatOf(locale: string): Intl.NumberFormat {
  let format = numberFormats.get(locale);
  if (!format) {
    format = new Intl.NumberFormat(locale);
    numberFormats.set(locale, format);
  }
  return format;
}

/**
 * Nothing in a value is read as a placeholder. A value that is missing leaves its place empty. One that ends in a full stop
 * (`5:30 p.m.`) ends the sentence with it.
 */
export function sayPieces(
  sentence: Sentence,
  locale: string,
  values: Readonly<Record<string, string | number | boolean | null | undefined>>,
): string {
  let said = '';
  for (const piece of sentence) {
    if (typeof piece === 'string') {
      said += said.endsWith('.') && /^\.(?!\.)/.test(piece) ? piece.slice(1) : piece;
      continue;
    }
    const value = values[piece.value];
    if (value === undefined || value === null) continue;
    said += piece.asNumber ? figure(value, locale) : String(value);
  }
  return said;
}

/** A figure in the region's form; what a person typed in place of one stays as it is. */
function figure(value: string | number | boolean, locale: string): string {
  const isNumber = typeof value === 'number' || (typeof value === 'string' && /^-?\d+(\.\d+)?$/.test(value));
  return isNumber ? numberFormatOf(locale).format(Number(value)) : String(value);
}
