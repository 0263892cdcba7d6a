import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { canonicalJson, canonicalSha256, type Json } from '@/db/canonical'

describe('canonical JSON (RFC 8785)', () => {
  it('orders keys by UTF-16 code units and writes numbers as ECMAScript does', () => {
    // The ordering and number cases of RFC 8785, sections 3.2.2.3 and 3.2.3.
    const keys = { '\u20ac': 'Euro Sign', '\r': 'Carriage Return', '\ufb33': 'Hebrew Letter Dalet With Dagesh', '1': 'One', '\ud83d\ude00': 'Emoji: Grinning Face', '\u0080': 'Control', '\u00f6': 'Latin Small Letter O With Diaeresis' }
    expect(canonicalJson(keys)).toBe(`{"\\r":"Carriage Return","1":"One","\u0080":"Control","\u00f6":"Latin Small Letter O With Diaeresis","\u20ac":"Euro Sign","\ud83d\ude00":"Emoji: Grinning Face","\ufb33":"Hebrew Letter Dalet With Dagesh"}`)
    expect(canonicalJson([333333333.33333329, 1e30, 4.5, 2e-3, 0.000000000000000000000000001, -0])).toBe('[333333333.3333333,1e+30,4.5,0.002,1e-27,0]')
    expect(canonicalJson({ literals: [null, true, false], string: '\u20ac$\u000F\u000aA\'\u0042\u0022\u005c\\"/' })).toBe('{"literals":[null,true,false],"string":"\u20ac$\\u000f\\nA\'B\\"\\\\\\\\\\"/"}')
  })

  it('refuses numbers that have no JSON text', () => {
    for (const value of [Number.NaN, Number.POSITIVE_INFINITY]) expect(() => canonicalJson({ value })).toThrow(RangeError)
  })

  it('does not depend on the order in which keys were written, and loses nothing', () => {
    fc.assert(
      fc.property(fc.dictionary(fc.string(), fc.jsonValue()), (value) => {
        const turned = Object.fromEntries(Object.entries(value).reverse())
        expect(canonicalSha256(turned as Json)).toBe(canonicalSha256(value as Json))
        // JSON has no minus zero, in either writing.
        expect(JSON.parse(canonicalJson(value as Json))).toEqual(JSON.parse(JSON.stringify(value)))
      }),
    )
  })
})
