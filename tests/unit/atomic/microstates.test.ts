import { describe, expect, it } from 'vitest'
import { parseConfiguration } from '@/lib/atomic/configuration'
import { allowedTerms, termsOfShell } from '@/lib/atomic/microstates'
import { capacity } from '@/lib/atomic/shells'
import { termLetter } from '@/lib/atomic/letters'

const names = (l: number, count: number): string[] =>
  [...termsOfShell(l, count)].map(([key, times]) => {
    const [twoS = 0, totalL = 0] = key.split(',').map(Number)
    return `${twoS + 1}${termLetter(totalL)}${times > 1 ? `x${times}` : ''}`
  })

describe('terms of equivalent electrons', () => {
  // Condon & Shortley, The Theory of Atomic Spectra, ch. VII, table of terms of p^n and d^n
  it.each([
    [1, 2, ['3P', '1D', '1S']],
    [1, 3, ['4S', '2D', '2P']],
    [2, 2, ['3F', '3P', '1G', '1D', '1S']],
    [2, 3, ['4F', '4P', '2H', '2G', '2F', '2Dx2', '2P']],
    [2, 5, ['6S', '4G', '4F', '4D', '4P', '2I', '2H', '2Gx2', '2Fx2', '2Dx3', '2P', '2S']],
    [0, 2, ['1S']],
    [1, 6, ['1S']],
  ])('l = %i with %i electrons', (l, count, wanted) => expect(names(l, count)).toEqual(wanted))

  it('f7 has 119 terms', () => {
    expect([...termsOfShell(3, 7).values()].reduce((sum, times) => sum + times, 0)).toBe(119)
  })

  it('sum rule: the terms hold exactly C(4l + 2, n) states, and holes make the terms of electrons', () => {
    const choose = (n: number, k: number): number => (k === 0 ? 1 : (choose(n - 1, k - 1) * n) / k)
    for (let l = 0; l <= 3; l += 1) {
      for (let count = 0; count <= capacity(l); count += 1) {
        let states = 0
        for (const [key, times] of termsOfShell(l, count)) {
          const [twoS = 0, totalL = 0] = key.split(',').map(Number)
          states += times * (twoS + 1) * (2 * totalL + 1)
        }
        expect(states).toBe(Math.round(choose(capacity(l), count)))
        expect(names(l, count)).toEqual(names(l, capacity(l) - count))
      }
    }
    expect(termsOfShell(1, 7).size).toBe(0)
  })

  it('parents restrict what follows', () => {
    const terms = (text: string) => {
      const configuration = parseConfiguration(text)
      return configuration.ok ? [...allowedTerms(configuration.value)].sort() : []
    }
    expect(terms('3d6(5D)4s')).toEqual(['3,2', '5,2'])
    expect(terms('2p5(2P3/2)3s')).toEqual(['0,1', '2,1'])
    expect(terms('3d5.4s.(7S).5s')).toEqual(['5,0', '7,0'])
    expect(terms('3d6(5D)4s4p(3P)')).toEqual(['2,1', '2,2', '2,3', '4,1', '4,2', '4,3', '6,1', '6,2', '6,3'])
  })
})
