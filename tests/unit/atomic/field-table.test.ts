import { describe, expect, it } from 'vitest'
import { fieldMultiplet } from '@/lib/atomic/field-multiplet'
import { fieldTable, readFieldTable } from '@/lib/atomic/field-table'
import { fieldTerm } from '@/lib/atomic/field-term'
import { coupledRange } from '@/lib/atomic/half'
import { multipletGrid } from '@/lib/atomic/intermediate-grid'

const term = (twoS: number, l: number, energies: number[]) => fieldTerm({ twoS, l, levels: coupledRange(twoS, 2 * l).map((twoJ, i) => ({ twoJ, energyInvcm: energies[i] ?? 0, g: null })) })
const lithium = fieldMultiplet(term(1, 0, [0]), term(1, 1, [14903.648, 14903.983]))
const helium = fieldMultiplet(term(2, 0, [159855.97433]), term(2, 1, [169087.830813, 169086.842898, 169086.766473]))
const triplets = fieldMultiplet(term(2, 1, [20000, 20010, 20030]), term(2, 2, [40000.5, 40005.2, 40001.1]))
const options = (fromTesla: number, toTesla: number, toleranceInvcm = 1e-6, toleranceStrength = 1e-6) => ({ fromTesla, toTesla, toleranceInvcm, toleranceStrength })

describe('field tables', () => {
  it.each([['Li I 670.8 nm to 5 T', lithium, 5], ['He I 1083 nm to 2 T', helium, 2], ['3P - 3D to 60 T', triplets, 60]] as const)('%s: nothing read between nodes errs by more than is proved', (_, multiplet, to) => {
    const table = fieldTable(multiplet, options(0, to))
    expect(table.proved).toBe(true)
    expect(table.maximumErrorInvcm).toBeLessThanOrEqual(1.001e-6)
    expect(table.maximumStrengthError ?? 1).toBeLessThanOrEqual(1.001e-6)
    const fields = Float64Array.from({ length: 3001 }, (_unused, i) => (to * i) / 3000)
    const grid = multipletGrid(multiplet, fields, { strengths: true })
    let [position, strength] = [0, 0]
    fields.forEach((field, row) => {
      const read = readFieldTable(table, field)
      for (let c = 0; c < multiplet.count; c += 1) {
        position = Math.max(position, Math.abs((read.positions[c] ?? 0) - (grid.values[row * multiplet.count + c] ?? 0)))
        strength = Math.max(strength, Math.abs((read.strengths?.[c] ?? 0) - (grid.strengths?.[row * multiplet.count + c] ?? 0)))
      }
    })
    expect(position).toBeLessThanOrEqual(table.maximumErrorInvcm)
    expect(strength).toBeLessThanOrEqual(table.maximumStrengthError ?? 0)
    // the bounds are wide, but the table stays small enough to be sent
    expect(table.nodesTesla.length).toBeLessThan(3000)
  })

  it('passes through its nodes and ends, and knows nothing beyond', () => {
    const table = fieldTable(lithium, options(0.5, 1))
    expect([table.nodesTesla[0], table.nodesTesla.at(-1)]).toEqual([0.5, 1])
    const node = table.nodesTesla[3] ?? 0
    expect([...readFieldTable(table, node).positions]).toEqual([...table.positions.slice(3 * lithium.count, 4 * lithium.count)])
    expect(readFieldTable(table, 1).positions[0]).toBeCloseTo(table.positions.at(-lithium.count) ?? 0, 10)
    expect(() => readFieldTable(table, 1.1)).toThrow('outside')
  })

  it('lines that run straight need two nodes, levels that coincide all through too', () => {
    expect([...fieldTable(fieldMultiplet(term(0, 0, [0]), term(0, 1, [20000])), options(0, 100)).nodesTesla]).toEqual([0, 100])
    const carbon = fieldTable(fieldMultiplet(term(1, 2, [0, 0]), term(1, 3, [100, 100])), options(0, 10))
    expect([carbon.nodesTesla.length, carbon.proved]).toEqual([2, true])
  })

  it('where some levels coincide at zero field it does not claim a proof there', () => {
    const table = fieldTable(fieldMultiplet(term(2, 0, [0]), term(2, 1, [100, 150, 150])), options(0, 1, 1e-4, 1e-3))
    expect(table.proved).toBe(false)
    const field = 0.37
    const grid = multipletGrid(fieldMultiplet(term(2, 0, [0]), term(2, 1, [100, 150, 150])), [field])
    readFieldTable(table, field).positions.forEach((position, c) => expect(Math.abs(position - (grid.values[c] ?? 0))).toBeLessThan(1e-4))
  })

  it('a smaller tolerance takes more nodes, and too many are refused', () => {
    const [coarse, fine] = [1e-4, 1e-8].map((tolerance) => fieldTable(helium, options(0, 1, tolerance, tolerance)).nodesTesla.length)
    expect(fine ?? 0).toBeGreaterThan(3 * (coarse ?? 0))
    expect(() => fieldTable(triplets, options(0, 60, 1e-13, 1e-13))).toThrow('5 million')
    expect(() => fieldTable(helium, options(2, 1))).toThrow('to a larger one')
  })
})
