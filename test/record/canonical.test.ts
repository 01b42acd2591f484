import fc from 'fast-check';
import { expect, test } from 'vitest';
import { canonicalJson, sha256 } from '../../src/record/canonical.js';

test('lists of plain values stand on one line, everything else on a line of its own', () => {
  expect(canonicalJson({ b: [1, null, 2.5], a: { c: [] }, d: [{ e: 'x' }], f: {} })).toBe(
    [
      '{',
      '  "b": [1, null, 2.5],',
      '  "a": {',
      '    "c": []',
      '  },',
      '  "d": [',
      '    {',
      '      "e": "x"',
      '    }',
      '  ],',
      '  "f": {}',
      '}',
      '',
    ].join('\n'),
  );
});

test('what is written reads back as the same value', () => {
  fc.assert(
    fc.property(fc.jsonValue({ noUnicodeString: false }), (value) => {
      // JSON has one zero, so -0 reads back as 0 by JSON's own rule.
      expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
    }),
  );
});

test('a double keeps every bit', () => {
  fc.assert(
    fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (x) => {
      expect(JSON.parse(canonicalJson([x]))[0]).toBe(x === 0 ? 0 : x);
    }),
  );
});

test('numbers that JSON cannot hold are refused with their place', () => {
  expect(() => canonicalJson({ fit: { residuals: [1, Number.NaN] } })).toThrow('$.fit.residuals[1] is NaN');
  expect(() => canonicalJson({ x: Number.POSITIVE_INFINITY })).toThrow('$.x is Infinity');
  expect(() => canonicalJson([() => 0])).toThrow('$[0] is function');
});

test('SHA-256 of "abc" as FIPS 180-4 prints it (appendix of FIPS 180-2, B.1)', () => {
  const printed = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';
  expect(sha256('abc')).toBe(printed);
  expect(sha256(new TextEncoder().encode('abc'))).toBe(printed);
});
