import { describe, expect, it } from 'vitest'
import { squared3j, squared3jNumber, threeJ } from '@/lib/atomic/wigner'
import { readData } from './read'

type Row = [number, number, number, number, number, number, string]
const data = readData<{ header: { method: string }; strengths: Row[]; general: Row[] }>('exact-3j.json')

const valueOf = (text: string): number => {
  const [n = 0, d = 1] = text.split('/').map(Number)
  return n / d
}

describe('3j symbols against SymPy, exact', () => {
  it.each([['strengths (j up to 4, with 1 and 2)', data.strengths], ['general sample (j up to 12)', data.general]])('%s', (_, rows) => {
    expect(rows.length).toBeGreaterThanOrEqual(400)
    for (const [a, b, c, d, e, f, text] of rows) {
      const unsigned = text.replace('-', '')
      expect(squared3j(a, b, c, d, e, f).toFraction(), `${[a, b, c, d, e, f].join(' ')}`).toBe(unsigned)
    }
  })

  it('signs and doubles agree too', () => {
    for (const [a, b, c, d, e, f, text] of [...data.strengths, ...data.general]) {
      const signed = valueOf(text)
      const value = threeJ(a, b, c, d, e, f)
      // one rounded quotient and one rounded root: 2 units in the last place, 4.5e-16, with room for the test's own quotient
      expect(Math.abs(value - Math.sign(signed) * Math.sqrt(Math.abs(signed)))).toBeLessThanOrEqual(6e-16 * Math.abs(value))
      expect(Math.abs(squared3jNumber(a, b, c, d, e, f) - Math.abs(signed))).toBeLessThanOrEqual(3e-16 * Math.abs(signed))
    }
  })
})
