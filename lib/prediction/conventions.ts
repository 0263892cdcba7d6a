import { HYPERFINE_CONVENTIONS } from '@/lib/atomic/hyperfine'
import { AIR_FORMULAS, AIR_MEASURED_TO_NM, DEFAULT_AIR_FORMULA } from '@/lib/atomic/air'

/** Sentences of warnings and refusals that several answers give. */
export const AIR_EXTRAPOLATED = `Beyond ${AIR_MEASURED_TO_NM} nm the formula of air is extrapolated.`

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
  nucleus: 'Hyperfine structure and isotope shifts are not in these positions; hyperfine=true puts the first in.',
  models: 'linear: mu_B B (g_u m_u - g_l m_l). intermediate: eigenvalues of sum_J E_J |J><J| + mu_B B (g_L L_z + g_s S_z) within each LS term, the diagonal with the g_J in force; strengths from the eigenvectors and the LS dipole amplitudes. J is named by continuity from zero field, (M_L, M_S) by what the sublevel tends to at high field.',
  normalisation: 'line: the strengths of each q sum to 1 at zero field.',
  intensity: 'Optically thin emission: strength times sin^2(theta)/2 for pi and (1 + cos^2(theta))/4 for each sigma; averaged over angle, strength/3, where no angle is given.',
  stokes: 'theta is the angle between the field and the direction from source to observer. V > 0 turns counter-clockwise as the observer sees it (IAU 1974); Q > 0 lies along the field projected on the sky; U = 0. Absorption removes what emission adds.',
  uncertainty:
    'One standard deviation, root sum of squares of the parts in budget; level energies are taken as independent, the ground level as exact, the field as exact unless field_unc is given. Null where any part is unknown; the known part stands beside it.',
  air: AIR,
} as const

const SUBLEVEL_NAMES = 'J by continuity from zero field, null where two zero-field energies of the term coincide; M_L, M_S are what the sublevel tends to at high field, the k-th lowest g_L M_L + g_s M_S for the k-th state of an m.'
const QUADRATIC = 'Quadratic shift e^2 B^2 <r^2 sin^2 theta>/8m_e in first order, <r^2> hydrogenic with the effective quantum number; part of shifts and energies with diamagnetic=true only.'

/** Of sublevels, by model. */
export const SUBLEVEL_CONVENTIONS = {
  linear: { energy: 'E(m) = E + mu_B g_J m B; shift_invcm is against the level without field.', high_field_names: 'm_l and m_s are null: the linear model does not name them.', diamagnetic: QUADRATIC, order: 'Rows by m, upwards.', g_l: 1 },
  intermediate: { energy: 'Eigenvalues of sum_J E_J |J><J| + mu_B B (g_L L_z + g_s S_z) within the term, the diagonal with g_J; shift_invcm is against the level without field.', names: SUBLEVEL_NAMES, diamagnetic: QUADRATIC, order: 'Rows by m, upwards.', g_l: 1 },
} as const

/** Of levels with a nucleus. */
export const NUCLEUS_CONVENTIONS = {
  ...HYPERFINE_CONVENTIONS,
  energy: 'Eigenvalues of A I.J + quadrupole + mu_B B (g_J J_z + g_I I_z) over all |m_J, m_I>; g_I in units of mu_B, negative for a positive nuclear moment.',
  names: 'F by continuity from zero field, null where two zero-field energies coincide; m_J, m_I are what the state tends to at high field, the k-th lowest g_J m_J + g_I m_I for the k-th state of an m_F.',
} as const

/** Of the difference of two sublevels over the field. */
export const CROSSING_CONVENTIONS = {
  difference: 'E(a) - E(b); zero field itself is left out.',
  crossings: 'Fields where both energies are equal; two sublevels of one m do not cross and have anticrossings instead, where they are nearest.',
  stationary: 'Fields where the difference does not change with the field to first order; root finding on analytic slopes.',
} as const

/** Of the components of a line with nuclear spin. */
export const HYPERFINE_LINE_CONVENTIONS = {
  q: 'q = m_F upper - m_F lower, for absorption and emission alike: q = 0 pi, q = +1 sigma+, q = -1 sigma-.',
  detuning: `detuning_mhz is counted from ${HYPERFINE_CONVENTIONS.detuning_origin}, with the isotope shift; a positive detuning is to higher frequency. shift_pm is in wavelength: the opposite sign.`,
  energy: NUCLEUS_CONVENTIONS.energy,
  names: NUCLEUS_CONVENTIONS.names,
  left_out: HYPERFINE_CONVENTIONS.left_out,
  g_l: 1,
  normalisation: 'isotope: over one isotope the strengths of all components sum to 1 at any field, all states being equally populated; weight is the share of the isotope, and weights sum to 1.',
  intensity: 'Optically thin emission: three times strength times weight times sin^2(theta)/2 for pi and (1 + cos^2(theta))/4 for each sigma; averaged over angle a third of that product, where no angle is given; the line sums to 1 at every angle at zero field.',
  isotopes: 'Isotope shifts are not in the table and taken as 0; the natural mixture is weighed by abundance, renormalised to the isotopes listed.',
  stokes: FIELD_CONVENTIONS.stokes,
  uncertainty: 'One standard deviation of the detuning, root sum of squares of the parts in budget: A, B and g_J of both levels, the field, mu_B/h; g_I is taken as exact, and the energies of the levels are not in it. Null where any part is unknown; the known part stands beside it.',
  air: AIR,
} as const
