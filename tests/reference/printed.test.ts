import { describe, expect, it } from 'vitest'
import { weakFieldComponents } from '@/lib/atomic/components'
import { vacToAir } from '@/lib/atomic/air'
import { landeG, landeGExact } from '@/lib/atomic/lande'
import { lOfLetter } from '@/lib/atomic/letters'
import { effectiveG, effectiveGExact, exactComponents, patternKind } from '@/lib/atomic/moments'
import { judge, type JudgedLevel } from '@/lib/atomic/rules'
import { vacuumNmOfWavenumber } from '@/lib/units/spectral'
import { findLevel, gOf, type ListedLevel, two } from './levels'
import { readData } from './read'

/** `2p5(2P1/2)3s 2[1/2] 1`, `3d6 4s2 a 5D 0`: configuration, term with label, J. */
function levelNamed(species: string, name: string): ListedLevel {
  const match = /^(.*?) ((?:[a-z] )?\d(?:[A-Z]|\[[\d/]+\])) (\d+(?:\/2)?)$/.exec(name)
  if (!match) throw new Error(`unreadable level ${name}`)
  return findLevel(species, match[1] ?? '', match[2] ?? '', match[3] ?? '')
}

const judged = (level: ListedLevel): JudgedLevel => ({ twoJ: two(level.J), twoS: level.S === null ? null : two(level.S), l: level.L, parity: level.parity, coupling: level.coupling })

interface Wavelength {
  species: string
  lower: string
  upper: string
  ref_nm: number
  ref_medium: 'air' | 'vac'
  grade: string
}

describe('printed wavelengths from the listed energies', () => {
  const rows = readData<{ rows: Wavelength[] }>('wavelengths.json').rows

  it.each(rows)('$species $lower - $upper: $ref_nm nm ($grade)', (row) => {
    const [lower, upper] = [levelNamed(row.species, row.lower), levelNamed(row.species, row.upper)]
    const vacuum = vacuumNmOfWavenumber(upper.energy_invcm - lower.energy_invcm)
    const computed = row.ref_medium === 'air' ? vacToAir(vacuum) : vacuum
    // the list was checked to 0.01 nm; air against vacuum is 0.05 nm or more everywhere here, so a wrong medium shows
    expect(Math.abs(computed - row.ref_nm)).toBeLessThan(0.01)
  })

  it.each(rows)('$species $lower - $upper is allowed by the rules of its kind', (row) => {
    const [lower, upper] = [judged(levelNamed(row.species, row.lower)), judged(levelNamed(row.species, row.upper))]
    // one row is a forbidden line of the aurora and the nebulae: O I 636.4 nm within 2p4
    expect(judge(lower, upper, lower.parity === upper.parity ? 'M1' : 'E1').allowed).toBe(true)
  })
})

interface Effective {
  species: string
  wavelength_air_nm: number
  lower: { config: string; term: string; J: string }
  upper: { config: string; term: string; J: string }
  g_eff_LS: string
  g_eff_published: number
  grade: string
  source: string
}

const numbersOf = (level: { term: string; J: string }) => {
  const match = /(\d)([A-Z])$/.exec(level.term)
  return { twoS: Number(match?.[1]) - 1, l: lOfLetter(match?.[2] ?? '') ?? Number.NaN, twoJ: two(level.J) }
}

describe('published effective Landé factors', () => {
  it.each(readData<{ rows: Effective[] }>('effective-lande.json').rows)('$species $wavelength_air_nm nm: $g_eff_published ($grade: $source)', (row) => {
    const [lower, upper] = [numbersOf(row.lower), numbersOf(row.upper)]
    const exact = effectiveGExact({ twoJ: lower.twoJ, g: landeGExact(lower) }, { twoJ: upper.twoJ, g: landeGExact(upper) })
    expect(exact).toBe(row.g_eff_LS)
    const real = effectiveG({ twoJ: lower.twoJ, g: landeG(lower, { gS: 2 }) }, { twoJ: upper.twoJ, g: landeG(upper, { gS: 2 }) })
    // printed to three decimals
    expect(Math.abs((real ?? Number.NaN) - row.g_eff_published)).toBeLessThanOrEqual(0.0005)
  })
})

interface Pattern {
  line: string
  lower: string
  upper: string
  n_components: number
  components: { pol: 'pi' | 'sigma'; shift_L: string; strength: string }[]
  grade: string
  source: string
}

const namedEnd = (name: string) => {
  const [term = '', j = ''] = name.split(' ')
  const numbers = numbersOf({ term, J: j })
  return { twoJ: numbers.twoJ, g: landeGExact(numbers) }
}

describe('textbook Zeeman patterns at g_s = 2', () => {
  it.each(readData<{ rows: Pattern[] }>('patterns.json').rows)('$line ($grade: $source)', (row) => {
    const [lower, upper] = [namedEnd(row.lower), namedEnd(row.upper)]
    // components that fall together are seen as one: the drawn pattern has one line for each polarisation and shift
    const seen = new Map<string, number>()
    for (const component of exactComponents(lower, upper)) {
      const key = `${component.q === 0 ? 'pi' : 'sigma'} ${component.shift.toFraction()}`
      // seen across the field: pi with sin^2 / 2 = 1/2, sigma with (1 + cos^2) / 4 = 1/4
      seen.set(key, (seen.get(key) ?? 0) + component.strength.valueOf() * (component.q === 0 ? 2 : 1))
    }
    expect([...seen.keys()].sort()).toEqual(row.components.map((c) => `${c.pol} ${c.shift_L}`).sort())
    expect(seen.size).toBe(row.n_components)
    const [first] = row.components
    const scale = (seen.get(`${first?.pol} ${first?.shift_L}`) ?? Number.NaN) / Number(first?.strength)
    for (const component of row.components) {
      const ratio = (seen.get(`${component.pol} ${component.shift_L}`) ?? Number.NaN) / scale
      // whole numbers in print; only rounding of doubles separates them
      expect(Math.abs(ratio - Number(component.strength))).toBeLessThanOrEqual(1e-12 * Number(component.strength))
    }
  })
})

describe('lines everyone knows', () => {
  const endOf = (level: ListedLevel, gS?: number) => ({ twoJ: two(level.J), g: gOf(level, gS).g })
  const strong = (lower: ListedLevel, upper: ListedLevel, gS?: number) =>
    weakFieldComponents({ kind: 'E1', lower: endOf(lower, gS), upper: endOf(upper, gS), fieldTesla: 1 }).filter((c) => c.strength > 0)

  it('sodium D1 has four components, D2 six', () => {
    const ground = findLevel('Na I', '3s', '2S', '1/2')
    expect(strong(ground, findLevel('Na I', '3p', '2P', '1/2'))).toHaveLength(4)
    expect(strong(ground, findLevel('Na I', '3p', '2P', '3/2'))).toHaveLength(6)
  })

  it('a 1S0 - 1P1 line (Ca I 422.7 nm) is a triplet at 0 and one Lorentz unit to each side', () => {
    const [lower, upper] = [findLevel('Ca I', '4s2', '1S', '0'), findLevel('Ca I', '4s4p', '1P', '1')]
    expect(strong(lower, upper).map((c) => c.shiftLorentz)).toEqual([-1, 0, 1])
    expect(patternKind({ twoJ: 0, g: null }, { twoJ: 2, g: gOf(upper).exact })).toBe('normal')
  })

  it('Hg 546.07 nm (3P2 - 3S1) has nine components', () => {
    const [lower, upper] = [findLevel('Hg I', '6s6p', '3P', '2'), findLevel('Hg I', '6s7s', '3S', '1')]
    const components = strong(lower, upper, 2)
    expect(components).toHaveLength(9)
    const shifts = components.map((c) => c.shiftLorentz)
    expect(shifts).toEqual([-2, -1.5, -1, -0.5, 0, 0.5, 1, 1.5, 2])
  })

  it('Fe I 557.6 nm (5F1 - 5D0) is unsplit at g_s = 2 and all but unsplit with the real g_s', () => {
    const [lower, upper] = [findLevel('Fe I', '3d6(5D)4s4p(3P)', 'z 5F', '1'), findLevel('Fe I', '3d6(5D)4s(6D)5s', 'e 5D', '0')]
    expect(strong(lower, upper, 2).every((c) => c.shiftLorentz === 0)).toBe(true)
    expect(patternKind({ twoJ: 2, g: gOf(lower).exact }, { twoJ: 0, g: null })).toBe('unsplit')
    // g = (g_s - 2) times the spin share -1: -0.0023, so a tenth of a per cent of a normal splitting
    const real = strong(lower, upper).map((c) => Math.abs(c.shiftLorentz))
    expect(Math.max(...real)).toBeGreaterThan(0.001)
    expect(Math.max(...real)).toBeLessThan(0.0025)
  })
})
