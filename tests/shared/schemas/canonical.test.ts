import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { canonicalText, digestOf } from '@shared/schemas/canonical';

describe('canonicalText', () => {
  test('gives the example of RFC 8785, section 3.2.2', () => {
    const content = {
      numbers: [Number('333333333.33333329'), 1e30, 4.5, 2e-3, 0.000000000000000000000000001],
      string: "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\u0022/",
      literals: [null, true, false],
    };
    expect(canonicalText(content)).toBe(
      '{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}',
    );
  });

  test('sorts keys by UTF-16 code units, as RFC 8785, section 3.2.3 does', () => {
    const content = {
      '\u20ac': 'Euro Sign',
      '\r': 'Carriage Return',
      '\ufb33': 'Hebrew Letter Dalet With Dagesh',
      '1': 'One',
      '\ud83d\ude00': 'Emoji: Grinning Face',
      '\u0080': 'Control',
      '\u00f6': 'Latin Small Letter O With Diaeresis',
    };
    expect(Object.values(JSON.parse(canonicalText(content).replace('"1":', '"one":')) as object)).toEqual([
      'Carriage Return',
      'One',
      'Control',
      'Latin Small Letter O With Diaeresis',
      'Euro Sign',
      'Emoji: Grinning Face',
      'Hebrew Letter Dalet With Dagesh',
    ]);
  });

  test('does not depend on the order of keys and reads back as the same', () => {
    fc.assert(
      fc.property(
        fc.dictionary(fc.string(), fc.jsonValue({ noUnicodeString: true }), { noNullPrototype: true }),
        (content) => {
          const reversed = Object.fromEntries(Object.entries(content).reverse());
          expect(canonicalText(reversed)).toBe(canonicalText(content));
          expect(canonicalText(JSON.parse(canonicalText(content)))).toBe(canonicalText(content));
        },
      ),
    );
  });

  test('refuses what has no JSON text', () => {
    expect(() => canonicalText(undefined)).toThrow(TypeError);
    expect(() => canonicalText({ t: NaN })).toThrow();
  });
});

test.each([
  // FIPS 180-4 examples: one block, two blocks, and the empty message.
  ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
  [
    'abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq',
    '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1',
  ],
  ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
])('digestOf %j is its SHA-256', (text, digest) => {
  expect(digestOf(text)).toBe(digest);
});
