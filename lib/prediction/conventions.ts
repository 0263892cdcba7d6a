import { AIR_FORMULAS, AIR_MEASURED_TO_NM, DEFAULT_AIR_FORMULA } from '@/lib/atomic/air'

/** Sentences of warnings and refusals that several answers give. */
export const AIR_EXTRAPOLATED = `Beyond ${AIR_MEASURED_TO_NM} nm the formula of air is extrapolated.`
export const INTERMEDIATE_NOT_BUILT = 'The intermediate model is not built yet; use model=linear or model=auto.'

/** What numbers mean where something was computed: `meta.conventions`. */
export const AIR = `Air wavelengths: ${AIR_FORMULAS[DEFAULT_AIR_FORMULA].source}; standard air, ${AIR_FORMULAS[DEFAULT_AIR_FORMULA].air}; from 200 nm (vacuum) up.`

export const LINE_CONVENTIONS = {
  air: AIR,
  allowed: 'verdict.allowed is the rigorous rules of the kind; the LS rules stand beside it and do not apply where an end has no S and L.',
  g_eff: 'Of the dipole line, from adopted g_J; null for a pair that the rigorous rules forbid and for E2.',
  pattern: 'Judged with exact coupled g_J at g_s = 2 where both ends have one, else with the adopted values.',
  uncertainty: 'One standard deviation; level energies are taken as independent, the ground level as exact; null where any part is unknown.',
} as const

export const FIELD_CONVENTIONS = {
  q: 'q = m_upper - m_lower, for absorption and emission alike: q = 0 pi, q = +1 sigma+, q = -1 sigma-.',
  shift: '(E_u(m_u) - E_u) - (E_l(m_l) - E_l); a positive shift is to higher wavenumber, to the blue. shift_pm is in wavelength: the opposite sign.',
  lorentz_unit: 'One Lorentz unit is mu_B B / hc.',
  g_l: 1,
  nucleus: 'Hyperfine structure and isotope shifts are not in these positions.',
  normalisation: 'line: the strengths of each q sum to 1 at zero field.',
  intensity: 'Optically thin emission: strength times sin^2(theta)/2 for pi and (1 + cos^2(theta))/4 for each sigma; averaged over angle, strength/3, where no angle is given.',
  stokes: 'theta is the angle between the field and the direction from source to observer. V > 0 turns counter-clockwise as the observer sees it (IAU 1974); Q > 0 lies along the field projected on the sky; U = 0. Absorption removes what emission adds.',
  uncertainty:
    'One standard deviation, root sum of squares of the parts in budget; level energies are taken as independent, the ground level as exact, the field as exact unless field_unc is given. Null where any part is unknown; the known part stands beside it.',
  air: AIR,
} as const

export const SUBLEVEL_CONVENTIONS = {
  energy: 'E(m) = E + mu_B g_J m B; shift_invcm is against the level without field.',
  order: 'Rows by m, upwards.',
  g_l: 1,
} as const
