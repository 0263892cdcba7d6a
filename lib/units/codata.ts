/**
 * CODATA 2022 recommended values: E. Tiesinga, P. J. Mohr, D. B. Newell, B. N. Taylor,
 * "The 2022 CODATA recommended values of the fundamental physical constants" (NIST, 2024).
 * h, c, e and k_B are exact by the definition of the SI. `standardUncertainty` is one standard deviation in `unit`.
 * The one place in the project where these numbers are typed.
 */
export interface Constant {
  readonly symbol: string
  readonly name: string
  readonly value: number
  readonly unit: string
  readonly standardUncertainty: number
  readonly exact: boolean
  readonly source: string
}

export const CONSTANTS_EDITION = 'CODATA 2022'

const SI_DEFINITION = 'SI Brochure, 9th edition (2019): exact by definition'

const exact = (symbol: string, name: string, value: number, unit: string, source = SI_DEFINITION): Constant => ({
  symbol,
  name,
  value,
  unit,
  standardUncertainty: 0,
  exact: true,
  source,
})

const measured = (symbol: string, name: string, value: number, unit: string, standardUncertainty: number): Constant => ({
  symbol,
  name,
  value,
  unit,
  standardUncertainty,
  exact: false,
  source: CONSTANTS_EDITION,
})

export const CONSTANTS = {
  planckConstant: exact('h', 'Planck constant', 6.62607015e-34, 'J s'),
  speedOfLight: exact('c', 'speed of light in vacuum', 299792458, 'm/s'),
  elementaryCharge: exact('e', 'elementary charge', 1.602176634e-19, 'C'),
  boltzmannConstant: exact('k_B', 'Boltzmann constant', 1.380649e-23, 'J/K'),
  bohrMagneton: measured('mu_B', 'Bohr magneton', 9.2740100657e-24, 'J/T', 2.9e-33),
  bohrMagnetonInvcm: measured('mu_B/hc', 'Bohr magneton in wavenumbers (one Lorentz unit per tesla)', 0.46686447719, 'cm^-1/T', 1.5e-10),
  bohrMagnetonGhz: measured('mu_B/h', 'Bohr magneton in frequency', 13.9962449171, 'GHz/T', 4.4e-9),
  electronSpinG: measured('g_s', 'electron spin g factor, |g_e|', 2.00231930436092, '1', 3.6e-13),
  electronMass: measured('m_e', 'electron mass', 9.1093837139e-31, 'kg', 2.8e-40),
  electronMassU: measured('m_e', 'electron mass in unified atomic mass units', 0.0005485799090441, 'u', 9.7e-15),
  atomicMassConstant: measured('m_u', 'atomic mass constant', 1.66053906892e-27, 'kg', 5.2e-37),
  nuclearMagneton: measured('mu_N', 'nuclear magneton', 5.0507837393e-27, 'J/T', 1.6e-36),
  rydbergConstant: measured('R_inf', 'Rydberg constant', 109737.31568157, 'cm^-1', 1.2e-7),
  fineStructureConstant: measured('alpha', 'fine-structure constant', 0.0072973525643, '1', 1.1e-12),
  ghzPerInvcm: exact('c', 'frequency of one wavenumber', 29.9792458, 'GHz per cm^-1', 'exact chain: c'),
  evPerInvcm: exact('hc/e', 'energy of one wavenumber', 1.239841984332002627e-4, 'eV per cm^-1', 'exact chain: h c / e'),
} as const satisfies Record<string, Constant>

export const H_J_S = CONSTANTS.planckConstant.value
export const C_M_PER_S = CONSTANTS.speedOfLight.value
export const E_C = CONSTANTS.elementaryCharge.value
export const K_B = CONSTANTS.boltzmannConstant.value
export const MU_B_J_PER_T = CONSTANTS.bohrMagneton.value
export const MU_B_OVER_HC_INVCM_PER_T = CONSTANTS.bohrMagnetonInvcm.value
export const MU_B_OVER_H_GHZ_PER_T = CONSTANTS.bohrMagnetonGhz.value
export const G_S = CONSTANTS.electronSpinG.value
export const M_E_KG = CONSTANTS.electronMass.value
export const M_E_U = CONSTANTS.electronMassU.value
export const M_U_KG = CONSTANTS.atomicMassConstant.value
export const MU_N_J_PER_T = CONSTANTS.nuclearMagneton.value
export const R_INF_INVCM = CONSTANTS.rydbergConstant.value
export const GHZ_PER_INVCM = CONSTANTS.ghzPerInvcm.value
export const EV_PER_INVCM = CONSTANTS.evPerInvcm.value
