import { describe, expect, it } from 'vitest'
import { CONSTANTS, CONSTANTS_EDITION, EV_PER_INVCM, G_S, MU_B_OVER_HC_INVCM_PER_T, R_INF_INVCM } from '@/lib/atomic/constants'
import { jjG, jjGExact, landeG, landeGExact, pairG, pairGExact } from '@/lib/atomic/lande'
import { readCases, readData } from './read'

// headers of 01 and 12: absolute tolerance 1e-12
const TOLERANCE = 1e-12

describe('Landé g of every LS level up to S = 4, L = 7', () => {
  const cases = readCases<{ label: string; twoS: number; L: number; twoJ: number; gExact: string | null; g_gS2: number | null; g_gSfree: number | null }>('01-lande.json')

  it.each(cases)('$label', ({ twoS, L, twoJ, gExact, g_gS2, g_gSfree }) => {
    expect(landeGExact({ twoS, l: L, twoJ })).toBe(gExact)
    const [two, free] = [landeG({ twoS, l: L, twoJ }, { gS: 2 }), landeG({ twoS, l: L, twoJ })]
    if (g_gS2 === null || g_gSfree === null) {
      expect([two, free]).toEqual([null, null])
      return
    }
    expect(Math.abs((two ?? Number.NaN) - g_gS2)).toBeLessThanOrEqual(TOLERANCE)
    expect(Math.abs((free ?? Number.NaN) - g_gSfree)).toBeLessThanOrEqual(TOLERANCE)
  })
})

describe('g in pair and jj coupling', () => {
  interface Case {
    scheme: string
    label: string
    twoL1: number
    twoS1: number
    twoJ1: number
    twol2: number
    twoK?: number
    twoj2?: number
    twoJ: number
    gExact: string | null
    g_gS2: number | null
    g_gSfree: number | null
  }

  it.each(readCases<Case>('12-coupling-g.json'))('$scheme $label', (row) => {
    const core = { twoS: row.twoS1, l: row.twoL1 / 2, twoJ: row.twoJ1 }
    const lOuter = row.twol2 / 2
    const pair = { core, lOuter, twoK: row.twoK ?? 0, twoJ: row.twoJ }
    const jj = { core, lOuter, twoJOuter: row.twoj2 ?? 0, twoJ: row.twoJ }
    const isPair = row.scheme === 'J1K'
    expect(isPair ? pairGExact(pair) : jjGExact(jj)).toBe(row.gExact)
    for (const [gS, wanted] of [[2, row.g_gS2], [G_S, row.g_gSfree]] as const) {
      const g = isPair ? pairG(pair, gS) : jjG(jj, gS)
      if (wanted === null) expect(g).toBeNull()
      else expect(Math.abs((g ?? Number.NaN) - wanted)).toBeLessThanOrEqual(TOLERANCE)
    }
  })
})

describe('constants against the CODATA 2022 list', () => {
  interface Row {
    symbol: string
    '2022'?: { value: number; unit: string; std_unc: number }
  }
  const rows = readData<{ rows: Row[] }>('constants.json').rows
  const listed = (symbol: string) => rows.find((row) => row.symbol === symbol)?.['2022'] ?? { value: Number.NaN, unit: '', std_unc: Number.NaN }

  it('names its edition', () => expect(CONSTANTS_EDITION).toBe('CODATA 2022'))

  it.each([
    ['h', CONSTANTS.planckConstant, 1],
    ['c', CONSTANTS.speedOfLight, 1],
    ['e', CONSTANTS.elementaryCharge, 1],
    ['k_B', CONSTANTS.boltzmannConstant, 1],
    ['mu_B', CONSTANTS.bohrMagneton, 1],
    ['mu_B/hc', CONSTANTS.bohrMagnetonInvcm, 1e-2],
    ['mu_B/h', CONSTANTS.bohrMagnetonGhz, 1e-9],
    ['g_e', CONSTANTS.electronSpinG, -1],
    ['m_e', CONSTANTS.electronMass, 1],
    ['m_e in u', CONSTANTS.electronMassU, 1],
    ['m_u', CONSTANTS.atomicMassConstant, 1],
    ['mu_N', CONSTANTS.nuclearMagneton, 1],
    ['R_inf', CONSTANTS.rydbergConstant, 1e-2],
    ['alpha', CONSTANTS.fineStructureConstant, 1],
    ['hc/e', CONSTANTS.evPerInvcm, 1],
  ] as const)('%s with its uncertainty', (symbol, constant, scale) => {
    const row = listed(symbol)
    // typed from the same list in another unit: only the scaling rounds
    expect(Math.abs(constant.value / (row.value * scale) - 1)).toBeLessThan(4e-16)
    const scaled = row.std_unc * Math.abs(scale)
    expect(Math.abs(constant.standardUncertainty - scaled)).toBeLessThanOrEqual(4e-16 * scaled)
    expect(constant.exact).toBe(row.std_unc === 0)
  })

  it('the wavenumber and eV forms follow from mu_B, h, c, e', () => {
    const { planckConstant: h, speedOfLight: c, elementaryCharge: e, bohrMagneton: muB } = CONSTANTS
    // the list's own rounding: eleven digits
    expect(muB.value / (h.value * c.value) / 100 / MU_B_OVER_HC_INVCM_PER_T).toBeCloseTo(1, 10)
    expect((h.value * c.value * 100) / e.value / EV_PER_INVCM).toBeCloseTo(1, 14)
    expect(R_INF_INVCM).toBeCloseTo(109737.31568157, 8)
  })
})
