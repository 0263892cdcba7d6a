import { describe, expect, it } from 'vitest'
import { fanFields, hyperfineFan, linearFan, termFan } from '@/app/_components/plots/fan'
import { GHZ_PER_INVCM, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { fieldTerm } from '@/lib/atomic/field-term'
import { hyperfineLevel, hyperfineSublevels } from '@/lib/atomic/hyperfine'
import { intermediateSublevels } from '@/lib/atomic/intermediate'

// 2p 2P* of lithium: fine structure 0.335 cm^-1
const lithium = fieldTerm({ twoS: 1, l: 1, levels: [{ twoJ: 1, energyInvcm: 14903.648, g: null }, { twoJ: 3, energyInvcm: 14903.983, g: null }] })

describe('the curves of a fan', () => {
  it('follow the diagonalised term at every field, named by m and by what they tend to', () => {
    const fan = termFan(lithium, 3, 5)
    expect(fan.curves.map((curve) => [curve.key, curve.far])).toEqual([['-3', '−1, −1/2'], ['-1', '−1, 1/2'], ['1', '0, 1/2'], ['3', '1, 1/2']])
    fan.fieldsTesla.forEach((field, row) => {
      const states = intermediateSublevels(lithium, field)
      for (const curve of fan.curves) {
        const state = states.find((one) => one.nominalTwoJ === 3 && String(one.twoM) === curve.key)
        // two eigensolvers agree to rounding of energies of a few cm^-1
        expect(Math.abs((curve.values[row] ?? Number.NaN) - (state?.shiftInvcm ?? 0))).toBeLessThan(1e-13)
      }
    })
  })

  it('begin along the dashed linear law and leave it', () => {
    const fan = termFan(lithium, 3, 5)
    const [, bent] = fan.curves
    const first = fan.fieldsTesla[1] ?? 0
    expect((bent?.values[1] ?? 0) / ((bent?.linear ?? 1) * first)).toBeCloseTo(1, 1)
    expect(Math.abs((bent?.values.at(-1) ?? 0) - (bent?.linear ?? 0) * 5)).toBeGreaterThan(1)
  })

  it('have the other J of the term where it lies', () => {
    const { neighbours } = termFan(lithium, 3, 5)
    expect(neighbours.map((one) => one.twoJ)).toEqual([1, 1])
    for (const one of neighbours) expect(one.values[0]).toBeCloseTo(-0.335, 9)
  })

  it('of the linear law are straight', () => {
    const fan = linearFan(1, 2, 3)
    expect(Array.from(fan.curves[1]?.values ?? [])).toEqual([0, MU_B_OVER_HC_INVCM_PER_T * 3])
  })

  it('with a nucleus are the hyperfine sublevels, each under its own name', () => {
    // ground level of rubidium 87
    const ready = hyperfineLevel({ twoJ: 1, gJ: 2.0023311, twoI: 3, aMhz: 3417.341305, bMhz: null, gI: -0.000995 })
    const fan = hyperfineFan(ready, 1)
    expect(new Set(fan.curves.map((curve) => curve.key)).size).toBe(8)
    const states = hyperfineSublevels(ready, 1)
    for (const curve of fan.curves) {
      const state = states.find((one) => `${one.twoMJ}:${one.twoMI}` === curve.key)
      expect(Math.abs((curve.values.at(-1) ?? 0) * GHZ_PER_INVCM * 1000 - (state?.energyMhz ?? 0))).toBeLessThan(1e-7)
    }
  })

  it('stand closer near zero, where they bend, and end at the edge', () => {
    const fields = fanFields(2)
    expect(fields[0]).toBe(0)
    expect(fields.at(-1)).toBe(2)
    expect((fields[1] ?? 0) - (fields[0] ?? 0)).toBeLessThan(2 / 1000)
  })
})
