/** Faces of a page; the files stand in `fonts/`, made once for print (DEVELOPERS.md says how). */
export const FACES = {
  condensed: 'archivo-condensed-500.ttf',
  text: 'archivo-400.ttf',
  strong: 'archivo-600.ttf',
  wide: 'archivo-wide-800.ttf',
  mono: 'spline-sans-mono-400.ttf',
} as const;
export type Face = keyof typeof FACES;

/** What the face has no glyph for is drawn: a lowered 2, an arrow as lines. */
export type Run = { kind: 'text'; text: string } | { kind: 'sub'; text: string } | { kind: 'arrow'; right: boolean };

const DRAWN = /([₂→←])/u;
/** Relations spelled with what every face has. */
const SPELLED: Readonly<Record<string, string>> = {
  '≤': '<=',
  '≥': '>=',
  Δ: 'D',
  '\u00a0': ' ',
  '\u202f': ' ',
  '‑': '-',
};

export function runsOf(text: string): Run[] {
  return text
    .replaceAll(/[≤≥Δ\u00a0\u202f‑]/gu, (sign) => SPELLED[sign] ?? sign)
    .replaceAll(/[\r\n\t]+/g, ' ')
    .replaceAll('CO2', 'CO₂')
    .split(DRAWN)
    .filter((part) => part !== '')
    .map((part): Run => {
      if (part === '₂') return { kind: 'sub', text: '2' };
      if (part === '→' || part === '←') return { kind: 'arrow', right: part === '→' };
      return { kind: 'text', text: part };
    });
}

/** A lowered figure's size, and how far it hangs below the line, as parts of the size of its text. */
export const SUB = { size: 0.68, drop: 0.36 } as const;
/** Width of an arrow with its blanks, as a part of the size. */
export const ARROW_WIDTH = 0.95;

/**
 * Breaks a text into lines no wider than `width`; a word that is wider by itself is cut. Blanks belong to no line's ends.
 * @param widthOf in the same unit as `width`
 */
export function wrapText(text: string, width: number, widthOf: (text: string) => number): string[] {
  const lines: string[] = [];
  let line = '';
  // A no-break space keeps a figure with its unit.
  for (const word of text
    .replaceAll(/(\d) (?=°)/g, '$1\u00a0')
    .split(/[^\S\u00a0\u202f]+/)
    .filter(Boolean)) {
    const longer = line === '' ? word : `${line} ${word}`;
    if (widthOf(longer) <= width) {
      line = longer;
      continue;
    }
    if (line !== '') lines.push(line);
    line = word;
    while (widthOf(line) > width && line.length > 1) {
      let fits = line.length - 1;
      while (fits > 1 && widthOf(line.slice(0, fits)) > width) fits -= 1;
      lines.push(line.slice(0, fits));
      line = line.slice(fits);
    }
  }
  return line === '' && lines.length > 0 ? lines : [...lines, line];
}
