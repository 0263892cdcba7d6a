import { describe, expect, it } from 'vitest'
import { squareStepOf, freeSpectralRange, ringOffsets } from '@/lib/atomic/etalon'
import { type DeterminedFit, type FieldFit, type FieldFitInput, type FieldFitMeasurement, fitField } from '@/lib/atomic/field-fit'
import { type FitEnd, type FitLevel, type FitLine, intermediateLineModel, linearLineModel } from '@/lib/atomic/field-fit-model'
import { fitG } from '@/lib/atomic/g-fit'
import { landeG } from '@/lib/atomic/lande'

function levels(twoS: number, l: number, energies: [number, number][], gUnc: number | null = 0): FitLevel[] {
  return energies.map(([twoJ, energyInvcm]) => ({ twoJ, energyInvcm, energyUnc: 1e-4, g: landeG({ twoS, l, twoJ }), gUnc, key: `${twoS} ${l} ${twoJ} ${energyInvcm}` }))
}
function end(twoS: number, l: number, all: FitLevel[], twoJ: number): FitEnd {
  const own = all.find((level) => level.twoJ === twoJ)
  if (!own) throw new Error('no such level')
  return { ...own, term: { twoS, l, levels: all } }
}
const lithium = { s: levels(1, 0, [[1, 0]]), p: levels(1, 1, [[1, 14903.648], [3, 14903.983]], 1e-4) }
const sodium = { s: levels(1, 0, [[1, 0]]), p: levels(1, 1, [[1, 16956.17025], [3, 16973.36619]], 1e-4) }
const line = (of: typeof lithium, twoJ: number, zero?: string): FitLine => {
  const upper = end(1, 1, of.p, twoJ)
  return { kind: 'E1', lower: end(1, 0, of.s, 1), upper, centreInvcm: upper.energyInvcm, ...(zero === undefined ? {} : { zero }) }
}

/** A repeatable normal deviate: sum of twelve uniform numbers of a linear congruence, less six. */
function deviates(seed: number): () => number {
  let state = seed
  return () => {
    let sum = -6
    for (let i = 0; i < 12; i += 1) {
      state = (state * 1664525 + 1013904223) % 4294967296
      sum += state / 4294967296
    }
    return sum
  }
}

/** Positions of the strong components of lines at a field, with noise. */
function measured(lines: FitLine[], fieldTesla: number, options: { model: 'linear' | 'intermediate'; sigma: number; noise?: () => number; scale?: number; named?: boolean; weakest?: number }): FieldFitMeasurement[] {
  const { model, sigma, noise = () => 0, scale = 1, named = false, weakest = 0.02 } = options
  return lines.flatMap((one, number) => {
    const made = model === 'linear' ? linearLineModel(one, number) : intermediateLineModel(one, number)
    made.at(fieldTesla)
    return made.components.flatMap((component, i): FieldFitMeasurement[] => {
      if ((made.strengths[i] ?? 0) < weakest) return []
      const positionInvcm = scale * (one.centreInvcm + (made.shifts[i] ?? 0)) + sigma * noise()
      return [{ line: number, positionInvcm, sigmaInvcm: sigma, ...(named ? { component } : {}) }]
    })
  })
}

function determined(fit: FieldFit): DeterminedFit {
  if (fit.status === 'undetermined') throw new Error(fit.reasons.map((reason) => reason.detail).join(' '))
  return fit
}
const reasons = (input: FieldFitInput): string[] => {
  const fit = fitField(input)
  return fit.status === 'undetermined' ? fit.reasons.map((reason) => reason.code) : ['determined']
}

describe('models of a line in a fit', () => {
  it.each([['linear', linearLineModel(line(lithium, 3), 0)], ['intermediate', intermediateLineModel(line(lithium, 3), 0)]] as const)('%s: slopes are the derivatives of shifts and strengths', (_, model) => {
    for (const field of [-0.4, 0.4, 2]) {
      const step = 1e-5
      const shots = [field - step, field, field + step].map((tesla) => {
        model.at(tesla)
        return { shifts: [...model.shifts], slopes: [...model.slopes], strengths: [...model.strengths], turning: [...model.strengthSlopes] }
      })
      model.components.forEach((_unused, i) => {
        const difference = (of: 'shifts' | 'strengths') => ((shots[2]?.[of][i] ?? 0) - (shots[0]?.[of][i] ?? 0)) / (2 * step)
        expect(shots[1]?.slopes[i] ?? Number.NaN).toBeCloseTo(difference('shifts'), 8)
        expect(shots[1]?.turning[i] ?? Number.NaN).toBeCloseTo(difference('strengths'), 7)
      })
    }
  })
})

describe('fits in the intermediate model', () => {
  it('gives back the field of exact positions, components named or not', () => {
    const both = [line(lithium, 1), line(lithium, 3)]
    for (const truth of [0.02, 0.3, 0.9, 4]) {
      for (const named of [true, false]) {
        const fit = determined(fitField({ lines: both, measurements: measured(both, truth, { model: 'intermediate', sigma: 1e-3, named }), model: 'intermediate' }))
        expect(Math.abs(fit.fieldTesla / truth - 1)).toBeLessThan(1e-9)
        expect(fit.chiSquared ?? 1).toBeLessThan(1e-9)
      }
    }
  })

  it('auto takes the linear law where it holds and switches where it does not', () => {
    const lines = [line(sodium, 1), line(sodium, 3)]
    for (const [truth, model] of [[0.1, 'linear'], [8, 'intermediate']] as const) {
      const fit = determined(fitField({ lines, measurements: measured(lines, truth, { model: 'intermediate', sigma: 2e-3, noise: deviates(7) }) }))
      expect(fit.model).toBe(model)
      expect(Math.abs(fit.fieldTesla - truth)).toBeLessThan(4 * (fit.fieldUnc ?? 0))
      expect(fit.validity.every((one) => one.positions.status === 'valid')).toBe(model === 'linear')
    }
  })

  it('the linear law used where it does not hold says so', () => {
    const lines = [line(sodium, 3)]
    const fit = determined(fitField({ lines, measurements: measured(lines, 8, { model: 'intermediate', sigma: 2e-3, named: true }), model: 'linear' }))
    expect(fit.warnings.map((warning) => warning.code)).toEqual(expect.arrayContaining(['linear_not_valid', 'poor_fit']))
  })

  it('a reversed field is negative when the assignment says so', () => {
    const lines = [line(lithium, 3)]
    const fit = determined(fitField({ lines, measurements: measured(lines, -0.3, { model: 'intermediate', sigma: 1e-3, named: true }), model: 'intermediate' }))
    expect(fit.fieldTesla).toBeCloseTo(-0.3, 9)
  })

  it('its stated deviation is the scatter of repeated fits', () => {
    const lines = [line(lithium, 1), line(lithium, 3)]
    const noise = deviates(11)
    const fits = Array.from({ length: 100 }, () => determined(fitField({ lines, measurements: measured(lines, 0.5, { model: 'intermediate', sigma: 3e-3, noise, named: true }), model: 'intermediate' })))
    const off = fits.map((fit) => (fit.fieldTesla - 0.5) / (fit.fieldUnc ?? Number.NaN))
    // mean 0 +- 1/sqrt(100), deviation 1 +- 1/sqrt(200): four of each
    expect(Math.abs(off.reduce((a, b) => a + b, 0) / 100)).toBeLessThan(0.4)
    expect(Math.abs(Math.sqrt(off.reduce((a, b) => a + b * b, 0) / 100) - 1)).toBeLessThan(0.28)
    const chi = fits.reduce((sum, fit) => sum + (fit.chiSquared ?? 0), 0) / 100
    expect(Math.abs(chi / (fits[0]?.degreesOfFreedom ?? 0) - 1)).toBeLessThan(0.2)
  })
})

describe('automatic assignment', () => {
  const lines = [line(sodium, 1), line(sodium, 3)]

  it('is that by hand for noisy positions over a wide range of fields', () => {
    for (const truth of [0.05, 0.4, 1.3]) {
      const named = measured(lines, truth, { model: 'linear', sigma: 2e-3, noise: deviates(5), named: true })
      const bare = named.map(({ line: number, positionInvcm, sigmaInvcm }) => ({ line: number, positionInvcm, sigmaInvcm }))
      const [byHand, found] = [determined(fitField({ lines, measurements: named, model: 'linear' })), determined(fitField({ lines, measurements: bare, model: 'linear' }))]
      expect(Math.abs(found.fieldTesla - byHand.fieldTesla)).toBeLessThan(1e-9)
      expect(found.residuals.map((residual) => residual.components)).toEqual(byHand.residuals.map((residual) => residual.components))
      expect(found.warnings.map((warning) => warning.code)).not.toContain('assignment_ambiguous')
    }
  })

  it('polarisations tell the sign of the field', () => {
    const truth = measured(lines, 0.5, { model: 'linear', sigma: 1e-3, named: true })
    const turned = truth.map(({ line: number, positionInvcm, sigmaInvcm, component }) => ({ line: number, positionInvcm, sigmaInvcm, q: -((component?.twoMUpper ?? 0) - (component?.twoMLower ?? 0)) / 2 }))
    expect(determined(fitField({ lines, measurements: turned, model: 'linear' })).fieldTesla).toBeCloseTo(-0.5, 9)
  })

  it('unresolved components of one polarisation are one peak', () => {
    // a normal triplet 1P1 - 1D2: nine components in three places
    const p = levels(0, 1, [[2, 20000]])
    const d = levels(0, 2, [[4, 40000]])
    const one: FitLine = { kind: 'E1', lower: end(0, 1, p, 2), upper: end(0, 2, d, 4), centreInvcm: 20000 }
    const positions = [-1, 0, 1].map((q) => ({ line: 0, positionInvcm: 20000 + q * 0.46686447719 * 0.7, sigmaInvcm: 1e-3 }))
    for (const model of ['linear', 'intermediate'] as const) {
      const fit = determined(fitField({ lines: [one], measurements: positions, model }))
      expect(fit.fieldTesla).toBeCloseTo(0.7, 9)
      expect(fit.residuals.map((residual) => residual.components.length)).toEqual([3, 3, 3])
    }
  })

  it('a whole unresolved group of one q is named as such: its centre moves by g_eff', () => {
    // g_eff of D2 with the free electron's g_s: Shenstone & Blair (1929)
    const positions = [-1, 1].map((q) => ({ line: 0, positionInvcm: 16973 + q * 0.46686447719 * 0.5 * 1.1670532173934869, sigmaInvcm: 1e-3, group: q }))
    const fit = determined(fitField({ lines: [line(sodium, 3)], measurements: positions, model: 'linear' }))
    expect(fit.fieldTesla).toBeCloseTo(0.5, 9)
    expect(fit.assignedAutomatically).toBe(false)
  })

  it('two peaks that may be read in several ways say so', () => {
    const positions = [0, 1].map((n) => ({ line: 0, positionInvcm: 16973 + 0.5 * n, sigmaInvcm: 1e-3 }))
    const fit = determined(fitField({ lines: [line(sodium, 3)], measurements: positions, model: 'linear' }))
    expect(fit.alternatives.length).toBeGreaterThan(0)
    expect(fit.warnings.map((warning) => warning.code)).toContain('assignment_ambiguous')
  })
})

describe('scale', () => {
  const lines = [line(sodium, 1), line(sodium, 3)]

  it('an uncertain scale adds its share to the uncertainty of the field', () => {
    const measurements = measured(lines, 1, { model: 'linear', sigma: 1e-3, named: true })
    const [sure, unsure] = [0, 0.02].map((unc) => determined(fitField({ lines, measurements, model: 'linear', scale: { value: 1, unc } })))
    expect(unsure?.fieldTesla).toBeCloseTo(1, 9)
    expect(unsure?.fieldUnc ?? 0).toBeCloseTo(Math.hypot(sure?.fieldUnc ?? 0, 0.02), 6)
    expect(unsure?.budget.find((row) => row.part === 'scale')?.value ?? 0).toBeCloseTo(0.02, 6)
    expect(unsure?.parameters).toEqual(['line 1', 'line 2', 'field', 'scale'])
  })

  it('a free scale cannot be told from the field, unless lines share a zero', () => {
    const free = { value: 1, unc: null }
    expect(reasons({ lines, measurements: measured(lines, 1, { model: 'linear', sigma: 1e-3, named: true }), model: 'linear', scale: free })).toEqual(['scale_and_field'])
    const shared = [line(sodium, 1, 'plate'), line(sodium, 3, 'plate')]
    const measurements = measured(shared, 1, { model: 'linear', sigma: 1e-3, named: true, scale: 1.03 })
    const fit = determined(fitField({ lines: shared, measurements, model: 'linear', scale: free }))
    expect(fit.fieldTesla).toBeCloseTo(1, 9)
    expect(fit.scale.value).toBeCloseTo(1.03, 10)
    expect(fit.zeros).toHaveLength(1)
  })
})

describe('what a fit tells beside the field', () => {
  const lines = [line(lithium, 1), line(lithium, 3)]
  const noisy = measured(lines, 0.4, { model: 'intermediate', sigma: 2e-3, noise: deviates(3), named: true })

  it('the influence of a point is the fit without it', () => {
    const fit = determined(fitField({ lines, measurements: noisy, model: 'intermediate' }))
    fit.residuals.forEach((residual, i) => {
      const rest = determined(fitField({ lines, measurements: noisy.filter((_, n) => n !== i), model: 'intermediate' }))
      expect(residual.without?.fieldTesla ?? Number.NaN).toBeCloseTo(rest.fieldTesla, 10)
      expect(residual.without?.change ?? Number.NaN).toBeCloseTo((fit.fieldTesla - rest.fieldTesla) / (fit.fieldUnc ?? 1), 6)
    })
    // zeros and field take three degrees of freedom
    expect(fit.residuals.reduce((sum, residual) => sum + residual.leverage, 0)).toBeCloseTo(3, 9)
  })

  it('the budget has what g, energies and mu_B do to the field, as refitting with each moved tells', () => {
    // without noise, since linear propagation leaves out the residuals times the curvature of the model
    const exact = measured(lines, 0.4, { model: 'intermediate', sigma: 2e-3, named: true })
    const fit = determined(fitField({ lines, measurements: exact, model: 'intermediate' }))
    const moved = (of: (level: FitLevel) => FitLevel) => {
      const p = lithium.p.map(of)
      return determined(fitField({ lines: [1, 3].map((twoJ) => line({ s: lithium.s, p }, twoJ)), measurements: exact, model: 'intermediate' })).fieldTesla - fit.fieldTesla
    }
    const g = [1, 3].map((twoJ) => moved((level) => (level.twoJ === twoJ ? { ...level, g: (level.g ?? 0) + 1e-4 } : level)))
    const energies = [1, 3].map((twoJ) => moved((level) => (level.twoJ === twoJ ? { ...level, energyInvcm: level.energyInvcm + 1e-4 } : level)))
    const part = (name: string) => fit.budget.find((row) => row.part === name)?.value ?? Number.NaN
    expect(part('g_upper') / Math.hypot(...g)).toBeCloseTo(1, 3)
    expect(part('energy_upper') / Math.hypot(...energies)).toBeCloseTo(1, 2)
    expect(part('constants')).toBeCloseTo((0.4 * 1.5e-10) / 0.46686447719, 12)
    expect([part('g_lower'), part('energy_lower')]).toEqual([0, 0])
    expect(fit.total.unc ?? 0).toBeCloseTo(Math.hypot(...fit.budget.map((row) => row.value ?? 0)), 15)
    expect([fit.total.expandedUnc, fit.total.complete]).toEqual([2 * (fit.total.unc ?? 0), true])
  })

  it('an unknown g is told: the total is then only what is known', () => {
    const unknown = { s: lithium.s, p: lithium.p.map((level) => ({ ...level, gUnc: null })) }
    const fit = determined(fitField({ lines: [line(unknown, 1), line(unknown, 3)], measurements: noisy, model: 'linear' }))
    expect(fit.budget.find((row) => row.part === 'g_upper')).toEqual({ part: 'g_upper', value: null, status: 'unknown' })
    expect(fit.total.complete).toBe(false)
  })

  it('without stated deviations the scatter judges them, and with nothing left over there is no uncertainty', () => {
    const bare = noisy.map((one) => ({ ...one, sigmaInvcm: null }))
    const fit = determined(fitField({ lines, measurements: bare, model: 'intermediate' }))
    const stated = determined(fitField({ lines, measurements: noisy, model: 'intermediate' }))
    expect(fit.fieldTesla).toBeCloseTo(stated.fieldTesla, 10)
    expect(fit.fieldUnc).toBeCloseTo(stated.scaledUnc ?? Number.NaN, 8)
    expect(fit.chiSquared).toBeNull()
    const two = determined(fitField({ lines: [line(sodium, 1)], measurements: measured([line(sodium, 1)], 1, { model: 'linear', sigma: 1, named: true }).slice(0, 2).map((one) => ({ ...one, sigmaInvcm: null })), model: 'linear' }))
    expect([two.fieldUnc, two.covariance, two.total.expandedUnc]).toEqual([null, null, null])
    expect(two.fieldTesla).toBeCloseTo(1, 9)
  })
})

describe('undetermined fits say why', () => {
  const one = [line(sodium, 1)]
  const named = (twoMLower: number, twoMUpper: number, positionInvcm: number, number = 0) => ({ line: number, positionInvcm, sigmaInvcm: 1e-3, component: { twoMLower, twoMUpper } })

  it('no position, too few, one shift only, none that moves, no reading', () => {
    expect(reasons({ lines: one, measurements: [], model: 'linear' })).toEqual(['no_positions'])
    expect(reasons({ lines: one, measurements: [named(-1, 1, 16956)], model: 'linear' })).toEqual(['one_shift_per_line', 'too_few_positions'])
    expect(reasons({ lines: one, measurements: [named(-1, 1, 16956), named(-1, 1, 16956.001)], model: 'linear' })).toEqual(['one_shift_per_line'])
    const two = [line(sodium, 1), line(sodium, 3)]
    expect(reasons({ lines: two, measurements: [named(-1, 1, 16956), named(1, 3, 16973, 1), named(1, 3, 16973.01, 1)], model: 'linear' })).toEqual(['one_shift_per_line'])
    const singlet: FitLine = { kind: 'E1', lower: end(0, 0, levels(0, 0, [[0, 0]]), 0), upper: end(0, 1, levels(0, 1, [[2, 20000]]), 2), centreInvcm: 20000 }
    expect(reasons({ lines: [singlet], measurements: [named(0, 0, 20000), named(0, 0, 20000.001)], model: 'linear' })).toEqual(['no_shift'])
    expect(reasons({ lines: two, measurements: [{ line: 0, positionInvcm: 16956, sigmaInvcm: null }, { line: 1, positionInvcm: 16973, sigmaInvcm: null }, { line: 1, positionInvcm: 16973, sigmaInvcm: null }], model: 'linear' })).not.toEqual(['determined'])
  })

  it('what is malformed is refused', () => {
    const bad = (measurements: FieldFitMeasurement[]) => () => fitField({ lines: one, measurements, model: 'linear' })
    expect(bad([named(-1, 3, 1)])).toThrow('no component')
    expect(bad([named(-1, 1, 1, 4)])).toThrow('does not have')
    expect(bad([{ ...named(-1, 1, 1), sigmaInvcm: null }, named(1, 1, 2)])).toThrow('of none')
    expect(bad([{ ...named(-1, 1, 1), sigmaInvcm: 0 }])).toThrow('above zero')
  })
})

describe('etalon rings', () => {
  it('radii become offsets, and a fit finds the field', () => {
    const fsr = freeSpectralRange(5, 1)
    expect(fsr).toBe(1)
    // rings of a triplet at 0.6 T in one order: radius^2 = radius0^2 + step x offset / fsr
    const step = 12
    const radii = [-1, 0, 1].map((q) => Math.sqrt(30 + (step * q * 0.46686447719 * 0.6) / fsr))
    const offsets = ringOffsets(radii.map((radius) => ({ radius, radiusUnc: 0.01 })), step, fsr)
    expect(offsets[2]?.offsetInvcm ?? 0).toBeCloseTo(2 * 0.46686447719 * 0.6, 12)
    expect(offsets[0]?.uncInvcm ?? 0).toBeCloseTo((2 * (radii[0] ?? 0) * 0.01) / step, 12)
    const singlet: FitLine = { kind: 'E1', lower: end(0, 0, levels(0, 0, [[0, 0]]), 0), upper: end(0, 1, levels(0, 1, [[2, 20000]]), 2), centreInvcm: 20000 }
    const fit = determined(fitField({ lines: [singlet], measurements: offsets.map(({ offsetInvcm, uncInvcm }) => ({ line: 0, positionInvcm: offsetInvcm, sigmaInvcm: uncInvcm })), model: 'linear', scale: { value: 1, unc: 0.01 } }))
    expect(fit.fieldTesla).toBeCloseTo(0.6, 9)
    expect(squareStepOf([4, 5, Math.sqrt(34)]).step).toBeCloseTo(9, 12)
    expect(squareStepOf([3, 5])).toEqual({ step: 16, unc: null })
    expect(() => ringOffsets([], 0, 1)).toThrow('above zero')
  })
})

describe('g at a known field', () => {
  const x = 0.46686447719 * 2
  const measurements = [[-1, -3], [1, -1], [-1, -1], [1, 1], [-1, 1], [1, 3]].map(([twoMLower = 0, twoMUpper = 0]) => ({ twoMLower, twoMUpper, sigmaInvcm: 1e-3, positionInvcm: 16973 + (x * (1.334 * twoMUpper - 2.002 * twoMLower)) / 2 }))
  const ends = { lower: { twoJ: 1, g: 2.002, gUnc: 1e-5 }, upper: { twoJ: 3, g: null, gUnc: null } }

  it('one g or both come out, with the field in the budget', () => {
    const one = fitG({ ...ends, free: 'upper', measurements, fieldTesla: 2, fieldUnc: 0.01 })
    const both = fitG({ ...ends, free: 'both', measurements, fieldTesla: 2, fieldUnc: null })
    if (one.status !== 'determined' || both.status !== 'determined') throw new Error('undetermined')
    expect(one.upper?.value ?? 0).toBeCloseTo(1.334, 10)
    expect([both.lower?.value.toFixed(9), both.upper?.value.toFixed(9)]).toEqual(['2.002000000', '1.334000000'])
    // what a wrong field does, by fitting with it
    const off = fitG({ ...ends, free: 'upper', measurements, fieldTesla: 2.0001, fieldUnc: null })
    const change = off.status === 'determined' ? ((off.upper?.value ?? 0) - 1.334) / 1e-4 : Number.NaN
    expect(one.upper?.budget.find((row) => row.part === 'field')?.value ?? 0).toBeCloseTo(Math.abs(change) * 0.01, 5)
    expect(one.upper?.totalUnc ?? 0).toBeCloseTo(Math.hypot(...(one.upper?.budget ?? []).map((row) => row.value ?? 0)), 12)
  })

  it('and where they cannot, it says why', () => {
    const sigmaPlus = measurements.filter((one) => one.twoMUpper - one.twoMLower === 2)
    expect(fitG({ ...ends, free: 'both', measurements: [...sigmaPlus, ...sigmaPlus], fieldTesla: 2, fieldUnc: null })).toMatchObject({ status: 'undetermined', reasons: [{ code: 'both_g' }] })
    expect(fitG({ ...ends, free: 'both', measurements: sigmaPlus, fieldTesla: 2, fieldUnc: null })).toMatchObject({ status: 'undetermined', reasons: [{ code: 'too_few_positions' }] })
    expect(() => fitG({ ...ends, free: 'lower', measurements, fieldTesla: 2, fieldUnc: null })).toThrow('not known')
    expect(() => fitG({ ...ends, free: 'upper', measurements, fieldTesla: 0, fieldUnc: null })).toThrow('above zero')
  })
})
