import { describe, expect, it } from 'vitest'
import { weakFieldComponents } from '@/lib/atomic/components'
import { G_S, MU_B_OVER_HC_INVCM_PER_T } from '@/lib/atomic/constants'
import { landeG, landeGExact } from '@/lib/atomic/lande'
import { effectiveG, effectiveGExact, exactComponents, secondMoments } from '@/lib/atomic/moments'
import { readCases } from './read'

interface End {
  twoS: number
  L: number
  twoJ: number
}
const endOf = (end: End, gS: number) => ({ twoJ: end.twoJ, g: landeG({ twoS: end.twoS, l: end.L, twoJ: end.twoJ }, { gS }) })
const exactEnd = (end: End) => ({ twoJ: end.twoJ, g: landeGExact({ twoS: end.twoS, l: end.L, twoJ: end.twoJ }) })

describe('weak-field components of 31 lines', () => {
  interface Case {
    line: string
    lower: End
    upper: End
    components: [number, number, number, string, number, number, string, number][]
    nonVanishing: Record<string, number>
  }

  it.each(readCases<Case>('03-components.json'))('$line', (row) => {
    const byM = new Map(row.components.map((c) => [`${c[0]},${c[1]}`, c]))
    for (const [gS, column] of [[2, 4], [G_S, 5]] as const) {
      const components = weakFieldComponents({ kind: 'E1', lower: endOf(row.lower, gS), upper: endOf(row.upper, gS), fieldTesla: 1 })
      expect(components).toHaveLength(row.components.length)
      for (const component of components) {
        const wanted = byM.get(`${component.twoMLower},${component.twoMUpper}`)
        expect(wanted).toBeDefined()
        if (!wanted) continue
        expect(component.q).toBe(wanted[2])
        // header: shift 1e-12, strength 1e-13
        expect(Math.abs(component.shiftLorentz - wanted[column])).toBeLessThanOrEqual(1e-12)
        expect(Math.abs(component.strength - wanted[7])).toBeLessThanOrEqual(1e-13)
        expect(component.shiftInvcm).toBeCloseTo(component.shiftLorentz * MU_B_OVER_HC_INVCM_PER_T, 13)
        expect(component.forbidden !== undefined).toBe(wanted[6] === '0')
      }
      for (const q of [-1, 0, 1]) expect(components.filter((c) => c.q === q && c.strength > 0)).toHaveLength(row.nonVanishing[q] ?? 0)
    }
    const exact = exactComponents(exactEnd(row.lower), exactEnd(row.upper))
    expect(exact.map((c) => `${c.twoMLower},${c.twoMUpper},${c.shift.toFraction()},${c.strength.toFraction()}`).sort()).toEqual(
      row.components.filter((c) => c[6] !== '0').map((c) => `${c[0]},${c[1]},${c[3]},${c[6]}`).sort(),
    )
  })
})

describe('effective Landé factors and second moments of 31 lines (header: 1e-12)', () => {
  interface Values {
    gEff: number
    sigmaRaw2: number
    piRaw2: number
  }
  interface Case {
    line: string
    lower: End
    upper: End
    exact: { gEff: string } | null
    gS2: Values | null
    gSfree: Values | null
  }

  it.each(readCases<Case>('04-effective-lande.json'))('$line', (row) => {
    expect(effectiveGExact(exactEnd(row.lower), exactEnd(row.upper))).toBe(row.exact?.gEff ?? null)
    for (const [gS, wanted] of [[2, row.gS2], [G_S, row.gSfree]] as const) {
      const [lower, upper] = [endOf(row.lower, gS), endOf(row.upper, gS)]
      const [g, moments] = [effectiveG(lower, upper), secondMoments(lower, upper)]
      if (wanted === null) {
        expect([g, moments]).toEqual([null, null])
        continue
      }
      expect(Math.abs((g ?? Number.NaN) - wanted.gEff)).toBeLessThanOrEqual(1e-12)
      expect(Math.abs((moments?.sigmaFirst ?? Number.NaN) - wanted.gEff)).toBeLessThanOrEqual(1e-12)
      expect(Math.abs((moments?.sigmaSecond ?? Number.NaN) - wanted.sigmaRaw2)).toBeLessThanOrEqual(1e-12)
      expect(Math.abs((moments?.piSecond ?? Number.NaN) - wanted.piRaw2)).toBeLessThanOrEqual(1e-12)
    }
  })
})

describe('viewing geometry and Stokes parameters (header: 1e-13)', () => {
  interface Case {
    line: string
    lower?: End
    upper?: End
    thetaDeg: number | null
    components: [number, number, number, string, number, string, number, number, number][]
    sumIByQ: Record<string, number>
  }
  const terms: Record<string, number> = { S: 0, P: 1, D: 2, F: 3, G: 4 }
  const endNamed = (name: string): End => {
    const match = /^(\d)([A-Z])(\d+)(\/2)?$/.exec(name)
    if (!match) throw new Error(`unreadable level ${name}`)
    const twice = match[4] === undefined ? 2 : 1
    return { twoS: Number(match[1]) - 1, L: terms[match[2] ?? ''] ?? Number.NaN, twoJ: Number(match[3]) * twice }
  }

  it.each(readCases<Case>('11-geometry.json').filter((row) => row.thetaDeg !== null))('$line at $thetaDeg degrees', (row) => {
    const [lowerName = '', upperName = ''] = row.line.split(' ')[0]?.split('-') ?? []
    const components = weakFieldComponents({
      kind: 'E1',
      lower: endOf(row.lower ?? endNamed(lowerName), 2),
      upper: endOf(row.upper ?? endNamed(upperName), 2),
      fieldTesla: 1,
      thetaDeg: row.thetaDeg,
    })
    expect(components).toHaveLength(row.components.length)
    for (const [twoMLower, twoMUpper, , , , , intensity, q, v] of row.components) {
      const component = components.find((c) => c.twoMLower === twoMLower && c.twoMUpper === twoMUpper)
      expect(Math.abs((component?.intensity ?? Number.NaN) - intensity)).toBeLessThanOrEqual(1e-13)
      expect(Math.abs((component?.stokesQ ?? Number.NaN) - q)).toBeLessThanOrEqual(1e-13)
      expect(Math.abs((component?.stokesV ?? Number.NaN) - v)).toBeLessThanOrEqual(1e-13)
    }
    const total = components.reduce((sum, c) => sum + (c.intensity ?? 0), 0)
    expect(Math.abs(total - 1)).toBeLessThanOrEqual(1e-13)
  })
})
