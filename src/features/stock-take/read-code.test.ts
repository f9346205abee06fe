import { createRequire } from 'node:module';
import { describe, expect, it } from 'vitest';
import { qrPath } from './qr-path.ts';
import { cylinderOfCode } from './read-code.ts';

const ID = '0195f0c4-0000-7000-8000-000000000741';

describe('A scanned code', () => {
  it.each([
    [`https://records.example.org/cylinders/${ID}`],
    [`http://127.0.0.1:3000/cylinders/${ID}/`],
    [`  https://records.example.org/cylinders/${ID.toUpperCase()}?from=tag `],
  ])('of a tag names the cylinder: %s', (text) => {
    expect(cylinderOfCode(text)).toBe(ID);
  });

  it.each([
    ['7741'],
    [''],
    [`https://records.example.org/units/${ID}`],
    [`https://records.example.org/cylinders/${ID}/rental`],
    ['https://records.example.org/cylinders/7741'],
    [`javascript:/cylinders/${ID}`],
    [`/cylinders/${ID}`],
  ])('of anything else names none: %s', (text) => {
    expect(cylinderOfCode(text)).toBeNull();
  });
});

describe('The code on a tag', () => {
  it('is read back as the address that it was made from', async () => {
    const address = `https://records.example.org/cylinders/${ID}`;
    const { size, path } = await qrPath(address);
    const dot = 4;
    const pixels = new Uint8ClampedArray((size * dot) ** 2 * 4).fill(255);
    for (const [, x, y, width] of path.matchAll(/M(\d+) (\d+)h(\d+)v1h-\d+z/g)) {
      for (let row = Number(y) * dot; row < (Number(y) + 1) * dot; row += 1) {
        for (let column = Number(x) * dot; column < (Number(x) + Number(width)) * dot; column += 1) {
          pixels.fill(0, (row * size * dot + column) * 4, (row * size * dot + column) * 4 + 3);
        }
      }
    }
    const read = createRequire(import.meta.url)('jsqr') as typeof import('jsqr').default;
    expect(read(pixels, size * dot, size * dot)?.data).toBe(address);
  });
});
