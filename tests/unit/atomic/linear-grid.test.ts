import { describe, expect, it } from 'vitest'
import { weakFieldComponents } from '@/lib/atomic/components'
import { linearGrid, linearLine } from '@/lib/atomic/linear-grid'

describe('bulk prediction in the linear law', () => {
  const [lower, upper] = [{ twoJ: 4, g: 1.5 }, { twoJ: 4, g: 1.166 }]
  const line = linearLine('E1', lower, upper, 19_000)

  it('is that of the single components, zero strengths listed', () => {
    const fields = [0, 0.3, 25]
    const [values, shifts] = [linearGrid(line, fields), linearGrid(line, fields, 'shift')]
    fields.forEach((fieldTesla, row) => {
      const single = weakFieldComponents({ kind: 'E1', lower, upper, fieldTesla })
      expect(single).toHaveLength(line.count)
      for (let c = 0; c < line.count; c += 1) {
        const same = single.find((one) => one.q === line.q[c] && one.twoMLower === line.twoMLower[c] && one.twoMUpper === line.twoMUpper[c])
        expect(shifts[row * line.count + c]).toBeCloseTo(same?.shiftInvcm ?? Number.NaN, 12)
        expect(values[row * line.count + c]).toBe(19_000 + (shifts[row * line.count + c] ?? Number.NaN))
        expect(line.strengths[c]).toBe(same?.strength)
      }
    })
    expect([...line.strengths].filter((strength) => strength === 0)).toHaveLength(1)
  })

  it('goes by q and then m_lower, and in parts as in one', () => {
    const order = [...line.q].map((q, c) => q * 100 + (line.twoMLower[c] ?? 0))
    expect(order).toEqual([...order].sort((a, b) => a - b))
    expect([...linearGrid(line, [1, 2, 3], 'shift', { from: 1, to: 3 })]).toEqual([...linearGrid(line, [2, 3], 'shift')])
    expect(() => linearLine('E1', { twoJ: 2, g: null }, upper, 1)).toThrow('no g_J')
  })
})
