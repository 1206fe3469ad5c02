import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { canonicalJson, fingerprint } from '../../../orchestrator/provenance/canonical.js';

describe('canonical JSON agrees with RFC 8785', () => {
  it('section 3.2.2: numbers, strings and literals of its sample', () => {
    const text = String.raw`{
      "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
      "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
      "literals": [null, true, false]
    }`;
    const canonical = String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`;
    expect(canonicalJson(JSON.parse(text))).toBe(canonical);
  });

  it('section 3.2.3: members in the order of UTF-16 code units', () => {
    const members = {
      '\u20ac': 'Euro Sign',
      '\r': 'Carriage Return',
      '\ufb33': 'Hebrew Letter Dalet With Dagesh',
      '1': 'One',
      '\ud83d\ude00': 'Emoji: Grinning Face',
      '\u0080': 'Control',
      '\u00f6': 'Latin Small Letter O With Diaeresis',
    };
    const order = Object.values(JSON.parse(canonicalJson(members)) as Record<string, string>);
    // JSON.parse puts integer-like members first: "1" is looked for in the text.
    expect(canonicalJson(members)).toMatch(/^\{"\\r":"Carriage Return","1":"One",/);
    expect(order.filter((name) => name !== 'One')).toEqual([
      'Carriage Return',
      'Control',
      'Latin Small Letter O With Diaeresis',
      'Euro Sign',
      'Emoji: Grinning Face',
      'Hebrew Letter Dalet With Dagesh',
    ]);
  });

  // Appendix B, from memory: bits of a float64 and its text.
  it.each([
    ['0000000000000000', '0'],
    ['8000000000000000', '0'],
    ['0000000000000001', '5e-324'],
    ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'],
    ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'],
    ['44b52d02c7e14af6', '1e+23'],
    ['44b52d02c7e14af7', '1.0000000000000001e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'],
    ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'],
    ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555553', '333333333.3333332'],
    ['41b3de4355555557', '333333333.33333343'],
    ['becbf647612f3696', '-0.0000033333333333333333'],
    ['43143ff3c1cb0959', '1424953923781206.2'],
  ])('appendix B: %s is %s', (bits, text) => {
    expect(canonicalJson(Buffer.from(bits, 'hex').readDoubleBE())).toBe(text);
  });

  it.each([
    ['NaN', NaN],
    ['an infinity', [Infinity]],
    ['undefined', undefined],
    ['a function', { f: () => 1 }],
    ['a bigint', 1n],
    ['a lone surrogate', '\ud83d'],
    ['a lone surrogate as a name', { '\ude00x': 1 }],
  ])('refuses %s', (_, value) => {
    expect(() => canonicalJson(value)).toThrow(TypeError);
  });

  it('is JSON of the same value, whatever the order of members', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (object) => {
        const reversed = Object.fromEntries(Object.entries(object).reverse());
        const canonical = canonicalJson(object);
        expect(canonicalJson(reversed)).toBe(canonical);
        expect(JSON.parse(canonical)).toEqual(JSON.parse(JSON.stringify(object)));
      }),
    );
  });

  it('leaves out members that are undefined, as JSON does', () => {
    expect(canonicalJson({ a: undefined, b: 1 })).toBe('{"b":1}');
  });
});

describe('a fingerprint', () => {
  it('is the SHA-256 of the canonical text', () => {
    // Checked with: printf '{}' | sha256sum
    expect(fingerprint({})).toBe('sha256:44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a');
    expect(fingerprint({ b: 1, a: 'é' })).toBe(fingerprint({ a: 'é', b: 1 }));
  });
});
