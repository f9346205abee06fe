import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

/** Tokens of both themes, read from the stylesheet itself. */
const css = readFileSync('src/styles.css', 'utf8');
const tokens = new Map<string, [light: string, dark: string]>();
for (const [, name, value] of css.matchAll(/--color-([a-z-]+):\s*(light-dark\([^)]+\)|#[0-9a-f]{6})/g)) {
  const colours = value?.match(/#[0-9a-f]{6}/g) ?? [];
  tokens.set(name as string, [colours[0] as string, (colours[1] ?? colours[0]) as string]);
}

/** Relative luminance and contrast: WCAG 2.2, "relative luminance" and "contrast ratio". */
function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const channel = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return channel <= 0.04045 ? channel / 12.92 : ((channel + 0.055) / 1.055) ** 2.4;
  }) as [number, number, number];
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}
function contrast(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x) as [number, number];
  return (high + 0.05) / (low + 0.05);
}

const GROUNDS = ['ground', 'sheet', 'well', 'rest-wash'];
const onEveryGround = (names: string[]) => names.flatMap((name) => GROUNDS.map((ground) => [name, ground] as const));

describe.each([
  ['light', 0],
  ['dark', 1],
] as const)('The %s theme', (_, theme) => {
  const of = (name: string) => {
    const token = tokens.get(name);
    if (!token) throw new Error(`There is no token ${name}`);
    return token[theme];
  };

  it.each([
    ...onEveryGround(['ink', 'ink-soft', 'rest']),
    ['move', 'ground'],
    ['move', 'sheet'],
    ['on-rest', 'rest'],
    ['on-rest', 'rest-strong'],
    ['ground', 'ink'],
    ['on-danger', 'danger'],
    ['on-warning', 'warning'],
    ['on-caution', 'caution'],
    ['on-notice', 'notice'],
  ] as const)('shows text %s on %s at 4.5:1 or more (WCAG 2.2, 1.4.3)', (text, ground) => {
    expect(contrast(of(text), of(ground))).toBeGreaterThanOrEqual(4.5);
  });

  it.each([
    ...onEveryGround(['edge']),
    ['rest-fill', 'ground'],
    ['rest-fill', 'sheet'],
    ['move-fill', 'ground'],
    ['move-fill', 'sheet'],
  ] as const)('shows the graphic %s on %s at 3:1 or more (WCAG 2.2, 1.4.11)', (graphic, ground) => {
    expect(contrast(of(graphic), of(ground))).toBeGreaterThanOrEqual(3);
  });
});
