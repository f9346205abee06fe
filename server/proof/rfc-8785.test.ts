import { describe, expect, it } from 'vitest';
import { canonicalText } from '../journal/canonical-text.ts';

/** RFC 8785, appendix B, "Number Serialization Samples": IEEE 754 bits in hexadecimal and their JSON. */
const NUMBERS: [bits: string, json: string][] = [
  ['0000000000000000', '0'],
  ['8000000000000000', '0'],
  ['0000000000000001', '5e-324'],
  ['8000000000000001', '-5e-324'],
  ['7fefffffffffffff', '1.7976931348623157e+308'],
  ['ffefffffffffffff', '-1.7976931348623157e+308'],
  ['4340000000000000', '9007199254740992'],
  ['c340000000000000', '-9007199254740992'],
  ['4430000000000000', '295147905179352830000'],
  ['44b52d02c7e14af5', '9.999999999999997e+22'],
  ['44b52d02c7e14af6', '1e+23'],
  ['44b52d02c7e14af7', '1.0000000000000001e+23'],
  ['444b1ae4d6e2ef4e', '999999999999999700000'],
  ['444b1ae4d6e2ef4f', '999999999999999900000'],
  ['444b1ae4d6e2ef50', '1e+21'],
  ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
  ['3eb0c6f7a0b5ed8d', '0.000001'],
  ['41b3de4355555553', '333333333.3333332'],
  ['41b3de4355555554', '333333333.33333325'],
  ['41b3de4355555555', '333333333.3333333'],
  ['41b3de4355555556', '333333333.3333334'],
  ['41b3de4355555557', '333333333.33333343'],
  ['becbf647612f3696', '-0.0000033333333333333333'],
  ['43143ff3c1cb0959', '1424953923781206.2'],
];

const doubleOf = (bits: string): number => Buffer.from(bits, 'hex').readDoubleBE();
const hexOf = (text: string): string => Buffer.from(text, 'utf8').toString('hex');

/** RFC 8785, section 3.2.2, the sample input, character for character. */
const SAMPLE = String.raw`{
  "numbers": [333333333.33333329, 1E30, 4.50,
              2e-3, 0.000000000000000000000000001],
  "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
  "literals": [null, true, false]
}`;

/** RFC 8785, section 3.2.4, the same after sorting and UTF-8 encoding. */
const SAMPLE_BYTES = `
  7b 22 6c 69 74 65 72 61 6c 73 22 3a 5b 6e 75 6c 6c 2c 74 72
  75 65 2c 66 61 6c 73 65 5d 2c 22 6e 75 6d 62 65 72 73 22 3a
  5b 33 33 33 33 33 33 33 33 33 2e 33 33 33 33 33 33 33 2c 31
  65 2b 33 30 2c 34 2e 35 2c 30 2e 30 30 32 2c 31 65 2d 32 37
  5d 2c 22 73 74 72 69 6e 67 22 3a 22 e2 82 ac 24 5c 75 30 30
  30 66 5c 6e 41 27 42 5c 22 5c 5c 5c 5c 5c 22 2f 22 7d`.replaceAll(/\s/g, '');

/** RFC 8785, section 3.2.3, the sample for the order of names; the values say which is which. */
const NAMES = String.raw`{
  "\u20ac": "Euro Sign",
  "\r": "Carriage Return",
  "\ufb33": "Hebrew Letter Dalet With Dagesh",
  "1": "One",
  "\ud83d\ude00": "Emoji: Grinning Face",
  "\u0080": "Control",
  "\u00f6": "Latin Small Letter O With Diaeresis"
}`;

describe('The text that is chained', () => {
  it.each(NUMBERS)('writes the number %s as appendix B of RFC 8785 does: %s', (bits, json) => {
    expect(canonicalText(doubleOf(bits))).toBe(json);
    expect(canonicalText({ n: [doubleOf(bits)] })).toBe(`{"n":[${json}]}`);
  });

  it.each([
    ['7fffffffffffffff', 'NaN'],
    ['7ff0000000000000', 'Infinity'],
    ['fff0000000000000', '-Infinity'],
  ])('refuses the number %s, %s, as appendix B of RFC 8785 demands', (bits) => {
    expect(() => canonicalText({ n: doubleOf(bits) })).toThrow(/not allowed/);
  });

  it('gives the bytes of section 3.2.4 of RFC 8785 for the sample of section 3.2.2', () => {
    expect(hexOf(canonicalText(JSON.parse(SAMPLE)))).toBe(SAMPLE_BYTES);
  });

  it('sorts names by UTF-16 code units, as the sample of section 3.2.3 of RFC 8785', () => {
    const written = canonicalText(JSON.parse(NAMES));
    expect(written).toBe(
      '{"\\r":"Carriage Return","1":"One","\u0080":"Control","ö":"Latin Small Letter O With Diaeresis",' +
        '"€":"Euro Sign","😀":"Emoji: Grinning Face","\ufb33":"Hebrew Letter Dalet With Dagesh"}',
    );
  });

  it('sorts inside of arrays and objects, and leaves the order of arrays alone (RFC 8785, section 3.2.3)', () => {
    expect(canonicalText({ b: [{ d: 1, c: [2, 1] }], a: { f: null, e: true } })).toBe(
      '{"a":{"e":true,"f":null},"b":[{"c":[2,1],"d":1}]}',
    );
  });

  it('escapes control characters in the short form where there is one, else in lower case (RFC 8785, 3.2.2.2)', () => {
    expect(canonicalText('\b\t\n\f\r\u0000\u001f\u007f"\\/')).toBe('"\\b\\t\\n\\f\\r\\u0000\\u001f\u007f\\"\\\\/"');
  });

  it.each([
    ['alone', '\ud800'],
    ['the wrong way round', '\udc00\ud800'],
    ['as a name', { '\udfff': 1 }],
  ])('refuses half a character pair %s (RFC 8785, section 3.2.2.2)', (_where, value) => {
    expect(() => canonicalText(value)).toThrow(/surrogate/);
  });

  it('does not normalise: what looks alike and is written otherwise stays otherwise (RFC 8785, section 3.1)', () => {
    expect(canonicalText('A\u030a')).not.toBe(canonicalText('\u00c5'));
  });
});
