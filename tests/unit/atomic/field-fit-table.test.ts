import { describe, expect, it } from 'vitest'
import { type FitEnd, type FitLevel, intermediateLineModel } from '@/lib/atomic/field-fit-model'
import { tabulatedModel } from '@/lib/atomic/field-fit-table'
import { landeG } from '@/lib/atomic/lande'

const term = (twoS: number, l: number, energies: number[]): FitLevel[] => energies.map((energyInvcm, i) => {
  const twoJ = Math.abs(2 * l - twoS) + 2 * i
  return { twoJ, energyInvcm, energyUnc: null, g: landeG({ twoS, l, twoJ }), gUnc: null }
})
const end = (twoS: number, l: number, levels: FitLevel[], twoJ: number): FitEnd => ({ ...(levels.find((level) => level.twoJ === twoJ) as FitLevel), term: { twoS, l, levels } })

describe('a model read off cubics', () => {
  const [low, high] = [term(1, 0, [0]), term(1, 1, [14903.648, 14903.983])]
  const model = () => intermediateLineModel({ kind: 'E1', lower: end(1, 0, low, 1), upper: end(1, 1, high, 3), centreInvcm: 14903.983 }, 0)

  it('is the model at every field, of both senses, to a ten-thousandth of what the field moves', () => {
    const [exact, read] = [model(), tabulatedModel(model())]
    // lithium crosses over near half a tesla
    for (const field of [0, 1e-7, 3e-4, 0.0517, 0.31, 0.48, -0.48, 0.77, 1.3, -2.6, 9, 400, 9999, 3e4]) {
      exact.at(field)
      read.at(field)
      const moved = Math.max(...exact.shifts.map(Math.abs), Number.MIN_VALUE)
      exact.shifts.forEach((shift, i) => expect(Math.abs((read.shifts[i] ?? Number.NaN) - shift), `${field} T`).toBeLessThanOrEqual(1e-4 * moved))
      exact.strengths.forEach((strength, i) => expect(Math.abs((read.strengths[i] ?? Number.NaN) - strength), `${field} T`).toBeLessThanOrEqual(1e-3))
      const steepest = Math.max(...exact.slopes.map(Math.abs))
      // the slope of a cubic is one order less true
      exact.slopes.forEach((slope, i) => expect(Math.abs((read.slopes[i] ?? Number.NaN) - slope), `${field} T`).toBeLessThanOrEqual(2e-3 * steepest))
    }
  })

  it('solves the model at its nodes alone', () => {
    const under = model()
    let solved = 0
    const read = tabulatedModel({ ...under, at: (field) => { solved += 1; under.at(field) } })
    for (let i = 0; i < 1000; i += 1) read.at(1 + i / 1000)
    // a factor of two in field holds at most six of sixteen nodes a decade
    expect(solved).toBeLessThanOrEqual(7)
  })
})
