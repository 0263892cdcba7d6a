import { describe, expect, it } from 'vitest'
import { namesUnassigned, splitLabel, splitUnassigned } from '@/lib/curation/values/level-term'

describe('the name of a level, taken apart', () => {
  it.each([
    ['z5P*2', 'z', '5P*2'], ['a 5D4', 'a', '5D4'], [' y(1/2,3/2)*1', 'y', '(1/2,3/2)*1'], ['b2[3/2]*2', 'b', '2[3/2]*2'], ['2P*3/2', null, '2P*3/2'], ['abcde 5D4', null, 'abcde 5D4'],
  ])('%j has its label before the symbol', (text, label, symbol) => {
    expect(splitLabel(text)).toEqual({ label, symbol })
  })
  it('of no coupling says its J, with label and odd mark', () => {
    expect(splitUnassigned(' J = 3/2* ')).toEqual({ label: null, j: '3/2', odd: true })
    expect(splitUnassigned('abc J=1')).toEqual({ label: 'abc', j: '1', odd: false })
    expect(splitUnassigned('J=')).toBeNull()
    // not well written, and meant for one all the same
    expect([namesUnassigned('J=?'), namesUnassigned('a J = x'), namesUnassigned('2P*3/2')]).toEqual([true, true, false])
  })
})
