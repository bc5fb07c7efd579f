/** Outside check of canonical JSON and SHA-256: RFC 8785 (Rundgren, Jordan, Erdtman 2020) and FIPS 180-4 examples. */
import { describe, expect, it } from 'vitest'
import { canonicalText } from '../../shared/walk/canonical'
import { digestOfText } from '../../shared/walk/digest'

const fromBits = (hex: string) => {
  const view = new DataView(new ArrayBuffer(8))
  view.setBigUint64(0, BigInt(`0x${hex}`))
  return view.getFloat64(0)
}

describe('RFC 8785', () => {
  it('section 3.2.2 and 3.2.3: the sample object', () => {
    const sample = JSON.parse(String.raw`{
      "numbers": [333333333.33333329, 1E30, 4.50, 2e-3, 0.000000000000000000000000001],
      "string": "\u20ac$\u000F\u000aA'\u0042\u0022\u005c\\\"\/",
      "literals": [null, true, false]
    }`) as unknown
    expect(canonicalText(sample)).toBe(String.raw`{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27],"string":"€$\u000f\nA'B\"\\\\\"/"}`)
    const bytes = Buffer.from(canonicalText(sample), 'utf8').toString('hex')
    // Section 3.2.4 lists the UTF-8 bytes.
    expect(bytes).toBe('7b226c69746572616c73223a5b6e756c6c2c747275652c66616c73655d2c226e756d62657273223a5b3333333333333333332e333333333333332c31652b33302c342e352c302e3030322c31652d32375d2c22737472696e67223a22e282ac245c75303030665c6e412742'
      + '5c225c5c5c5c5c222f227d')
  })

  it('section 3.2.3: keys are sorted by UTF-16 code units', () => {
    const sample = JSON.parse(String.raw`{"\u20ac": "Euro Sign", "\r": "Carriage Return", "\ufb33": "Hebrew Letter Dalet With Dagesh", "1": "One", "\ud83d\ude00": "Emoji: Grinning Face", "\u0080": "Control", "\u00f6": "Latin Small Letter O With Diaeresis"}`) as Record<string, string>
    expect(Object.values(JSON.parse(canonicalText(sample).replace('"1":', '"one":')) as Record<string, string>)).toEqual([
      'Carriage Return', 'One', 'Control', 'Latin Small Letter O With Diaeresis', 'Euro Sign', 'Emoji: Grinning Face', 'Hebrew Letter Dalet With Dagesh',
    ])
  })

  it.each([
    ['0000000000000000', '0'], ['8000000000000000', '0'], ['0000000000000001', '5e-324'], ['8000000000000001', '-5e-324'],
    ['7fefffffffffffff', '1.7976931348623157e+308'], ['ffefffffffffffff', '-1.7976931348623157e+308'],
    ['4340000000000000', '9007199254740992'], ['c340000000000000', '-9007199254740992'], ['4430000000000000', '295147905179352830000'],
    ['44b52d02c7e14af5', '9.999999999999997e+22'], ['44b52d02c7e14af6', '1e+23'], ['44b52d02c7e14af7', '1.0000000000000001e+23'],
    ['444b1ae4d6e2ef4e', '999999999999999700000'], ['444b1ae4d6e2ef4f', '999999999999999900000'], ['444b1ae4d6e2ef50', '1e+21'],
    ['3eb0c6f7a0b5ed8c', '9.999999999999997e-7'], ['3eb0c6f7a0b5ed8d', '0.000001'],
    ['41b3de4355555553', '333333333.3333332'], ['41b3de4355555554', '333333333.33333325'], ['41b3de4355555555', '333333333.3333333'],
    ['41b3de4355555556', '333333333.3333334'], ['41b3de4355555557', '333333333.33333343'],
    ['becbf647612f3696', '-0.0000033333333333333333'], ['43143ff3c1cb0959', '1424953923781206.2'],
  ])('appendix B: the double %s is written %s', (bits, text) => {
    expect(canonicalText(fromBits(bits))).toBe(text)
  })

  it.each([['7fffffffffffffff'], ['7ff0000000000000'], ['fff0000000000000']])('appendix B: %s (NaN, infinity) is refused', (bits) => {
    expect(() => canonicalText({ rows: [1, fromBits(bits)] })).toThrow(/rows\[1\]/)
  })

  it('refuses what JSON cannot carry instead of dropping it', () => {
    expect(() => canonicalText([undefined])).toThrow(TypeError)
    expect(() => canonicalText({ seed: '\ud83d' })).toThrow(/seed/)
    expect(() => canonicalText(() => 1)).toThrow(TypeError)
    expect(canonicalText({ absent: undefined, kept: null })).toBe('{"kept":null}')
  })
})

describe('SHA-256, FIPS 180-4 examples', () => {
  it.each([
    ['abc', 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad'],
    ['', 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855'],
    ['abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq', '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1'],
  ])('%j', (text, digest) => expect(digestOfText(text)).toBe(digest))
})
