/** A sentence cut at its placeholders: plain text, or the value that stands there. */
type Piece = string | { value: string; asNumber: boolean };
export type Sentence = readonly Piece[];

/** The only two forms that the catalogue uses, `{{name}}` and `{{name, number}}`. */
const PLACEHOLDER = /\{\{\s*(\w+)\s*(,\s*number\s*)?\}\}/g;

/** @returns null for a sentence with something else in braces, or one that refers to another */
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

/** @returns null where a value is missing or neither text nor number */
export function sayPieces(
  sentence: Sentence,
  locale: string,
  values: Readonly<Record<string, unknown>>,
): string | null {
  let said = '';
  for (const piece of sentence) {
    if (typeof piece === 'string') {
      said += piece;
      continue;
    }
    const value = values[piece.value];
    if (typeof value === 'number') said += piece.asNumber ? numberFormatOf(locale).format(value) : String(value);
    else if (typeof value === 'string' && !piece.asNumber) said += value;
    else return null;
  }
  return said;
}
