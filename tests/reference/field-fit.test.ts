import { describe, expect, it } from 'vitest'
import { fitField } from '@/lib/atomic/field-fit'
import type { FitEnd, FitLine } from '@/lib/atomic/field-fit-model'
import { landeG } from '@/lib/atomic/lande'
import { parseTerm } from '@/lib/atomic/term'
import { readCases } from './read'

interface Case {
  name: string
  lines: string[]
  trueE0: number[]
  measurements: [line: number, twoMLower: number, twoMUpper: number, q: number, shiftExact: string, shift: number, position: number, sigma: number][]
  fit: { E0: number[]; B: number; sigmaE0: number[]; sigmaB: number; covariance: number[][]; chi2: number; dof: number; sigmaB_scaled?: number } | null
}

function endOf(symbol: string): FitEnd {
  const read = parseTerm(symbol)
  if (!read.ok || read.value.twoJ === null || read.value.kind !== 'LS') throw new Error(`no LS level ${symbol}`)
  const { twoS, l, twoJ } = read.value
  return { twoJ, energyInvcm: 0, energyUnc: null, g: landeG({ twoS, l, twoJ }, { gS: 2 }), gUnc: 0, term: null }
}

function lineOf(name: string): FitLine {
  const [lower = '', upper = ''] = name.split('-')
  return { kind: 'E1', lower: endOf(lower), upper: endOf(upper), centreInvcm: 0 }
}

describe('field from positions in the linear law (vectors 10)', () => {
  const cases = readCases<Case>('10-field-fit.json')
  const inputOf = (row: Case, assigned: boolean) => ({
    lines: row.lines.map(lineOf),
    model: 'linear' as const,
    measurements: row.measurements.map(([line, twoMLower, twoMUpper, , , , positionInvcm, sigmaInvcm]) => ({ line, positionInvcm, sigmaInvcm, ...(assigned ? { component: { twoMLower, twoMUpper } } : {}) })),
  })

  it.each(cases)('$name', (row) => {
    const fit = fitField(inputOf(row, true))
    if (row.fit === null) return expect(fit.status).toBe('undetermined')
    if (fit.status !== 'determined') throw new Error(fit.reasons.map((reason) => reason.detail).join(' '))
    const { E0, B, sigmaE0, sigmaB, covariance, chi2, dof } = row.fit
    // header: B to 1e-6 sigma_B, E0 to 1e-9 cm^-1, sigmas to 1e-9, covariance to 1e-8 sqrt(C_ii C_jj), chi^2 to 1e-6 (1 + chi^2)
    expect(Math.abs(fit.fieldTesla - B)).toBeLessThanOrEqual(1e-6 * sigmaB)
    E0.forEach((position, z) => expect(Math.abs((fit.zeros[z]?.positionInvcm ?? Number.NaN) - position)).toBeLessThanOrEqual(1e-9))
    sigmaE0.forEach((sigma, z) => expect(Math.abs((fit.zeros[z]?.unc ?? Number.NaN) / sigma - 1)).toBeLessThanOrEqual(1e-9))
    expect(Math.abs((fit.fieldUnc ?? Number.NaN) / sigmaB - 1)).toBeLessThanOrEqual(1e-9)
    covariance.forEach((line, i) => line.forEach((value, j) => {
      const scale = Math.sqrt((covariance[i]?.[i] ?? 0) * (covariance[j]?.[j] ?? 0))
      expect(Math.abs((fit.covariance?.[i]?.[j] ?? Number.NaN) - value)).toBeLessThanOrEqual(1e-8 * scale)
    }))
    expect(Math.abs((fit.chiSquared ?? Number.NaN) - chi2)).toBeLessThanOrEqual(1e-6 * (1 + chi2))
    expect(fit.degreesOfFreedom).toBe(dof)
    if (row.fit.sigmaB_scaled !== undefined) expect((fit.scaledUnc ?? Number.NaN) / row.fit.sigmaB_scaled).toBeCloseTo(1, 9)
  })

  it.each(cases.filter((row) => row.fit !== null && !row.name.includes('decades')))('$name: found again without the assignment', (row) => {
    const [byHand, found] = [fitField(inputOf(row, true)), fitField(inputOf(row, false))]
    if (byHand.status !== 'determined' || found.status !== 'determined') throw new Error('undetermined')
    // with every component mirrored the field would be the same, so the field is what is compared
    expect(Math.abs(found.fieldTesla - byHand.fieldTesla)).toBeLessThan(1e-9)
    expect(found.assignedAutomatically).toBe(true)
  })

  it('are there', () => expect(cases).toHaveLength(5))
})
