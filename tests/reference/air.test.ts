import { describe, expect, it } from 'vitest'
import { type AirFormula, airToVac, refractivity, vacToAir } from '@/lib/atomic/air'
import { readCases, readData } from './read'

const NAMES: Record<string, AirFormula> = { ciddor1996: 'ciddor1996', peckReeder1972: 'peck_reeder1972', edlen1966: 'edlen1966' }

interface Case {
  nm: number
  models: Record<string, { nMinus1_at_vac: number; vacToAir_nm: number; airToVac_nm: number }>
}

describe('air and vacuum by three formulas (header: n - 1 to 1e-16, wavelengths to 1e-14)', () => {
  it.each(readCases<Case>('08-air.json'))('$nm nm', ({ nm, models }) => {
    expect(Object.keys(models).sort()).toEqual(Object.keys(NAMES).sort())
    for (const [name, wanted] of Object.entries(models)) {
      const formula = NAMES[name] ?? 'ciddor1996'
      expect(Math.abs(refractivity(formula, nm) - wanted.nMinus1_at_vac)).toBeLessThanOrEqual(1e-16)
      expect(Math.abs(vacToAir(nm, formula) / wanted.vacToAir_nm - 1)).toBeLessThanOrEqual(1e-14)
      expect(Math.abs(airToVac(nm, formula) / wanted.airToVac_nm - 1)).toBeLessThanOrEqual(1e-14)
    }
  })
})

describe('printed refractivities', () => {
  const ids: Record<string, AirFormula> = { 'Edlen 1966': 'edlen1966', 'Peck & Reeder 1972, five-parameter': 'peck_reeder1972', 'Ciddor 1996 standard air': 'ciddor1996' }
  const rows = readData<{ rows: { name: string; n_minus_1_e8: Record<string, number>; source: string }[] }>('air-index.json').rows.filter((row) => row.name in ids)

  it.each(rows)('$name ($source)', ({ name, n_minus_1_e8 }) => {
    const formula = ids[name] ?? 'ciddor1996'
    for (const [nm, printed] of Object.entries(n_minus_1_e8)) {
      // printed to 0.001, so half of that
      expect(Math.abs(refractivity(formula, Number(nm)) * 1e8 - printed)).toBeLessThanOrEqual(0.000501)
    }
  })
})
