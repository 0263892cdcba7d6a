/** `Na-I` -> `Na I`, with a space that does not break. */
export const speciesText = (id: string): string => id.replace('-', '\u00a0')

/** Address of a level's, a line's or a species' page. */
export const levelPage = (id: string): string => `/levels/${id}`
export const linePage = (id: string): string => `/lines/${id}`
export const speciesPage = (id: string): string => `/species/${id}`

export const KIND_NAME = { E1: 'electric dipole', M1: 'magnetic dipole', E2: 'electric quadrupole' } as const

/** Why a line or level was left out of a list, for each reason that the API counts. */
const REASONS: Record<string, string> = {
  parity: 'the parity rule forbids them',
  delta_j: 'J changes by more than the kind allows',
  zero_zero: 'J = 0 to J = 0 is forbidden',
  delta_s: 'the spin changes: intercombination lines, left out by the LS rules',
  delta_l: 'L changes by more than one, left out by the LS rules',
  l_zero_zero: 'L = 0 to L = 0, left out by the LS rules',
  zero_interval: 'both levels have the same energy',
  retired: 'the level is retired',
  outside_window: 'outside the window asked for',
  g_eff: 'the effective Landé factor is outside the range, or is not known',
  g_eff_unknown: 'the effective Landé factor is not known',
  g_eff_not_applicable: 'they have no dipole line, so no effective Landé factor',
  g_unknown: 'the Landé factor is not known',
  g_not_applicable: 'J = 0 has no Landé factor',
}
export const reasonText = (code: string): string => REASONS[code] ?? code.replace(/_/g, ' ')
