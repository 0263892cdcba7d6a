import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { airWavelength, conventionalWavelength } from '@/lib/atomic/air'
import { effectiveG } from '@/lib/atomic/moments'
import { judge, type Kind } from '@/lib/atomic/rules'
import { type LineExclusion, type LineListQuery, lineId, lineOf, listLines, spectralWindow, WHOLE_SPECTRUM, type WindowAsked } from '@/lib/catalogue/lines'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import { syntheticSnapshot } from '@/tests/bench/synthetic'
import { seedSnapshot, withRetired } from './editions'

const seed = seedSnapshot()
const whole = { kind: 'E1' as const, rules: 'rigorous' as const, species: null, window: WHOLE_SPECTRUM, limit: 1000, after: null, explain: false }

const list = (snapshot: Snapshot, query: Partial<LineListQuery>) => {
  const found = listLines(snapshot, { ...whole, ...query })
  if (found === null) throw new Error('no list')
  return found
}

interface Asked { kind: Kind; rules: 'ls' | 'rigorous'; window: WindowAsked | null; gEffMin?: number }

const inBounds = (value: number, min: number | null, max: number | null): boolean => (min === null || value >= min) && (max === null || value <= max)

/** Where a line stands in the window, from the definitions alone: `in`, `out`, or without an air wavelength. */
function place(invcm: number, window: WindowAsked | null): 'in' | 'out' | 'no_air_wavelength' {
  if (window === null) return 'in'
  const within = (value: number, min: number | null, max: number | null) => (inBounds(value, min, max) ? ('in' as const) : ('out' as const))
  if (window.scale === 'wavenumber') return within(invcm, window.minInvcm, window.maxInvcm)
  if (window.scale === 'frequency') return within(invcm * 0.0299792458, window.minThz, window.maxThz)
  const vacuum = 1e7 / invcm
  if (window.medium === 'vacuum') return within(vacuum, window.minNm, window.maxNm)
  if (window.medium === 'conventional') return within(conventionalWavelength(vacuum).nm, window.minNm, window.maxNm)
  const air = airWavelength(vacuum).nm
  if (air !== null) return within(air, window.minNm, window.maxNm)
  return inBounds(vacuum, window.minNm, window.maxNm) ? 'no_air_wavelength' : 'out'
}

/** Every pair of levels judged by the function that explains each rule, with no sorting, index or typed array of the search. */
function byBruteForce(snapshot: Snapshot, asked: Asked) {
  const ids: string[] = []
  const excluded: Partial<Record<LineExclusion, number>> = {}
  const leaveOut = (reason: LineExclusion) => void (excluded[reason] = (excluded[reason] ?? 0) + 1)
  for (let a = 0; a < snapshot.size; a += 1) {
    for (let b = a + 1; b < snapshot.size; b += 1) {
      const [lower, upper] = [snapshot.level(a), snapshot.level(b)]
      if (lower.species !== upper.species) continue
      const interval = upper.energy_invcm - lower.energy_invcm
      const where = place(interval, asked.window)
      if (where === 'out') continue
      if (interval === 0) {
        leaveOut('zero_interval')
        continue
      }
      const verdict = judge(snapshot.judged(a), snapshot.judged(b), asked.kind)
      const failed = verdict.rules.find((rule) => rule.verdict === 'fail' && (asked.rules === 'ls' || rule.basis === 'rigorous'))
      if (failed) {
        leaveOut(failed.rule)
        continue
      }
      if (where === 'no_air_wavelength') {
        leaveOut('no_air_wavelength')
        continue
      }
      if (asked.gEffMin !== undefined) {
        if (asked.kind === 'E2') {
          leaveOut('g_eff_not_applicable')
          continue
        }
        const g = effectiveG({ twoJ: 2 * lower.term.j, g: lower.g_j.adopted }, { twoJ: 2 * upper.term.j, g: upper.g_j.adopted })
        if (g === null) {
          leaveOut('g_eff_not_known')
          continue
        }
        if (g < asked.gEffMin) continue
      }
      ids.push(`${lower.id}~${upper.id}`)
    }
  }
  return { ids: ids.sort(), excluded }
}

function bySearch(snapshot: Snapshot, asked: Asked, limit = 1000) {
  const ids: string[] = []
  const { gEffMin } = asked
  const query = { kind: asked.kind, rules: asked.rules, window: spectralWindow(asked.window), limit, ...(gEffMin === undefined ? {} : { gEffMin }) }
  let after: string | null = null
  let last = 0
  let found
  do {
    found = list(snapshot, { ...query, after })
    for (const line of found.lines) {
      expect(line.wavenumberInvcm).toBeGreaterThanOrEqual(last)
      last = line.wavenumberInvcm
      ids.push(lineId(snapshot, line.lower, line.upper))
    }
    after = found.next
  } while (after !== null)
  expect(new Set(ids).size).toBe(ids.length)
  expect(found.total).toBe(ids.length)
  return { ids: ids.sort(), excluded: found.excluded }
}

const kind = fc.constantFrom<Kind>('E1', 'M1', 'E2')
const rules = fc.constantFrom<'ls' | 'rigorous'>('ls', 'rigorous')
const nm = fc.oneof(fc.double({ min: 50, max: 3000, noNaN: true }), fc.constantFrom(199.9, 199.95, 200, 200.05, 1999.4, 1999.5, 2000, 2000.3))
const window: fc.Arbitrary<WindowAsked | null> = fc.oneof(
  fc.constant(null),
  fc.record({ a: nm, b: nm, open: fc.constantFrom('none', 'min', 'max'), medium: fc.constantFrom('air' as const, 'vacuum' as const, 'conventional' as const) }).map(({ a, b, open, medium }): WindowAsked => ({
    scale: 'wavelength', minNm: open === 'min' ? null : Math.min(a, b), maxNm: open === 'max' ? null : Math.max(a, b), medium,
  })),
  fc.record({ a: fc.double({ min: 0, max: 100_000, noNaN: true }), b: fc.double({ min: 0, max: 100_000, noNaN: true }) }).map(({ a, b }): WindowAsked => ({ scale: 'wavenumber', minInvcm: Math.min(a, b), maxInvcm: Math.max(a, b) })),
  fc.record({ a: fc.double({ min: 0, max: 3000, noNaN: true }), b: fc.double({ min: 0, max: 3000, noNaN: true }) }).map(({ a, b }): WindowAsked => ({ scale: 'frequency', minThz: Math.min(a, b), maxThz: Math.max(a, b) })),
)
const asked = fc.record({ kind, rules, window, gEffMin: fc.option(fc.double({ min: 0, max: 2.5, noNaN: true }), { nil: undefined }) }).map(({ gEffMin, ...rest }): Asked => (gEffMin === undefined ? rest : { ...rest, gEffMin }))

describe('line search against brute force', () => {
  it('on the first edition', () => {
    fc.assert(fc.property(asked, (query) => {
      expect(bySearch(seed, query)).toEqual(byBruteForce(seed, query))
    }), { numRuns: 25 })
  }, 120_000)

  it('on an invented edition', () => {
    const invented = syntheticSnapshot({ species: 3, levels: 50, seed: 5 })
    fc.assert(fc.property(asked, fc.integer({ min: 1, max: 40 }), (query, limit) => {
      expect(bySearch(invented, query, limit)).toEqual(byBruteForce(invented, query))
    }), { numRuns: 60 })
  }, 120_000)

  it('where many intervals coincide and some are zero', () => {
    const coincident = syntheticSnapshot({ species: 2, levels: 40, seed: 9, degenerate: true })
    fc.assert(fc.property(asked, fc.integer({ min: 1, max: 9 }), (query, limit) => {
      expect(bySearch(coincident, query, limit)).toEqual(byBruteForce(coincident, query))
    }), { numRuns: 40 })
  }, 120_000)

  it('on more pairs than one piece of the walk holds', () => {
    const large = syntheticSnapshot({ species: 2, levels: 400, seed: 11 })
    const found = list(large, { limit: 50 })
    const first = found.lines.map(({ wavenumberInvcm }) => wavenumberInvcm)
    const energy = large.columns.energyInvcm
    const every: number[] = []
    large.species.forEach((_, at) => {
      const [from, to] = large.speciesRange(at)
      for (let a = from; a < to; a += 1) for (let b = a + 1; b < to; b += 1) if (judge(large.judged(a), large.judged(b), 'E1').rigorous) every.push(energy[b]! - energy[a]!)
    })
    every.sort((a, b) => a - b)
    expect(found.total).toBe(every.length)
    expect(first).toEqual(every.slice(0, 50))
  })
})

describe('lines people know', () => {
  const inAir = (minNm: number, maxNm: number) => spectralWindow({ scale: 'wavelength', minNm, maxNm, medium: 'air' })

  it('finds the sodium D lines between 588 and 590 nm', () => {
    const ids = list(seed, { window: inAir(588.9, 589.7), rules: 'ls' }).lines.map(({ lower, upper }) => lineId(seed, lower, upper))
    expect(ids).toEqual(['Na-I.1~Na-I.2', 'Na-I.1~Na-I.3'])
  })

  it('counts intercombination lines that rules=ls leaves out, inside the window only', () => {
    const mercury = [seed.speciesIndex.get('Hg-I') ?? -1]
    const narrow = list(seed, { species: mercury, window: inAir(253, 254), rules: 'ls', explain: true })
    expect(narrow.lines).toHaveLength(0)
    expect(narrow.excluded).toEqual({ delta_s: 1 })
    expect(narrow.explained).toEqual([{ transition: 'Hg-I.1~Hg-I.3', reason: 'delta_s' }])
    expect(list(seed, { species: mercury, window: inAir(253, 254) }).lines).toHaveLength(1)
  })

  it('says that two levels of equal energy make no line', () => {
    expect(list(seed, { species: [seed.speciesIndex.get('C-II') ?? -1] }).excluded.zero_interval).toBe(1)
  })

  it('knows lines without an air wavelength in an air window', () => {
    const { lines, excluded } = list(seed, { species: [seed.speciesIndex.get('H-I') ?? -1], window: inAir(121, 122) })
    expect(lines).toHaveLength(0)
    expect(excluded.no_air_wavelength).toBe(2)
  })

  it('reads a transition from either order, and none across species or from retired levels', () => {
    expect(lineOf(seed, 'Na-I.3~Na-I.1')).toEqual(lineOf(seed, 'Na-I.1~Na-I.3'))
    expect(lineOf(seed, 'Na-I.1~K-I.2')).toBeNull()
    expect(lineOf(withRetired(['Na-I.3']), 'Na-I.1~Na-I.3')).toBeNull()
    expect(listLines(seed, { ...whole, after: 'Na-I.1~Na-I.99' })).toBeNull()
  })

  it('tells an air window from a vacuum one of the same numbers, also when asked in turn', () => {
    const at = (medium: 'air' | 'vacuum') => list(seed, { window: spectralWindow({ scale: 'wavelength', minNm: 588.99, maxNm: 589.0, medium }) })
    expect(at('air').total).toBe(1)
    expect(at('vacuum').total).toBe(0)
    expect(at('air').total).toBe(1)
  })
})

describe('a spectral window', () => {
  it('encloses every wavenumber that it takes in, and is sure only of those', () => {
    fc.assert(
      fc.property(window, fc.double({ min: 1, max: 2e5, noNaN: true }), (given, invcm) => {
        const { minInvcm, maxInvcm, sureMinInvcm, sureMaxInvcm, verdict } = spectralWindow(given)
        const result = verdict(invcm)
        expect(result).toBe(place(invcm, given))
        if (result !== 'out') expect(invcm >= minInvcm && invcm <= maxInvcm).toBe(true)
        if (invcm > sureMinInvcm && invcm < sureMaxInvcm) expect(result).toBe('in')
      }),
      { numRuns: 3000 },
    )
  })
})
