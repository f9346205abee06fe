/** What the one separator of a number such as 1,250 means; asked of the person, never guessed. */
export type SeparatorMeaning = 'decimal' | 'grouping';

export type ReadNumber =
  /** A plain decimal with a point, digits as typed but for leading zeros: `7.50`. */
  { is: 'number'; value: string } | { is: 'ambiguous'; decimal: string; grouped: string } | { is: 'none' };

const NONE: ReadNumber = { is: 'none' };
const SPACES = /[\u0020\u00a0\u202f\u2009]/g;

const plain = (whole: string, part: string): ReadNumber => {
  const trimmed = whole.replace(/^0+(?=\d)/, '') || '0';
  if (trimmed.length > 12 || part.length > 12) return NONE;
  return { is: 'number', value: part === '' ? trimmed : `${trimmed}.${part}` };
};

/** Digits in groups of three behind a first group of one to three: `1`, `250`. */
const isGrouped = (groups: readonly string[]) =>
  /^[1-9]\d{0,2}$/.test(groups[0] ?? '') && groups.slice(1).every((group) => group.length === 3);

/**
 * Reads digits with points, commas and spaces. Both separators in one number say which is which (1,250.5 and 1.250,5);
 * one that stands twice can only group. A single one followed by exactly three digits may be either and is
 * `ambiguous`, unless no grouping is possible there: nothing, a zero or more than three digits stand before it.
 */
export function readNumber(text: string, separatorMeans?: SeparatorMeaning): ReadNumber {
  const spaced = text.trim().split(SPACES);
  const digits = spaced.join('');
  if (!/^[\d.,]*\d$/.test(digits)) return NONE;
  const hasSpaces = spaced.length > 1;
  if (
    hasSpaces &&
    !isGrouped(spaced.map((group, index) => (index < spaced.length - 1 ? group : (group.split(/[.,]/)[0] ?? ''))))
  )
    return NONE;

  const separators = digits.replace(/\d/g, '');
  if (separators === '') return plain(digits, '');
  const last = separators.at(-1) as string;
  const wholeText = digits.slice(0, digits.lastIndexOf(last));
  const part = digits.slice(digits.lastIndexOf(last) + 1);

  if (separators.length === 1) {
    const couldGroup = !hasSpaces && isGrouped([wholeText, part]);
    if (!couldGroup) return plain(wholeText, part);
    if (separatorMeans === 'decimal') return plain(wholeText, part);
    if (separatorMeans === 'grouping') return plain(wholeText + part, '');
    return { is: 'ambiguous', decimal: `${wholeText}.${part}`, grouped: wholeText + part };
  }
  if (hasSpaces) return NONE;
  const other = last === '.' ? ',' : '.';
  if (!separators.includes(other)) return groupedWhole(digits.split(last), '');
  if (wholeText.includes(last)) return NONE;
  return groupedWhole(wholeText.split(other), part);
}

function groupedWhole(groups: readonly string[], part: string): ReadNumber {
  return isGrouped(groups) ? plain(groups.join(''), part) : NONE;
}
