import { describe, expect, it } from 'vitest'
import { type FieldFitMeasurement, fitField } from '@/lib/atomic/field-fit'
import { type FitEnd, type FitLine, intermediateLineModel, linearLineModel } from '@/lib/atomic/field-fit-model'
import { coupledRange } from '@/lib/atomic/half'
import { landeG } from '@/lib/atomic/lande'

type Term = NonNullable<FitEnd['term']>
const term = (twoS: number, l: number, energies: number[]): Term => ({ twoS, l, levels: coupledRange(twoS, 2 * l).map((twoJ, i) => ({ twoJ, energyInvcm: energies[i] ?? 0, energyUnc: null, g: landeG({ twoS, l, twoJ }), gUnc: 0 })) })
const line = (lower: Term, twoJLower: number, upper: Term, twoJUpper: number): FitLine => {
  const end = (of: Term, twoJ: number): FitEnd => {
    const own = of.levels.find((level) => level.twoJ === twoJ)
    if (!own) throw new Error('no such level')
    return { ...own, term: of }
  }
  const ends = { lower: end(lower, twoJLower), upper: end(upper, twoJUpper) }
  return { kind: 'E1', ...ends, centreInvcm: ends.upper.energyInvcm - ends.lower.energyInvcm }
}
const mercury = { p: term(2, 1, [37645.08, 39412.3, 44042.977]), s: term(2, 0, [62350.456]) }
const sodium = { s: term(1, 0, [0]), p: term(1, 1, [16956.17, 16973.366]) }
const lithium = { s: term(1, 0, [0]), p: term(1, 1, [14903.648, 14903.983]) }

function deviates(seed: number): { uniform: () => number; normal: () => number } {
  let state = seed
  const uniform = () => {
    state = (state * 1664525 + 1013904223) % 4294967296
    return (state + 0.5) / 4294967296
  }
  return { uniform, normal: () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform()) }
}

/** Peaks as they would be measured: weak ones not seen, near ones as one, with noise. */
function peaks(lines: FitLine[], fieldTesla: number, model: 'linear' | 'intermediate', sigma: number, normal: () => number): FieldFitMeasurement[] {
  return lines.flatMap((one, number) => {
    const made = model === 'linear' ? linearLineModel(one, number) : intermediateLineModel(one, number)
    made.at(fieldTesla)
    const strongest = Math.max(...made.strengths)
    const seen = [...made.shifts].map((shift, i) => ({ shift, strength: made.strengths[i] ?? 0 })).filter((peak) => peak.strength >= 0.06 * strongest).sort((a, b) => a.shift - b.shift)
    const merged: typeof seen = []
    for (const peak of seen) {
      const last = merged.at(-1)
      if (last && peak.shift - last.shift < 2 * sigma) {
        last.shift = (last.shift * last.strength + peak.shift * peak.strength) / (last.strength + peak.strength)
        last.strength += peak.strength
      } else merged.push({ ...peak })
    }
    return merged.map((peak) => ({ line: number, positionInvcm: one.centreInvcm + peak.shift + sigma * normal(), sigmaInvcm: sigma }))
  })
}

describe('peaks without names, at fields drawn at random', () => {
  it.each([
    ['Hg I 546 nm', [line(mercury.p, 4, mercury.s, 2)], 'linear', 0.003, 0.2, 2],
    ['Hg I 436 nm', [line(mercury.p, 2, mercury.s, 2)], 'linear', 0.003, 0.2, 2],
    ['Na D1', [line(sodium.s, 1, sodium.p, 1)], 'auto', 0.003, 0.1, 2],
    ['Na D2', [line(sodium.s, 1, sodium.p, 3)], 'auto', 0.003, 0.1, 2],
    ['Na D1 and D2 up to 30 T', [line(sodium.s, 1, sodium.p, 1), line(sodium.s, 1, sodium.p, 3)], 'auto', 0.01, 1, 30],
    ['Li D1 and D2 up to 5 T', [line(lithium.s, 1, lithium.p, 1), line(lithium.s, 1, lithium.p, 3)], 'auto', 0.003, 0.05, 5],
  ] as const)('%s: the field comes out within its uncertainty', (_, lines, model, sigma, low, high) => {
    const { uniform, normal } = deviates(777)
    for (let draw = 0; draw < 10; draw += 1) {
      const truth = low * (high / low) ** uniform()
      const fit = fitField({ lines, measurements: peaks([...lines], truth, model === 'linear' ? 'linear' : 'intermediate', sigma, normal), model })
      if (fit.status === 'undetermined') throw new Error(fit.reasons.map((reason) => reason.detail).join(' '))
      // a linear fit within its tolerance may be off by a little more than the noise
      expect(Math.abs(fit.fieldTesla - truth)).toBeLessThan(5 * (fit.fieldUnc ?? 0) + 0.003 * truth)
    }
  })
})
