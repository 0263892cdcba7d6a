export type AirFormula = 'ciddor1996' | 'peck_reeder1972' | 'edlen1966'

interface Dispersion {
  name: string
  source: string
  air: string
  constant: number
  /** Terms a / (b - s^2) of (n - 1) 1e8, s = 1/lambda_vac in 1/um. */
  terms: readonly (readonly [number, number])[]
}

/** Dispersion formulas of standard air: 15 C, 101 325 Pa, dry. Coefficients as printed in the papers named. */
export const AIR_FORMULAS: Readonly<Record<AirFormula, Dispersion>> = {
  ciddor1996: {
    name: 'Ciddor 1996',
    source: 'P. E. Ciddor, Appl. Opt. 35, 1566 (1996)',
    air: '15 C, 101 325 Pa, dry, 450 ppm CO2',
    constant: 0,
    terms: [[5792105, 238.0185], [167917, 57.362]],
  },
  peck_reeder1972: {
    name: 'Peck & Reeder 1972',
    source: 'E. R. Peck & K. Reeder, J. Opt. Soc. Am. 62, 958 (1972), five-constant form',
    air: '15 C, 101 325 Pa, dry, 330 ppm CO2',
    constant: 8060.51,
    terms: [[2480990, 132.274], [17455.7, 39.32957]],
  },
  edlen1966: {
    name: 'Edlén 1966',
    source: 'B. Edlén, Metrologia 2, 71 (1966)',
    air: '15 C, 101 325 Pa, dry, 300 ppm CO2',
    constant: 8342.13,
    terms: [[2406030, 130], [15997, 38.9]],
  },
}

export const AIR_FORMULA_IDS = Object.keys(AIR_FORMULAS) as AirFormula[]
export const DEFAULT_AIR_FORMULA: AirFormula = 'ciddor1996'

/** Air wavelengths are given from this vacuum wavelength up; below, air absorbs and vacuum is the rule. */
export const AIR_FROM_NM = 200
/** Beyond this vacuum wavelength the formulas are extrapolated. */
export const AIR_MEASURED_TO_NM = 1690
/** Above this vacuum wavelength the conventional wavelength is a vacuum one again. */
export const CONVENTIONAL_AIR_TO_NM = 2000

/** n - 1 of standard air at a vacuum wavelength in nm. Plain arithmetic at any wavelength clear of the formula's poles (below 150 nm). */
export function refractivity(formula: AirFormula, vacuumNm: number): number {
  const { constant, terms } = AIR_FORMULAS[formula]
  const s = 1000 / vacuumNm
  const s2 = s * s
  let sum = constant
  for (const [a, b] of terms) sum += a / (b - s2)
  return sum * 1e-8
}

/** d(n - 1)/d(lambda_vac) of standard air, per nm: each term a/(b - s^2) gives 2 a s/(b - s^2)^2 ds, with ds = -s/lambda. */
export function refractivitySlope(formula: AirFormula, vacuumNm: number): number {
  const s = 1000 / vacuumNm
  const s2 = s * s
  let sum = 0
  for (const [a, b] of AIR_FORMULAS[formula].terms) sum += a / ((b - s2) * (b - s2))
  return (-2 * s2 * sum * 1e-8) / vacuumNm
}

/** lambda_air = lambda_vac / n(lambda_vac), nm. */
export const vacToAir = (vacuumNm: number, formula: AirFormula = DEFAULT_AIR_FORMULA): number => vacuumNm / (1 + refractivity(formula, vacuumNm))

/** Solves lambda_vac = lambda_air n(lambda_vac) by fixed-point iteration to the last bit (the map contracts by about 1e-5 a step). */
export function airToVac(airNm: number, formula: AirFormula = DEFAULT_AIR_FORMULA): number {
  let vacuumNm = airNm
  for (let step = 0; step < 30; step += 1) {
    const next = airNm * (1 + refractivity(formula, vacuumNm))
    if (next === vacuumNm) break
    vacuumNm = next
  }
  return vacuumNm
}

/** The air wavelength as it is told: null (not applicable) below 200 nm; `extrapolated` beyond the measured range, 1690 nm. */
export function airWavelength(vacuumNm: number, formula: AirFormula = DEFAULT_AIR_FORMULA): { nm: number | null; extrapolated: boolean } {
  if (!(vacuumNm >= AIR_FROM_NM)) return { nm: null, extrapolated: false }
  return { nm: vacToAir(vacuumNm, formula), extrapolated: vacuumNm > AIR_MEASURED_TO_NM }
}

/** The wavelength a table would print: vacuum below 200 nm and above 2000 nm (by the vacuum value), air between. */
export function conventionalWavelength(vacuumNm: number, formula: AirFormula = DEFAULT_AIR_FORMULA): { nm: number; medium: 'air' | 'vacuum' } {
  if (vacuumNm < AIR_FROM_NM || vacuumNm > CONVENTIONAL_AIR_TO_NM) return { nm: vacuumNm, medium: 'vacuum' }
  return { nm: vacToAir(vacuumNm, formula), medium: 'air' }
}
