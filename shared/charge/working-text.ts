/** A figure of a line of arithmetic with its unit; `aside` stands behind it in brackets and is not worked with. */
export interface Figure {
  value: number;
  unit: string;
  aside?: string;
}
export type Sign = '+' | '-' | 'x' | '/' | '(' | ')' | 'max(' | ',';

const PART = /\s*(?:(-?\d+(?:\.\d+)?)(?: (g\/m|kg\/m3|kg|mm2|m|g)(?![\w/]))?|(max\(|[-+x/(),]))/y;
const SYMBOLS: Readonly<Record<string, string>> = { mm2: 'mm²', 'kg/m3': 'kg/m³' };

/** The figures and signs of a line as `steps.ts` writes it; null for anything else, a manual's formula above all. */
export function readWorking(expression: string): (Figure | Sign)[] | null {
  const parts: (Figure | Sign)[] = [];
  PART.lastIndex = 0;
  for (let at = 0; at < expression.length; at = PART.lastIndex) {
    const match = PART.exec(expression);
    if (!match) return null;
    const [, figure, unit = '', sign] = match;
    parts.push(sign ? (sign as Sign) : { value: Number(figure), unit: SYMBOLS[unit] ?? unit });
  }
  return parts;
}

interface Ways {
  round: (figure: Figure) => number;
  show: (figure: Figure) => string;
  /** `a - b, but not below zero` */
  notBelowZero: (working: string) => string;
}
interface Worked {
  value: number;
  text: string;
}

/** The line in print, and what its figures give as they stand there. */
export function writeWorking(parts: readonly (Figure | Sign)[], ways: Ways): Worked {
  let at = 0;
  const take = (sign: Sign): boolean => {
    if (parts[at] !== sign) return false;
    at += 1;
    return true;
  };
  const atom = (): Worked => {
    const part = parts[at++];
    if (typeof part === 'object') return { value: ways.round(part), text: ways.show(part) };
    const isMax = part === 'max(';
    if (isMax) at += 2; // `0 m,`: what it must not fall below
    const inner = sum();
    take(')');
    if (!isMax) return { value: inner.value, text: `(${inner.text})` };
    const text = inner.value < 0 ? ways.notBelowZero(inner.text) : inner.text;
    const isAlone = at >= parts.length && parts[0] === 'max(';
    return { value: Math.max(0, inner.value), text: isAlone ? text : `(${text})` };
  };
  const product = (): Worked => {
    let { value, text } = atom();
    for (;;) {
      const isTimes = take('x');
      if (!isTimes && !take('/')) return { value, text };
      const next = atom();
      value = isTimes ? value * next.value : value / next.value;
      text += `${isTimes ? ' × ' : ' / '}${next.text}`;
    }
  };
  const sum = (): Worked => {
    let { value, text } = product();
    for (;;) {
      const isPlus = take('+');
      if (!isPlus && !take('-')) return { value, text };
      const next = product();
      value += isPlus ? next.value : -next.value;
      text += `${isPlus ? ' + ' : ' \u2212 '}${next.text}`;
    }
  };
  return sum();
}
