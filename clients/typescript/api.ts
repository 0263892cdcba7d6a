// Written by generate.ts from the OpenAPI document (npm run openapi); do not edit.

export interface Species {
  /** Element and Roman stage. */
  id: string
  element: string
  /** Atomic number. */
  z: number
  /** Roman stage: I is the neutral atom. */
  stage: string
  charge: number
  name: string
  /** Closed shells that level configurations leave out. */
  core_configuration: string
  ionisation_energy_invcm: number | null
  ionisation_source: string | null
  ionisation_evidence: Evidence
  /** Active levels in the edition read. */
  level_count: number
  isotopes: Isotope[]
  /** Sum over the isotopes listed; under 100 where only the main ones are. */
  isotope_abundance_sum_percent: number | null
  /** Keys of every source a value of this species rests on. */
  sources: string[]
  note: string | null
}

/** How far a value was checked: read in the publication; quoted from a text that quotes it; recalled from memory, the publication named is where it is believed to stand; computed from other values. */
export type Evidence = 'read' | 'quoted' | 'recalled' | 'computed' | null

export interface Isotope {
  mass_number: number
  mass_u: number | null
  /** I, a half-integer. */
  nuclear_spin: number | null
  abundance_percent: number | null
  /** g_I' in units of mu_B, negative for a positive moment. */
  g_i: number | null
  source: string | null
  evidence: Evidence
}

/** Facts about the answer. Operations can add members. */
export interface Meta {
  /** Edition read; the newest one where the answer belongs to none, null while nothing is published. */
  edition: number | null
  /** Edition of the fundamental constants. */
  constants: string
  warnings: Warning[]
  /** The parameters in force, defaults included, as if typed. */
  query?: Record<string, string | string[]>
  /** Raised whenever a computed number can change. On computed answers. */
  physics?: number
  model?: string
  /** Signs and normalisations. */
  conventions?: Record<string, unknown>
  /** How many rows default filters and rules took out, by reason. */
  excluded?: Record<string, number>
  /** The rows that were taken out, with explain=true. */
  explained?: unknown[]
}

export interface Warning {
  code: string
  detail: string
}

export interface Page {
  limit: number
  /** Where the next page begins; null on the last one. */
  next_cursor: string | null
}

export interface Problem {
  /** Page that explains this kind of problem and its cure. */
  type: string
  title: string
  status: number
  detail: string
  /** Identifier of the request, as in X-Request-Id. */
  instance: string
  code: string
  errors?: Fault[]
}

export interface Fault {
  /** Name of a path or query parameter. */
  parameter?: string
  /** RFC 6901 JSON pointer into the body. */
  pointer?: string
  code: string
  detail: string
}

export interface Level {
  /** Species, dot, ordinal given at creation and never reused. */
  id: string
  /** Element and Roman stage. */
  species: string
  configuration: string
  coupling: Coupling
  term: Term
  energy_invcm: number
  energy_unc_invcm: number | null
  /** The digits the source printed; null where they were not kept. */
  energy_literal: string | null
  g_j: GJ
  energy_source: string
  energy_evidence: Evidence
  /** A well-known wavelength is reproduced to 0.01 nm with this level. */
  line_checked: boolean
  repeat_index: number | null
  /** Paschen name of a noble-gas level. */
  alternative_name: string | null
  note: string | null
  status: 'active' | 'retired'
  revision: number
}

/** Coupling scheme the level is named in: LS (Russell-Saunders), J1K (pair), jj, or unassigned. */
export type Coupling = 'LS' | 'J1K' | 'jj' | 'unassigned'

export interface Term {
  /** ASCII, * marks odd parity. */
  symbol: string
  unicode: string
  /** Letter that compilations put before repeated terms (a, z, y ...); not part of the symbol. */
  label: string | null
  multiplicity: number | null
  s: number | null
  l: number | null
  j: number
  parity: Parity
  /** 2J + 1. */
  degeneracy: number
  /** Pair coupling only: K. */
  k?: number
  /** Pair and jj coupling only: the core the outer electron couples to. */
  core?: {
    s: number
    l: number
    j: number
  }
  /** Pair and jj coupling only: l of the outer electron. */
  l_outer?: number
  /** jj coupling only: j of the outer electron. */
  j_outer?: number
}

export type Parity = 'even' | 'odd'

/** The Landé factor of a level. J = 0 has none: null, not_applicable. */
export interface GJ {
  adopted: number | null
  /** Known only where a measured value with an uncertainty was adopted. */
  adopted_unc: number | null
  /** Where the adopted value comes from; chosen: by a curator, with a reason. */
  basis: 'chosen' | 'measured' | 'coupled' | 'none'
  scheme: 'LS' | 'J1K' | 'jj' | null
  /** In the stated coupling, with g_s of the constants edition. */
  coupled: number | null
  /** In the stated coupling, with g_s = 2, as a fraction. */
  coupled_exact: string | null
  ls: number | null
  ls_exact: string | null
  measured: number | null
  measured_unc: number | null
  measured_source: string | null
  measured_evidence: Evidence
  all_measured: MeasuredG[]
  status: ValueStatus
}

export interface MeasuredG {
  value: number
  /** One standard deviation; null is unknown. */
  unc: number | null
  source: string
  evidence: Evidence
  note: string | null
}

export type ValueStatus = 'ok' | 'unknown' | 'not_applicable'

export interface LevelDetail {
  /** Species, dot, ordinal given at creation and never reused. */
  id: string
  /** Element and Roman stage. */
  species: string
  configuration: string
  coupling: Coupling
  term: Term
  energy_invcm: number
  energy_unc_invcm: number | null
  /** The digits the source printed; null where they were not kept. */
  energy_literal: string | null
  g_j: GJ
  energy_source: string
  energy_evidence: Evidence
  /** A well-known wavelength is reproduced to 0.01 nm with this level. */
  line_checked: boolean
  repeat_index: number | null
  /** Paschen name of a noble-gas level. */
  alternative_name: string | null
  note: string | null
  status: 'active' | 'retired'
  revision: number
  hyperfine_constants: HyperfineConstants[]
  links: {
    self: string
    page: string
    species: string
    g_factor: string
    sublevels: string
    transitions: string
    energy_source: string
  }
}

export interface HyperfineConstants {
  mass_number: number
  a_mhz: number | null
  a_unc_mhz: number | null
  b_mhz: number | null
  b_unc_mhz: number | null
  source: string
  evidence: Evidence
  note: string | null
}

export interface GFactor {
  /** Species, dot, ordinal given at creation and never reused. */
  level: string
  g_s: number
  status: ValueStatus
  adopted: number | null
  adopted_unc: number | null
  basis: 'chosen' | 'measured' | 'coupled' | 'none'
  /** Why this value was adopted, in a sentence. */
  reason: string
  scheme: 'LS' | 'J1K' | 'jj' | null
  coupled: number | null
  coupled_exact: string | null
  ls: number | null
  ls_exact: string | null
  measured: number | null
  measured_unc: number | null
  measured_source: string | null
  measured_evidence: Evidence
  all_measured: MeasuredG[]
  /** Measured minus coupled. */
  difference: number | null
  difference_in_standard_deviations: number | null
  derivation: ({
    label: string
    text: string
    value: string | null
  })[]
  /** Limits of g_J in any coupling of this configuration. */
  bounds: {
    lower: number
    upper: number
  } | null
}

export interface Sublevel {
  /** By continuity from zero field; null where two zero-field energies of the term coincide. */
  j: number | null
  m: number
  /** M_L that the sublevel tends to at high field; null in the linear model, which names none. */
  m_l: number | null
  /** M_S that it tends to at high field. */
  m_s: number | null
  shift_invcm: number
  shift_ghz: number
  shift_mhz: number
  energy_invcm: number
  /** Of the energy with respect to the field; analytic. */
  derivative_invcm_per_tesla: number
  /** Quadratic shift; part of shift and energy with diamagnetic=true only. */
  diamagnetic_shift_invcm: number | null
  diamagnetic_status: ValueStatus
  /** Of |J m> in the state; with amplitudes=true. */
  amplitudes?: {
    j: number
    amplitude: number
  }[]
}

export interface HyperfineSublevel {
  mass_number: number
  /** By continuity from zero field; null where two zero-field energies coincide. */
  f: number | null
  m_f: number
  /** m_J that the sublevel tends to at high field. */
  m_j: number
  /** m_I that it tends to at high field. */
  m_i: number
  /** From the hyperfine level F at zero field. */
  shift_mhz: number
  /** From the centre of gravity of the level J. */
  energy_mhz: number
  /** From the ground level. */
  energy_invcm: number
  derivative_mhz_per_tesla: number
  /** Of |m_J, m_I> in the state; with amplitudes=true. */
  amplitudes?: {
    m_j: number
    m_i: number
    amplitude: number
  }[]
}

export interface Crossings {
  /** Species, dot, ordinal given at creation and never reused. */
  level: string
  /** Null without hyperfine structure. */
  mass_number: number | null
  a: {
    name: string
    f: number | null
    j: number | null
    m: number
  }
  b: {
    name: string
    f: number | null
    j: number | null
    m: number
  }
  from_tesla: number
  to_tesla: number
  crossings: {
    field_tesla: number
    field_gauss: number
    /** Of E(a) - E(b). */
    slope_mhz_per_tesla: number
  }[]
  /** Two sublevels of one m do not cross: where they are nearest. */
  anticrossings: {
    field_tesla: number
    field_gauss: number
    gap_mhz: number
    gap_invcm: number
  }[]
  /** Where the difference does not change with the field to first order. */
  stationary: ({
    field_tesla: number
    field_gauss: number
    difference_mhz: number
    difference_invcm: number
    curvature_mhz_per_tesla2: number
    /** Of E(a) - E(b). */
    kind: 'minimum' | 'maximum'
  })[]
}

export interface Transition {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  id: string
  lower: Level
  upper: Level
  kind: Kind
  verdict: Verdict
  wavenumber_invcm: number
  wavelength_vac_nm: number
  wavelength_air_nm: number | null
  wavelength_air_status: ValueStatus
  wavelength_conventional_nm: number
  conventional_medium: 'air' | 'vacuum'
  frequency_thz: number
  wavenumber_unc_invcm: number | null
  g_eff: number | null
  g_eff_status: ValueStatus
  pattern: Pattern
  moments_lorentz: Moments
}

/** Electric dipole, magnetic dipole or electric quadrupole. */
export type Kind = 'E1' | 'M1' | 'E2'

export interface Verdict {
  /** The rigorous rules of the kind are met. */
  allowed: boolean
  rigorous: boolean
  /** The LS rules are met too; null where they do not apply. */
  ls: boolean | null
  intercombination: boolean
  rules: ({
    rule: RuleName
    basis: 'rigorous' | 'ls'
    verdict: 'pass' | 'fail' | 'not_applicable'
    detail: string
  })[]
}

export type RuleName = 'parity' | 'delta_j' | 'zero_zero' | 'delta_s' | 'delta_l' | 'l_zero_zero' | 'delta_m' | 'm_zero_zero' | 'zero_amplitude'

export type Pattern = 'unsplit' | 'normal' | 'triplet' | 'anomalous' | null

/** Strength-weighted means of shift^2 (pi, sigma+) and shift (sigma+), in Lorentz units, about the line's centre. */
export interface Moments {
  pi_second: number | null
  sigma_first: number | null
  sigma_second: number | null
}

export interface TransitionDetail {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  id: string
  lower: Level
  upper: Level
  kind: Kind
  verdict: Verdict
  wavenumber_invcm: number
  wavelength_vac_nm: number
  wavelength_air_nm: number | null
  wavelength_air_status: ValueStatus
  wavelength_conventional_nm: number
  conventional_medium: 'air' | 'vacuum'
  frequency_thz: number
  wavenumber_unc_invcm: number | null
  g_eff: number | null
  g_eff_status: ValueStatus
  pattern: Pattern
  moments_lorentz: Moments
  /** The levels of both terms: what the intermediate model diagonalises and the linear law is judged by. */
  terms: {
    lower: {
      s: number | null
      l: number | null
      levels: ({
        /** Species, dot, ordinal given at creation and never reused. */
        id: string
        j: number
        energy_invcm: number
        energy_unc_invcm: number | null
        g_j: number | null
        /** One standard deviation of the adopted g_J. */
        g_j_unc: number | null
      })[]
      missing_j: number[]
    }
    upper: {
      s: number | null
      l: number | null
      levels: ({
        /** Species, dot, ordinal given at creation and never reused. */
        id: string
        j: number
        energy_invcm: number
        energy_unc_invcm: number | null
        g_j: number | null
        /** One standard deviation of the adopted g_J. */
        g_j_unc: number | null
      })[]
      missing_j: number[]
    }
  }
  /** What the quadratic shifts of both ends are computed from. */
  diamagnetic: {
    lower: LevelDiamagnetic
    upper: LevelDiamagnetic
  }
  /** Hyperfine constants stored for both ends; components with hyperfine=true are made with them. */
  hyperfine: {
    lower: HyperfineConstants[]
    upper: HyperfineConstants[]
  }
  links: {
    self: string
    page: string
    components: string
    lower: string
    upper: string
  }
}

export interface LevelDiamagnetic {
  /** not_applicable: no single electron outside closed shells, or the level is none of a series that the ionisation energy limits. */
  status: 'ok' | 'unknown' | 'not_applicable'
  /** Why there is none; null where there is. */
  reason: string | null
  effective_n: number | null
  /** <r^2> in Bohr radii squared, hydrogenic with the effective quantum number. */
  mean_square_radius_bohr2: number | null
  /** l_mixing: levels of other l lie so near that first order is only a guide; penetrating: the electron is much inside the core. */
  cautions: ('l_mixing' | 'penetrating')[]
}

export interface Components {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string
  field_tesla: number
  model: 'linear' | 'intermediate'
  theta_deg: number | null
  centre: {
    wavenumber_invcm: number
    wavelength_vac_nm: number
    wavelength_air_nm: number | null
    wavelength_air_status: ValueStatus
    frequency_thz: number
  }
  /** Sorted by q, then shift, then m_lower. */
  components: Component[]
  validity: Validity
}

export interface Component {
  /** By continuity from zero field; null where two zero-field energies coincide. */
  j_lower: number | null
  m_lower: number
  j_upper: number | null
  m_upper: number
  /** m_upper - m_lower, for absorption and emission alike. */
  q: number
  polarisation: 'pi' | 'sigma+' | 'sigma-' | 'q=+2' | 'q=-2'
  /** M_L or M_S that the sublevel tends to at high field; null in the linear model, which names none. */
  m_l_lower: number | null
  /** M_L or M_S that the sublevel tends to at high field; null in the linear model, which names none. */
  m_s_lower: number | null
  /** M_L or M_S that the sublevel tends to at high field; null in the linear model, which names none. */
  m_l_upper: number | null
  /** M_L or M_S that the sublevel tends to at high field; null in the linear model, which names none. */
  m_s_upper: number | null
  /** Null at zero field in the intermediate model. */
  shift_lorentz: number | null
  shift_invcm: number
  shift_ghz: number
  shift_mhz: number
  /** Wavelength minus that of the centre, in the medium asked for. */
  shift_pm: number | null
  /** Negative where the field has brought the upper sublevel below the lower one; wavelengths are then null, with warning level_crossing. */
  wavenumber_invcm: number
  wavelength_vac_nm: number | null
  wavelength_air_nm: number | null
  frequency_thz: number
  /** Of the position with respect to the field; analytic. */
  derivative_invcm_per_tesla: number
  /** Null where the model gives none: meta.warnings says why. */
  strength: number | null
  /** Strength seen at theta_deg; averaged over angle when none is given. */
  intensity: number | null
  intensity_status: ValueStatus
  stokes_q: number | null
  stokes_v: number | null
  /** The rule that makes the strength zero, where one does. */
  vanishes_by: 'parity' | 'delta_j' | 'zero_zero' | 'delta_s' | 'delta_l' | 'l_zero_zero' | 'delta_m' | 'm_zero_zero' | 'zero_amplitude' | null
  /** Null where any part is unknown. */
  wavenumber_unc_invcm: number | null
  /** The known parts alone. */
  wavenumber_known_unc_invcm: number
  budget: BudgetPart[]
}

export interface BudgetPart {
  part: 'energy_lower' | 'energy_upper' | 'g_lower' | 'g_upper' | 'field' | 'constants'
  value_invcm: number | null
  status: 'known' | 'unknown' | 'exact'
}

/** How far the linear law may be trusted at this field: positions, strengths, and the centre of an unresolved blend apart. */
export interface Validity {
  positions: {
    status: ValidityStatus
    error_invcm: number | null
    /** Largest component error divided by the larger of the largest linear shift and 0.01 mu_B B. */
    relative_error: number | null
    tolerance: number
    field_limit_tesla: number | null
  }
  strengths: {
    status: ValidityStatus
    /** Largest change of a component's strength as a fraction of the largest in its q. */
    relative_error: number | null
    tolerance: number
    field_limit_tesla: number | null
  }
  blend: {
    status: ValidityStatus
    /** How far the linear law misplaces the centre of gravity of the lines seen in one, the worst q. */
    error_invcm: number | null
    /** error_invcm divided by the larger of the largest linear displacement of a centre and 0.01 mu_B B. */
    relative_error: number | null
    tolerance: number
    field_limit_tesla: number | null
    /** The lines seen in one with this line, itself included. */
    lines: BlendedLine[]
  }
  levels: {
    lower: LevelValidity
    upper: LevelValidity
  }
  method: string
  sentence: string
}

export type ValidityStatus = 'valid' | 'not_valid' | 'unknown'

export interface BlendedLine {
  /** Null for levels of no table. */
  transition: string | null
  j_lower: number
  j_upper: number
}

export interface LevelValidity {
  /** Species, dot, ordinal given at creation and never reused. */
  level: string | null
  status: ValidityStatus
  /** Largest error of a sublevel position; a lower bound where status is unknown. */
  error_invcm: number | null
  /** error_invcm divided by mu_B B. */
  relative_error: number | null
  /** error_invcm divided by the level's own largest linear shift. */
  relative_to_shift: number | null
  tolerance: number
  /** Field where relative_error passes the tolerance; null where it never does or is unknown. */
  field_limit_tesla: number | null
  /** J of the term that the table does not hold. */
  missing_j: number[]
}

export interface HyperfineComponents {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string
  field_tesla: number
  field_gauss: number
  model: 'hyperfine'
  theta_deg: number | null
  centre: {
    wavenumber_invcm: number
    wavelength_vac_nm: number
    wavelength_air_nm: number | null
    wavelength_air_status: ValueStatus
    frequency_thz: number
  }
  isotopes: UsedIsotope[]
  /** Sum of the abundances that the weights were divided by; null for one isotope named. */
  listed_abundance_percent: number | null
  /** Sorted by q, then detuning, then isotope and m_F lower. */
  components: HyperfineComponent[]
  /** Of the law without hyperfine structure: where J itself stops being good. */
  validity: {
    positions: {
      status: ValidityStatus
      error_invcm: number | null
      /** Largest component error divided by the larger of the largest linear shift and 0.01 mu_B B. */
      relative_error: number | null
      tolerance: number
      field_limit_tesla: number | null
    }
    strengths: {
      status: ValidityStatus
      /** Largest change of a component's strength as a fraction of the largest in its q. */
      relative_error: number | null
      tolerance: number
      field_limit_tesla: number | null
    }
    blend: {
      status: ValidityStatus
      /** How far the linear law misplaces the centre of gravity of the lines seen in one, the worst q. */
      error_invcm: number | null
      /** error_invcm divided by the larger of the largest linear displacement of a centre and 0.01 mu_B B. */
      relative_error: number | null
      tolerance: number
      field_limit_tesla: number | null
      /** The lines seen in one with this line, itself included. */
      lines: BlendedLine[]
    }
    levels: {
      lower: LevelValidity
      upper: LevelValidity
    }
    method: string
    sentence: string
  }
}

export interface UsedIsotope {
  mass_number: number
  nuclear_spin: number | null
  /** g_I' in units of mu_B, negative for a positive moment; null is not known and taken as 0. */
  g_i: number | null
  abundance_percent: number | null
  /** Share in the pattern; the weights of an answer sum to 1. */
  weight: number
  /** Isotope shift of the line that was put in. */
  shift_mhz: number
  /** unknown: the table gives no isotope shift, and 0 was put in. */
  shift_status: 'ok' | 'unknown' | 'not_applicable'
  a_lower_mhz: number | null
  b_lower_mhz: number | null
  a_upper_mhz: number | null
  b_upper_mhz: number | null
}

export interface HyperfineComponent {
  mass_number: number
  /** By continuity from zero field; null where two zero-field energies coincide. */
  f_lower: number | null
  m_f_lower: number
  f_upper: number | null
  m_f_upper: number
  /** m_F upper - m_F lower. */
  q: number
  polarisation: 'pi' | 'sigma+' | 'sigma-' | 'q=+2' | 'q=-2'
  /** What the sublevel tends to at high field. */
  m_j_lower: number
  m_i_lower: number
  m_j_upper: number
  m_i_upper: number
  /** From the line between the centres of gravity of both levels, isotope shift included. */
  detuning_mhz: number
  derivative_mhz_per_tesla: number
  /** detuning_mhz in wavenumber. */
  shift_invcm: number
  shift_ghz: number
  shift_pm: number | null
  wavenumber_invcm: number
  wavelength_vac_nm: number | null
  wavelength_air_nm: number | null
  frequency_thz: number
  /** Over one isotope all components sum to 1 at any field. */
  strength: number
  /** Share of the isotope. */
  weight: number
  /** Strength times weight as seen at theta_deg, times three, so that a line sums to 1; averaged over angle when none is given. */
  intensity: number | null
  intensity_status: ValueStatus
  stokes_q: number | null
  stokes_v: number | null
  /** One standard deviation of the detuning; the energies of the levels are not in it. Null where any part is unknown. */
  detuning_unc_mhz: number | null
  detuning_known_unc_mhz: number
  budget: HyperfineBudgetPart[]
}

export interface HyperfineBudgetPart {
  part: 'a_lower' | 'b_lower' | 'g_lower' | 'a_upper' | 'b_upper' | 'g_upper' | 'field' | 'constants'
  value_mhz: number | null
  status: 'known' | 'unknown' | 'exact'
}

export interface JudgedTransition {
  id: null
  lower: InlineLevelAnswer
  upper: InlineLevelAnswer
  kind: Kind
  verdict: Verdict
  wavenumber_invcm: number
  wavelength_vac_nm: number
  wavelength_air_nm: number | null
  wavelength_air_status: ValueStatus
  wavelength_conventional_nm: number
  conventional_medium: 'air' | 'vacuum'
  frequency_thz: number
  wavenumber_unc_invcm: number | null
  g_eff: number | null
  g_eff_status: ValueStatus
  pattern: Pattern
  moments_lorentz: Moments
}

/** A level given in the request, decoded; what only a table knows is null. */
export interface InlineLevelAnswer {
  id: null
  species: null
  configuration: null
  coupling: Coupling
  term: Term
  energy_invcm: number
  energy_unc_invcm: number | null
  /** The digits the source printed; null where they were not kept. */
  energy_literal: string | null
  g_j: GJ
  energy_source: null
  energy_evidence: null
  /** A well-known wavelength is reproduced to 0.01 nm with this level. */
  line_checked: boolean
  repeat_index: number | null
  /** Paschen name of a noble-gas level. */
  alternative_name: string | null
  note: string | null
  status: 'active' | 'retired'
  revision: null
}

export interface InlineLevel {
  energy_invcm: number
  s: number
  l: number
  j: number
  parity: Parity
  /** Used as the adopted value; without it the LS value. */
  g_j?: number | null
  label?: string | null
}

export interface DecodedTerm {
  symbol: string
  unicode: string
  label: string | null
  multiplicity: number | null
  s: number | null
  l: number | null
  j: number | null
  /** |L - S| to L + S. */
  possible_j: number[]
  /** Null where the symbol leaves it open. */
  parity: 'even' | 'odd' | null
  /** 2J + 1; (2S + 1)(2L + 1) for a whole term. */
  degeneracy: number
  g_j: {
    ls: number | null
    ls_exact: string | null
    status: ValueStatus
  }
}

export interface SublevelMatrix {
  m: number[]
  j: (number | null)[]
  m_l: (number | null)[]
  m_s: (number | null)[]
  energies_invcm: number[][]
  /** cm^-1 per tesla. */
  derivatives: number[][]
}

export interface HyperfineMatrix {
  /** By continuity from zero field; null where two zero-field energies coincide. */
  f: (number | null)[]
  m_f: number[]
  /** High-field name. */
  m_j: number[]
  m_i: number[]
  /** From the hyperfine level F at zero field. */
  shifts_mhz: number[][]
  /** From the centre of gravity of the level J. */
  energies_mhz: number[][]
  /** MHz per tesla. */
  derivatives: number[][]
}

/** A field (or g) from measured positions. An undetermined fit is an answer too: it says why. */
export type FieldFit = DeterminedField | DeterminedG | UndeterminedFit

export interface DeterminedField {
  unknown: 'field'
  status: 'determined'
  mode: 'positions'
  /** The model used. */
  model: 'linear' | 'intermediate'
  lines: ({
    line: number
    /** Null for a line given in the request. */
    transition: string | null
    kind: Kind
    name: string
    /** Without field, from the levels. */
    wavenumber_invcm: number
    wavelength_vac_nm: number
    wavelength_air_nm: number | null
    /** In which its wavelengths were read; null where none were given. */
    medium: 'air' | 'vacuum' | null
    /** Wavenumber that separations in wavelength were taken from; null where none were. */
    reference_invcm: number | null
  })[]
  /** Whether the model used holds at the fitted field for the positions of every line within the tolerance; null where it is not known. */
  model_valid: boolean | null
  /** Below zero where the assignment says that the field is reversed. */
  field_tesla: number
  /** One standard deviation, all parts of the budget; null where any part is unknown. */
  field_unc_tesla: number | null
  /** Its known parts alone; null where neither deviations are stated nor anything is left over to judge scatter by. */
  field_known_unc_tesla: number | null
  /** coverage_factor times field_known_unc_tesla. */
  expanded_unc_tesla: number | null
  coverage_factor: 2
  /** Whether every part of the budget is known. */
  uncertainty_complete: boolean
  /** From the positions, and the scale where it is fitted: the last but one entry of the covariance, or the last. */
  statistical_unc_tesla: number | null
  /** statistical_unc_tesla times the root of chi-squared per degree of freedom; null without degrees of freedom. */
  scaled_unc_tesla: number | null
  budget: ({
    part: 'positions' | 'scale' | 'g_lower' | 'g_upper' | 'energy_lower' | 'energy_upper' | 'constants'
    value_tesla: number | null
    status: 'known' | 'unknown' | 'exact'
  })[]
  /** Zeros by name, field, and scale where it is fitted: the order of covariance. */
  parameters: string[]
  parameter_units: string[]
  covariance: number[][] | null
  /** Null where no deviations are stated. */
  chi_squared: number | null
  degrees_of_freedom: number
  zeros: ({
    name: string
    lines: number[]
    /** Where the first of its lines would stand without field, on the scale of the measurement. */
    position_invcm: number
    /** One standard deviation of it; null where not known. */
    position_unc_invcm: number | null
    /** The same minus the wavenumber from the levels; null for separations and ring radii. */
    table_offset_invcm: number | null
  })[]
  scale: {
    value: number
    unc: number | null
    status: 'exact' | 'uncertain' | 'free'
  }
  residuals: FieldFitResidual[]
  /** Components with any strength at the fitted field, on the scale of the measurement; strengths of each q sum to 1 at zero field. */
  pattern: {
    line: number
    m_lower: number
    m_upper: number
    q: number
    position_invcm: number
    strength: number
  }[]
  /** How far the linear law holds at the fitted field, line by line. */
  validity: ({
    line: number
    /** lower~upper; lower is the level of lower energy in the edition read. */
    transition: string | null
    linear_law: Validity
  })[]
  /** Other readings of the peaks that fit about as well. */
  alternatives: {
    field_tesla: number
    /** How much worse than the reading taken, in units of chi-squared. */
    cost_more: number
    /** By measurement. */
    components: {
      m_lower: number
      m_upper: number
      q: number
    }[][]
  }[]
}

export interface FieldFitResidual {
  /** Its place in the request, from 0. */
  measurement: number
  /** Index of its line, from 0. */
  line: number
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string | null
  /** As given. */
  position: number
  position_unc: number | null
  /** Vacuum wavenumber, or distance from the reference of its line. */
  position_invcm: number
  position_unc_invcm: number | null
  fitted_invcm: number
  /** Measured minus fitted. */
  residual_invcm: number
  /** Residual over its own deviation, sigma sqrt(1 - leverage); null where sigma is not known or the fit must pass through the point. */
  standardised: number | null
  /** Share of the point in its own fitted value, 0 to 1. */
  leverage: number
  /** What the peak was read as; several where they are not resolved. */
  components: {
    m_lower: number
    m_upper: number
    q: number
  }[]
  assigned: 'by_hand' | 'automatic'
  /** The field fitted without this point; null where nothing is determined without it, and where the field is given. */
  field_without_tesla: number | null
  /** Change of the field by this point, in standard deviations of the field from the positions. */
  influence: number | null
}

export interface DeterminedG {
  unknown: 'g'
  status: 'determined'
  mode: 'positions'
  /** The model used. */
  model: 'linear' | 'intermediate'
  lines: ({
    line: number
    /** Null for a line given in the request. */
    transition: string | null
    kind: Kind
    name: string
    /** Without field, from the levels. */
    wavenumber_invcm: number
    wavelength_vac_nm: number
    wavelength_air_nm: number | null
    /** In which its wavelengths were read; null where none were given. */
    medium: 'air' | 'vacuum' | null
    /** Wavenumber that separations in wavelength were taken from; null where none were. */
    reference_invcm: number | null
  })[]
  model_valid: boolean | null
  field_tesla: number
  /** As given, the scale’s uncertainty with it; null: taken as exact. */
  field_unc_tesla: number | null
  coverage_factor: 2
  /** Null where it was held. */
  lower: {
    level: string
    g_j: number
    /** One standard deviation, all parts; null where any part is unknown. */
    g_j_unc: number | null
    g_j_known_unc: number | null
    /** Twice g_j_known_unc. */
    expanded_unc: number | null
    /** From the positions alone. */
    statistical_unc: number | null
    budget: ({
      part: 'positions' | 'field' | 'g_held'
      value: number | null
      status: 'known' | 'unknown' | 'exact'
    })[]
    /** The value in force without this fit. */
    table_g_j: number | null
  } | null
  /** Null where it was held. */
  upper: {
    level: string
    g_j: number
    /** One standard deviation, all parts; null where any part is unknown. */
    g_j_unc: number | null
    g_j_known_unc: number | null
    /** Twice g_j_known_unc. */
    expanded_unc: number | null
    /** From the positions alone. */
    statistical_unc: number | null
    budget: ({
      part: 'positions' | 'field' | 'g_held'
      value: number | null
      status: 'known' | 'unknown' | 'exact'
    })[]
    /** The value in force without this fit. */
    table_g_j: number | null
  } | null
  parameters: string[]
  parameter_units: string[]
  covariance: number[][] | null
  chi_squared: number | null
  degrees_of_freedom: number
  zeros: ({
    name: string
    lines: number[]
    /** Where the first of its lines would stand without field, on the scale of the measurement. */
    position_invcm: number
    /** One standard deviation of it; null where not known. */
    position_unc_invcm: number | null
    /** The same minus the wavenumber from the levels; null for separations and ring radii. */
    table_offset_invcm: number | null
  })[]
  residuals: FieldFitResidual[]
  validity: ({
    line: number
    /** lower~upper; lower is the level of lower energy in the edition read. */
    transition: string | null
    linear_law: Validity
  })[]
}

export interface UndeterminedFit {
  unknown: 'field' | 'g'
  status: 'undetermined'
  mode: 'positions'
  /** The model used. */
  model: 'linear' | 'intermediate'
  lines: ({
    line: number
    /** Null for a line given in the request. */
    transition: string | null
    kind: Kind
    name: string
    /** Without field, from the levels. */
    wavenumber_invcm: number
    wavelength_vac_nm: number
    wavelength_air_nm: number | null
    /** In which its wavelengths were read; null where none were given. */
    medium: 'air' | 'vacuum' | null
    /** Wavenumber that separations in wavelength were taken from; null where none were. */
    reference_invcm: number | null
  })[]
  /** Why the data do not fix what is asked, and what to add. */
  reasons: {
    code: string
    detail: string
  }[]
}

/** positions: places in the spectrum. separations: distances from one place in each line, which need not be its centre; to the red is below zero in wavenumber and frequency, above zero in wavelength. ring_radii: radii of the rings of a plane etalon. */
export type FitQuantity = 'positions' | 'separations' | 'ring_radii'

/** linear: the weak-field law. intermediate: diagonalised within the term. auto: intermediate where linear errs by more than the tolerance. */
export type Model = 'linear' | 'intermediate' | 'auto'

/** Which Landé factors are used: the adopted ones, those of the stated coupling, or those of LS coupling. */
export type GValues = 'adopted' | 'coupled' | 'ls'

/** Components keep one order over all fields: q, m_lower, j_lower, j_upper. */
export interface PredictionBlock {
  /** The line, or the line that named the multiplet; null for levels given inline. */
  transition: string | null
  model: 'linear' | 'intermediate'
  /** J by continuity from zero field; null where zero-field energies coincide. */
  j_lower: (number | null)[]
  j_upper: (number | null)[]
  m_lower: number[]
  m_upper: number[]
  q: number[]
  /** [field][component], in the quantity asked. */
  values: ((number | null)[])[]
  /** [field][component], per tesla; null where not asked. */
  derivatives: ((number | null)[])[] | null
  /** [component] in the linear model, [field][component] in the intermediate one; null where left out or where there is no LS amplitude. */
  strengths: number[] | number[][] | null
  /** Shaped as strengths: seen at theta_deg, a line summing to 1 at zero field; null where no angle is given. */
  intensities: number[] | number[][] | null
  /** line: each q sums to 1 at zero field. multiplet: everything sums to 1. */
  strength_normalisation: 'line' | 'multiplet'
  validity: PredictionValidity
}

/** How far the linear law may be trusted at the largest field asked, whichever model the block is in. */
export interface PredictionValidity {
  /** The largest field asked, which the errors are of. */
  field_tesla: number
  positions: {
    status: ValidityStatus
    relative_error: number | null
    tolerance: number
    /** Smallest field where the tolerance is passed; null where it never is or where that is not known. */
    field_limit_tesla: number | null
    error_invcm: number | null
  }
  strengths: {
    status: ValidityStatus
    relative_error: number | null
    tolerance: number
    /** Smallest field where the tolerance is passed; null where it never is or where that is not known. */
    field_limit_tesla: number | null
  }
  /** Centroid of the lines that are seen as one. */
  blend: {
    status: ValidityStatus
    relative_error: number | null
    tolerance: number
    /** Smallest field where the tolerance is passed; null where it never is or where that is not known. */
    field_limit_tesla: number | null
    error_invcm: number | null
  }
  method: string
}

/** Two levels: a transition of the table, or both levels inline. */
export type PredictionLine = {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string
} | {
  lower: InlineLevel
  upper: InlineLevel
}

/** Every line between two terms: named by any one of its lines, or by the levels of both terms. */
export type PredictionMultiplet = {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string
} | {
  /** The levels of one term: they share s, l and parity. */
  lower: InlineLevel[]
  /** The levels of one term: they share s, l and parity. */
  upper: InlineLevel[]
}

/** Fields one by one, or `count` of them evenly from start to stop, both included: start + i ((stop - start)/(count - 1)), the last one stop itself; a count of 1 is start. */
export type PredictionField = {
  values: number[]
  unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
} | {
  start: number
  stop: number
  count: number
  unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
}

/** What `values` are. Shifts are from the line without field; derivatives are in the same unit per tesla. Air wavelengths are null below 200 nm, wavelengths where the field has brought the upper sublevel to or below the lower one. */
export type PredictionQuantity = 'wavenumber_invcm' | 'shift_invcm' | 'wavelength_vac_nm' | 'wavelength_air_nm' | 'frequency_thz' | 'shift_ghz'

export interface FieldTable {
  /** The line that named the multiplet; null for levels given inline. */
  transition: string | null
  model: 'linear' | 'intermediate'
  /** Components as in POST /predictions: by q, m_lower, j_lower, j_upper. */
  j_lower: (number | null)[]
  j_upper: (number | null)[]
  m_lower: number[]
  m_upper: number[]
  q: number[]
  /** Upwards, from the first to the last field asked. */
  nodes_tesla: number[]
  /** [node][component]: wavenumbers. */
  positions_invcm: number[][]
  position_slopes_invcm_per_tesla: number[][]
  /** [node][component]; everything sums to 1. Null where the terms have no LS amplitude. */
  strengths: number[][] | null
  strength_slopes_per_tesla: number[][] | null
  strength_normalisation: 'multiplet'
  /** No interpolated position is farther from the model than this, rounding included. */
  max_error_invcm: number
  max_strength_error: number | null
  /** False only where levels coincide at zero field, so that the bounds do not hold in a last small interval beside it. */
  proved: boolean
  proof: string
  /** Of the numbers of the table; meta.conventions.checksum says of what exactly. */
  checksum_sha256: string
}

export interface Profiles {
  field_tesla: number
  theta_deg: number | null
  mode: 'emission' | 'absorption'
  analyser: Analyser
  grid: {
    unit: GridUnit
    start: number
    stop: number
    count: number
    /** Whether the grid was chosen to show the lines. */
    automatic: boolean
  }
  /** In the order of the grid: falling where it steps in wavelength. */
  wavenumber_invcm: number[]
  wavelength_vac_nm: number[]
  /** Null below 200 nm, where air does not apply. */
  wavelength_air_nm: (number | null)[]
  /** What the lines add (emission) or take away (absorption), in weight per cm^-1. */
  stokes_i: number[]
  /** Null without theta_deg. */
  stokes_q: number[] | null
  /** Null without theta_deg. */
  stokes_v: number[] | null
  /** What the lines add or take away behind the analyser; null where there is none. */
  behind_analyser: number[] | null
  lines: ProfiledLine[]
  /** What someone at the apparatus sees. */
  bench_sentence: string
}

/** Ideal analyser in front of the instrument: none, linear at an angle, or circular in either sense. */
export type Analyser = {
  kind: 'none'
} | {
  kind: 'linear'
  /** From the field projected on the sky. */
  angle_deg: number
} | {
  kind: 'circular'
  /** Turn of the electric vector that passes, as the observer sees it. */
  sense: 'counterclockwise' | 'clockwise'
}

/** Quantity in which a grid takes even steps. */
export type GridUnit = 'wavenumber_invcm' | 'vacuum_nm' | 'air_nm' | 'frequency_ghz'

export interface ProfiledLine {
  /** Null for a line given in the request. */
  transition: string | null
  /** Element and Roman stage. */
  species: string | null
  kind: Kind
  weight: number
  /** hyperfine: diagonalised with the nuclear spin, within one J. */
  model: 'linear' | 'intermediate' | 'hyperfine'
  wavenumber_invcm: number
  wavelength_vac_nm: number
  wavelength_air_nm: number | null
  component_count: number
  /** Integral of I of this line over wavenumber: its weight in the linear model; in the intermediate one strength flows between the lines of a multiplet. */
  integral: number
  /** Thermal motion and microturbulence. */
  doppler_fwhm_invcm: number
  instrument_fwhm_invcm: number
  /** Doppler and instrument in quadrature. */
  gaussian_fwhm_invcm: number
  lorentzian_fwhm_invcm: number
  /** Full width at half maximum of one component. */
  fwhm_invcm: number
  mass_u: number | null
  /** not_applicable: no temperature was given, so no mass is needed. */
  mass_status: 'ok' | 'unknown' | 'not_applicable'
  /** mean_of_isotopes: weighted by abundance. */
  mass_basis: 'given' | 'isotope' | 'mean_of_isotopes' | null
  /** The isotopes whose hyperfine structure is in the profile; empty without it. */
  isotopes: {
    mass_number: number
    /** Share of the line; weights sum to 1. */
    weight: number
    /** Of the line from that of the table. */
    shift_mhz: number
    /** False where none is stored, and 0 was taken. */
    shift_known: boolean
    /** Whether its components are those of a nucleus with spin. */
    hyperfine: boolean
  }[]
  validity: Validity
}

/** iau: V > 0 turns counter-clockwise as the observer sees it; solar: clockwise. */
export type StokesSign = 'iau' | 'solar'

export interface Conversion {
  value: number
  from: SpectralScale
  to: SpectralScale
  formula: AirFormula
  result: number | null
  result_status: ValueStatus
  wavenumber_invcm: number
  wavelength_vac_nm: number
  wavelength_air_nm: number | null
  wavelength_air_status: ValueStatus
  frequency_thz: number
  energy_ev: number
}

export type SpectralScale = 'vacuum_nm' | 'air_nm' | 'wavenumber_invcm' | 'frequency_thz' | 'energy_ev'

/** Dispersion formula of standard air (15 C, 101 325 Pa, dry). */
export type AirFormula = 'ciddor1996' | 'peck_reeder1972' | 'edlen1966'

export interface Edition {
  number: number
  label: string
  notes: string
  /** SHA-256 of the canonical content, hexadecimal: GET /editions/{n}/content is what it is made of. */
  checksum: string
  counts: {
    species: number
    levels: number
    sources: number
    measured_g: number
    isotopes: number
    hyperfine_constants: number
  }
  published_at: string
  /** Name of who published it. */
  published_by: string | null
  links: {
    self: string
    page: string
    levels: string
    changes: string
  }
}

export interface NextEdition {
  number: number
  /** Suggested. */
  label: string
  /** Suggested: written from the changes. */
  notes: string
  /** All that are accepted; send id and version with POST /editions to publish these and no others. */
  amendments: ({
    id: string
    title: string
    version: number
    author: PersonName
    reviewer: string | null
    changes: number
  })[]
  counts: {
    changes: number
    level: {
      create: number
      replace: number
      retire: number
    }
    source: {
      create: number
      replace: number
      retire: number
    }
    species: {
      create: number
      replace: number
      retire: number
    }
    isotope: {
      create: number
      replace: number
      retire: number
    }
    hyperfine: {
      create: number
      replace: number
      retire: number
    }
  }
  /** What stands in the way; at most 200. */
  conflicts: PublicationConflict[]
}

export interface PersonName {
  id: string
  name: string
}

export interface PublicationConflict {
  /** same_subject: two amendments change one thing. base_stale: it was changed by an edition since. Else the code of the error that the check of all of them together finds. */
  code: string
  kind: ChangeKind
  subject: string
  detail: string
  /** Every change that takes part, with its amendment. */
  changes: {
    amendment: {
      id: string
      title: string
    }
    change: string
    subject: string
  }[]
  /** base_stale: the revision that the change was made from. */
  base_revision: number | null
  /** base_stale: the revision in force. */
  current_revision: number | null
}

export type ChangeKind = 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'

export interface NewEdition {
  label: string
  /** Those that GET /editions/next suggests where they are left out. */
  notes?: string
  /** What was seen: where other amendments, or other versions of them, are accepted by now, nothing is published. */
  amendments?: {
    id: string
    version: number
  }[]
}

export interface Change {
  kind: ChangeKind
  /** Na-I.3, the key of a source, Na-I, Na-I/23, or Na-I.3/23 for hyperfine constants. */
  subject: string
  /** The level it is about; null where it is about none. */
  level: string | null
  /** Element and Roman stage. */
  species: string | null
  action: ComparedAction
  /** before: the value in edition since; after: the value in edition n. */
  fields: FieldDifference[]
}

/** What edition n shows against edition since. created: since does not have it. replaced: both have it, with other values. retired: it is retired in n. Where since is the later edition: restored: it is retired in since and not in n; absent: n does not have it yet. */
export type ComparedAction = 'created' | 'replaced' | 'retired' | 'restored' | 'absent'

export interface FieldDifference {
  field: string
  before?: unknown
  after?: unknown
}

export interface MappedLevel {
  /** Level in edition since; null for one that is new. */
  level_old: string | null
  /** The same level in edition n, or the active one at the end of its successors; null where nothing took its place. */
  level_new: string | null
  status: 'same' | 'changed' | 'retired' | 'created'
  /** Element and Roman stage. */
  species: string
  configuration: string
  /** Term symbol with J, of the new level where there is one. */
  term: string
  energy_old_invcm: number | null
  energy_new_invcm: number | null
  /** New minus old. */
  shift_invcm: number | null
  /** Adopted. */
  g_j_old: number | null
  g_j_new: number | null
}

export interface EditionContentDocument {
  constants: string
  content: {
    hyperfine_constants: {
      id: string
    }[]
    isotopes: {
      id: string
    }[]
    levels: {
      id: string
    }[]
    measured_g: {
      id: string
    }[]
    sources: {
      id: string
    }[]
    species: {
      id: string
    }[]
  }
  counts: Record<string, number>
  label: string
  notes: string
  number: number
}

export interface Citation {
  text: string
  bibtex: string
  /** One item of CSL-JSON. */
  csl_json: Record<string, unknown>
}

export interface FeedEntry {
  sequence: number
  edition: number
  kind: ChangeKind
  subject: string
  action: ChangeAction
  amendment: {
    id: string
    title: string
  }
}

export type ChangeAction = 'create' | 'replace' | 'retire'

export interface LevelRevision {
  revision: number
  /** The first edition that shows it. */
  edition: number
  edition_label: string
  published_at: Instant
  /** The first edition that shows it no more; null where it is in force. */
  until_edition: number | null
  action: 'created' | 'replaced' | 'retired' | 'restored'
  /** What differs from the revision before; empty for the first. */
  fields: FieldDifference[]
  /** Null for what a new installation was loaded with. */
  amendment: {
    id: string
    title: string
  } | null
  /** Names of those who wrote the amendment. */
  authors: string[]
  /** Name of who accepted it. */
  reviewer: string | null
  /** What was written with the change. */
  reason: string | null
  comment: string | null
}

/** ISO 8601 time with zone. */
export type Instant = string

export interface Source {
  key: string
  /** The reference as it was given with the value. */
  citation: string
  /** article, report, book, data sheet, abstract or other. */
  kind: string
  authors: string | null
  title: string | null
  journal: string | null
  year: number | null
  doi: string | null
  note: string | null
  /** How many values of the edition rest on this source. */
  used_by: {
    species: number
    levels: number
    measured_g: number
    isotopes: number
    hyperfine_constants: number
  }
}

export interface Find {
  /** Every part of the query and how it was understood. */
  understood: ({
    kind: 'species' | 'term' | 'configuration' | 'j' | 'parity' | 'wavelength' | 'energy' | 'g' | 'line_name' | 'level_name' | 'level_id' | 'text'
    /** The words of the query this part was read from. */
    text: string
    /** What they were taken to mean. */
    meaning: string
    /** The query with this part taken away. */
    without: string
  })[]
  /** Parts that can be read in more than one way; they are asked about, not guessed. */
  questions: {
    text: string
    options: {
      label: string
      q: string
    }[]
  }[]
  levels: Level[]
  levels_total: number
  lines: Transition[]
  lines_total: number
  lines_total_is_lower_bound: boolean
}

export interface ImportColumn {
  name: string
  unit: string | null
  /** Needed in a file that has no `id` column. */
  required: boolean
  description: string
}

export interface Import {
  id: string
  amendment: string
  author: PersonName
  file_name: string
  sha256: string
  bytes: number
  dry_run: boolean
  /** Only done has written anything, and a dry run never has. refused: rows or columns are wrong. interrupted: its process ended. */
  state: 'running' | 'done' | 'refused' | 'stopped' | 'failed' | 'interrupted'
  reading: ImportReading
  rows_total: number
  rows_done: number
  counts: {
    new: number
    changed: number
    same: number
    ambiguous: number
    error: number
  }
  /** What is wrong with the file as a whole. */
  problems: ImportProblem[]
  /** What happened, in a sentence. */
  summary: string
  created_at: Instant
  ended_at: Instant | null
}

export type ImportReading = {
  encoding: string
  delimiter: ',' | ';' | '	' | '|'
  decimal: '.' | ','
  columns: ({
    header: string
    /** Our column that it is read as; null where it is left out. */
    field: string | null
    /** Our column that it looks like, where it is not known and no mapping says: to be said by `mapping`. */
    suggestion: string | null
    /** Why it is left out, or read as it is. */
    note: string | null
    /** Its first values. */
    sample: string[]
  })[]
} | null

export interface ImportProblem {
  code: string
  detail: string
  column?: string
}

export interface ImportUpload {
  /** The table: a header row and at most 100000 rows, comma, semicolon, tab or bar between the cells, at most 64 MiB. */
  file: string
  /** Which header of the file is which of our columns: `{"Energy (cm-1)": "energy_invcm", "Remarks": null}`; null leaves a column out. Headers that are our own names need no mention. */
  mapping?: string
  /** Cells of columns that the file does not have, the same for every row: `{"species": "Fe-I", "energy_source": "a-key", "energy_evidence": "read"}`. */
  defaults?: string
  /** Name of the encoding, such as utf-8, utf-16le or windows-1252. */
  encoding?: string
  /** What stands between the cells, itself or by name. */
  delimiter?: ',' | ';' | '	' | '|' | 'comma' | 'semicolon' | 'tab' | 'bar'
  /** The decimal mark of numbers. */
  decimal?: '.' | ','
}

export interface ImportRow {
  /** Row of the file as a spreadsheet counts it, the header being row 1: line breaks inside of a cell do not count. */
  row: number
  verdict: ImportVerdict
  /** Species, dot, ordinal given at creation and never reused. */
  level: string | null
  findings: Finding[]
  fields: FieldDifference[]
}

/** new: a level to create. changed: a level of the table to replace. same: nothing differs. ambiguous: it could be several levels. error: it cannot be imported. */
export type ImportVerdict = 'new' | 'changed' | 'same' | 'ambiguous' | 'error'

export interface Finding {
  /** An error blocks submission; a warning wants a comment. */
  severity: 'error' | 'warning'
  /** What was found. Warnings: energy_moved, lines_moved, energy_above_ionisation, interval_ratio, g_far_from_coupled, digits_beyond_uncertainty, no_zero, values_dropped; everything else is an error. */
  code: string
  /** Name of the value it is about; null for the change as a whole. */
  field: string | null
  detail: string
}

export interface SignedIn {
  user: User
  expires_at: Instant
}

export interface User {
  id: string
  email: string
  name: string
  role: Role
}

/** reader reads and computes; curator also edits amendments; admin also publishes editions and manages people and keys. */
export type Role = 'reader' | 'curator' | 'admin'

export interface SignInRequest {
  email: string
  password: string
}

export interface Account {
  id: string
  email: string
  name: string
  role: Role
  /** The role of this request: narrower than the account's where the key is. */
  role_in_force: 'reader' | 'curator' | 'admin'
  /** An invented account of the demo. */
  demo: boolean
  created_at: Instant
  signed_in_by: 'session' | 'key'
  key: {
    id: string
    name: string
    expires_at: Instant | null
  } | null
}

export interface PasswordChange {
  /** The present one. */
  password: string
  /** 8 to 128 characters, no rules of composition, not a common one. */
  new_password: string
}

export interface ApiKey {
  id: string
  name: string
  /** Visible start of the key, to tell keys apart. */
  start: string
  role: Role
  owner: {
    id: string
    name: string
  }
  /** The key it was made with, which takes it along when it is revoked. */
  made_with: string | null
  state: 'active' | 'expired' | 'revoked'
  created_at: Instant
  expires_at: Instant | null
  revoked_at: Instant | null
  /** To the minute. */
  last_used_at: string | null
}

export interface NewKey {
  id: string
  name: string
  /** Visible start of the key, to tell keys apart. */
  start: string
  role: Role
  owner: {
    id: string
    name: string
  }
  /** The key it was made with, which takes it along when it is revoked. */
  made_with: string | null
  state: 'active' | 'expired' | 'revoked'
  created_at: Instant
  expires_at: Instant | null
  revoked_at: Instant | null
  /** To the minute. */
  last_used_at: string | null
  /** The key itself, shown this once; null where an Idempotency-Key repeats an earlier request. */
  key: string | null
}

export interface NewKeyRequest {
  name: string
  /** Your own role or a lower one; default your own. */
  role?: 'reader' | 'curator' | 'admin'
  /** When the key ends; null for never. */
  expires_at?: string | null
}

export interface PersonAccount {
  id: string
  email: string
  name: string
  role: Role
  /** False: the account is closed, its sessions have ended and its keys are revoked. */
  active: boolean
  /** Whether it has a password; the account of the command line has none. */
  signs_in: boolean
  demo: boolean
  keys_in_use: number
  /** In a browser, to the minute. */
  last_seen_at: string | null
  created_at: Instant
  updated_at: Instant
  /** For If-Match. */
  etag: string
}

export interface PersonChanges {
  name?: string
  /** In force at once, in sessions and keys too. */
  role?: 'reader' | 'curator' | 'admin'
  /** false ends all sessions and revokes all keys at once, for good; true lets the person sign in again. */
  active?: boolean
}

export interface Invitation {
  id: string
  email: string
  name: string
  role: Role
  state: 'open' | 'accepted' | 'revoked' | 'expired'
  invited_by: PersonName
  created_at: Instant
  expires_at: Instant
  accepted_at: Instant | null
  accepted_by: PersonName | null
  revoked_at: Instant | null
  /** For If-Match. */
  etag: string
}

export interface NewInvitation {
  email: string
  name: string
  role: Role
}

/** What the holder of the link is offered. */
export interface InvitationOffer {
  email: string
  name: string
  role: Role
  invited_by: string
  expires_at: Instant
}

export interface InvitationToken {
  /** Out of the link in the mail. */
  token: string
}

export interface InvitationAcceptance {
  /** Out of the link in the mail. */
  token: string
  /** Default: the name in the invitation. */
  name?: string
  /** 8 to 128 characters, no rules of composition, not a common one. */
  password: string
}

export interface PasswordResetRequest {
  email: string
}

export interface PasswordReset {
  /** Out of the link in the mail. */
  token: string
  /** 8 to 128 characters, no rules of composition, not a common one. */
  new_password: string
}

export interface Follow {
  id: string
  kind: 'species' | 'level' | 'line'
  subject: string
  /** Whether the latest edition holds it, or one of its levels, as retired. */
  retired: boolean
  created_at: Instant
  /** For If-Match. */
  etag: string
}

export interface NewFollow {
  /** May be left out: the form of the subject tells it. */
  kind?: 'species' | 'level' | 'line'
  /** A species, level or line: Na-I, Na-I.3, Na-I.1~Na-I.3. */
  subject: string
}

export interface Webhook {
  id: string
  name: string
  url: string
  events: WebhookEvent[]
  /** Nothing is sent while it is off, and what happens meanwhile is not sent later. */
  active: boolean
  owner: PersonName
  created_at: Instant
  /** For If-Match. */
  etag: string
  /** Deliveries still to be made. */
  waiting: number
  last_delivered_at: Instant | null
}

export type WebhookEvent = 'review.asked' | 'review.returned' | 'review.accepted' | 'edition.published'

export interface NewWebhookAnswer {
  id: string
  name: string
  url: string
  events: WebhookEvent[]
  /** Nothing is sent while it is off, and what happens meanwhile is not sent later. */
  active: boolean
  owner: PersonName
  created_at: Instant
  /** For If-Match. */
  etag: string
  /** Deliveries still to be made. */
  waiting: number
  last_delivered_at: Instant | null
  /** Key of the HMAC-SHA256 in Lodeterm-Signature, shown this once; null where an Idempotency-Key repeats an earlier request. */
  secret: string | null
}

export interface NewWebhook {
  name: string
  /** http or https, without name and password; it must resolve to public addresses only, unless the server is set to allow others. */
  url: string
  events: WebhookEvent[]
}

export interface WebhookChanges {
  name?: string
  /** http or https, without name and password; it must resolve to public addresses only, unless the server is set to allow others. */
  url?: string
  events?: WebhookEvent[]
  active?: boolean
}

export interface WebhookDelivery {
  /** Sent as Lodeterm-Delivery; the same in every attempt. */
  id: string
  /** A webhook event, or ping. */
  event: string
  state: 'waiting' | 'delivered' | 'failed'
  attempts: number
  created_at: Instant
  next_attempt_at: Instant | null
  delivered_at: Instant | null
  failed_at: Instant | null
  response_status: number | null
  /** What went wrong at the last attempt; never anything that the other side sent. */
  last_error: string | null
}

export interface OutboxMail {
  id: string
  at: Instant
  from: string
  to: string[]
  subject: string
  text: string
}

export interface Amendment {
  id: string
  title: string
  note: string
  state: AmendmentState
  author: PersonName
  /** Everyone who wrote or edited a change of it: none of them may accept it. */
  authors: PersonName[]
  counts: {
    changes: number
    /** Changes with errors. */
    errors: number
    /** Changes with warnings. */
    warnings: number
    /** Changes with warnings and no comment of their own. */
    uncommented: number
    open_comments: number
  }
  /** The last one. */
  review: {
    id: string
    /** Version of the amendment that it speaks for. */
    version: number
    asked_by: PersonName
    asked_at: Instant
    comment: string
    /** Null while it is open. edited: the amendment was edited before it was given. */
    outcome: 'accepted' | 'returned' | 'withdrawn' | 'edited' | null
    closed_by: PersonName | null
    closed_at: Instant | null
    closing_comment: string | null
    /** Who edited the amendment after it was accepted: the acceptance no longer holds, and stays on record. */
    voided: {
      by: PersonName
      at: Instant
    } | null
  } | null
  published_in: number | null
  version: number
  /** For If-Match. */
  etag: string
  created_at: Instant
  updated_at: Instant
}

/** A returned amendment is a draft again; reviews tell of the return. */
export type AmendmentState = 'draft' | 'in_review' | 'accepted' | 'published' | 'withdrawn'

export interface AmendmentDetail {
  id: string
  title: string
  note: string
  state: AmendmentState
  author: PersonName
  /** Everyone who wrote or edited a change of it: none of them may accept it. */
  authors: PersonName[]
  counts: {
    changes: number
    /** Changes with errors. */
    errors: number
    /** Changes with warnings. */
    warnings: number
    /** Changes with warnings and no comment of their own. */
    uncommented: number
    open_comments: number
  }
  /** The last one. */
  review: {
    id: string
    /** Version of the amendment that it speaks for. */
    version: number
    asked_by: PersonName
    asked_at: Instant
    comment: string
    /** Null while it is open. edited: the amendment was edited before it was given. */
    outcome: 'accepted' | 'returned' | 'withdrawn' | 'edited' | null
    closed_by: PersonName | null
    closed_at: Instant | null
    closing_comment: string | null
    /** Who edited the amendment after it was accepted: the acceptance no longer holds, and stays on record. */
    voided: {
      by: PersonName
      at: Instant
    } | null
  } | null
  published_in: number | null
  version: number
  /** For If-Match. */
  etag: string
  created_at: Instant
  updated_at: Instant
  /** All of them, the oldest first. */
  reviews: Review[]
  possible: {
    edit: {
      allowed: boolean
      reason: string | null
    }
    submit: {
      allowed: boolean
      reason: string | null
    }
    accept: {
      allowed: boolean
      reason: string | null
    }
    return: {
      allowed: boolean
      reason: string | null
    }
    withdraw: {
      allowed: boolean
      reason: string | null
    }
  }
}

export interface Review {
  id: string
  /** Version of the amendment that it speaks for. */
  version: number
  asked_by: PersonName
  asked_at: Instant
  comment: string
  /** Null while it is open. edited: the amendment was edited before it was given. */
  outcome: 'accepted' | 'returned' | 'withdrawn' | 'edited' | null
  closed_by: PersonName | null
  closed_at: Instant | null
  closing_comment: string | null
  /** Who edited the amendment after it was accepted: the acceptance no longer holds, and stays on record. */
  voided: {
    by: PersonName
    at: Instant
  } | null
}

export interface NewAmendment {
  title: string
  note?: string
}

export interface AmendmentChanges {
  title?: string
  note?: string
}

export interface AmendmentChange {
  id: string
  amendment: string
  kind: ChangeKind
  action: ChangeAction
  /** Na-I.3, the key of a source, Na-I, Na-I/23, or Na-I.3/23 for hyperfine constants. A new level has its ordinal from the start. */
  subject: string
  /** Element and Roman stage. */
  species: string | null
  /** Species, dot, ordinal given at creation and never reused. */
  level: string | null
  /** As they were written. */
  values: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  reason: string | null
  /** Species, dot, ordinal given at creation and never reused. */
  successor: string | null
  comment: string | null
  /** Revision that it was made from; null where the subject was not in the table. */
  base_revision: number | null
  /** Revision that the newest edition holds; where it is another than base_revision there is a finding base_stale. */
  current_revision: number | null
  /** The values of the newest edition. */
  before: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  /** The values as read; null where they cannot be, or the level is retired. */
  after: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  /** What differs between before and after. */
  fields: FieldDifference[]
  findings: Finding[]
  /** Who wrote it last. */
  author: {
    id: string
    name: string
  }
  /** Line of the imported file that it came from. */
  import_row: number | null
  version: number
  /** For If-Match of PUT and DELETE. */
  etag: string
  created_at: Instant
  updated_at: Instant
}

/** All values of a level: a change replaces the whole row, and what is left out is empty afterwards. */
export interface LevelValues {
  configuration?: string | null
  /** Coupling the level is named in: LS, J1K, jj, unassigned. LS where it is left out. */
  coupling?: string | null
  /** Term symbol with J, label before it where there is one: 2P*3/2, z5P*2, 2[3/2]*2, (1/2,3/2)*2; J=3/2* for an unassigned level. */
  term?: string | null
  /** J1K and jj coupling: the term of the core with its J. */
  core?: string | null
  /** J1K and jj coupling: l of the outer electron. */
  l_outer?: number | string | null
  repeat_index?: number | string | null
  alternative_name?: string | null
  /** The digits the source printed. */
  energy_literal?: string | null
  /** Energy above the ground level; read from energy_literal where that is given alone. */
  energy_invcm?: number | string | null
  /** One standard deviation; null is unknown. */
  energy_unc_invcm?: number | string | null
  /** Key of a source. */
  energy_source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  energy_evidence?: string | null
  /** For a level with one measured g_J; measured_g takes several. */
  g_j_measured?: number | string | null
  g_j_measured_unc?: number | string | null
  /** Key of a source. */
  g_source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  g_evidence?: string | null
  /** All measured g_J of the level. */
  measured_g?: MeasuredGValues[] | null
  /** A g_J that goes before measured and coupled ones, with the reason. */
  g_j_chosen?: number | string | null
  g_j_chosen_reason?: string | null
  line_checked?: boolean | null
  note?: string | null
}

/** One measured g_J. */
export interface MeasuredGValues {
  value?: number | string | null
  unc?: number | string | null
  literal?: string | null
  /** Key of a source. */
  source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  evidence?: string | null
  note?: string | null
}

export interface SourceValues {
  citation?: string | null
  kind?: string | null
  authors?: string | null
  title?: string | null
  journal?: string | null
  year?: number | string | null
  doi?: string | null
  note?: string | null
}

/** Element, nuclear charge and charge follow from the identifier. */
export interface SpeciesValues {
  name?: string | null
  core_configuration?: string | null
  ionisation_energy_invcm?: number | string | null
  /** Key of a source. */
  ionisation_source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  ionisation_evidence?: string | null
  note?: string | null
}

export interface IsotopeValues {
  mass_u?: number | string | null
  /** 3/2 or 1.5. */
  nuclear_spin?: number | string | null
  abundance_percent?: number | string | null
  /** In units of mu_B, negative for a positive moment. */
  g_i?: number | string | null
  /** Key of a source. */
  source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  evidence?: string | null
  note?: string | null
}

export interface HyperfineValues {
  a_mhz?: number | string | null
  a_unc_mhz?: number | string | null
  b_mhz?: number | string | null
  b_unc_mhz?: number | string | null
  /** Key of a source. */
  source?: string | null
  /** How far the value was checked: read, quoted, recalled, computed. */
  evidence?: string | null
  note?: string | null
}

export interface AmendmentChangeDetail {
  id: string
  amendment: string
  kind: ChangeKind
  action: ChangeAction
  /** Na-I.3, the key of a source, Na-I, Na-I/23, or Na-I.3/23 for hyperfine constants. A new level has its ordinal from the start. */
  subject: string
  /** Element and Roman stage. */
  species: string | null
  /** Species, dot, ordinal given at creation and never reused. */
  level: string | null
  /** As they were written. */
  values: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  reason: string | null
  /** Species, dot, ordinal given at creation and never reused. */
  successor: string | null
  comment: string | null
  /** Revision that it was made from; null where the subject was not in the table. */
  base_revision: number | null
  /** Revision that the newest edition holds; where it is another than base_revision there is a finding base_stale. */
  current_revision: number | null
  /** The values of the newest edition. */
  before: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  /** The values as read; null where they cannot be, or the level is retired. */
  after: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  /** What differs between before and after. */
  fields: FieldDifference[]
  findings: Finding[]
  /** Who wrote it last. */
  author: {
    id: string
    name: string
  }
  /** Line of the imported file that it came from. */
  import_row: number | null
  version: number
  /** For If-Match of PUT and DELETE. */
  etag: string
  created_at: Instant
  updated_at: Instant
  /** Which lines move and which g_eff change; null for a change that is not of a level, or that cannot be read. At most 50 lines. */
  consequences: {
    /** The edition compared with: the newest. */
    edition: number
    counts: {
      moved: number
      g_changed: number
      new: number
      gone: number
    }
    /** Allowed E1 lines, those that move most first; counts tell of all. */
    lines: LineConsequence[]
    /** Whether lines holds all that counts tells of. */
    complete: boolean
  } | null
}

export interface LineConsequence {
  /** lower~upper; lower is the level of lower energy in the edition read. */
  transition: string
  kind: 'E1' | 'M1' | 'E2'
  /** moved: its position changes (and perhaps its g_eff). */
  effect: 'moved' | 'g_changed' | 'new' | 'gone'
  wavenumber_before_invcm: number | null
  wavenumber_after_invcm: number | null
  /** After minus before. */
  shift_invcm: number | null
  /** Conventional: air from 200 to 2000 nm, vacuum outside. */
  wavelength_before_nm: number | null
  wavelength_after_nm: number | null
  /** What wavelength_before_nm is in. */
  medium_before: 'air' | 'vacuum' | null
  /** What wavelength_after_nm is in. */
  medium_after: 'air' | 'vacuum' | null
  /** After minus before, of vacuum wavelengths where the medium differs. */
  shift_pm: number | null
  g_eff_before: number | null
  g_eff_after: number | null
}

export interface ChangeRequest {
  /** level where it is left out. */
  kind?: 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'
  action: ChangeAction
  /** Element and Roman stage. */
  species?: string
  /** Species, dot, ordinal given at creation and never reused. */
  level?: string
  /** Key of the source: small letters, digits, hyphens. */
  source?: string
  mass_number?: number
  /** LevelValues, SourceValues, SpeciesValues, IsotopeValues or HyperfineValues, by kind. Not for retire. */
  values?: Record<string, unknown>
  /** Why; a level is retired with a reason. */
  reason?: string | null
  /** The level that takes the place of a retired one. */
  successor?: string | null
  /** Why a warning is no ground to hold the change back. */
  comment?: string | null
  /** Revision of the subject that the values were made from; null: made when it was not in the table. Where it is not the one in force nothing is written. Left out: the one in force for a new change, and the one stored for an edit; to state the one in force brings an edited change up to date. */
  base_revision?: number | null
}

export interface CheckedBatch {
  changes: CheckedChange[]
}

export interface CheckedChange {
  subject: string | null
  action: ChangeAction
  before: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  after: LevelValues | SourceValues | SpeciesValues | IsotopeValues | HyperfineValues | null
  fields: FieldDifference[]
  findings: Finding[]
}

/** Written together or not at all. */
export interface ChangeBatch {
  changes: BatchItem[]
  remove?: {
    change: string
    etag: string
  }[]
}

export interface BatchItem {
  /** level where it is left out. */
  kind?: 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'
  action: ChangeAction
  /** Element and Roman stage. */
  species?: string
  /** Species, dot, ordinal given at creation and never reused. */
  level?: string
  /** Key of the source: small letters, digits, hyphens. */
  source?: string
  mass_number?: number
  /** LevelValues, SourceValues, SpeciesValues, IsotopeValues or HyperfineValues, by kind. Not for retire. */
  values?: Record<string, unknown>
  /** Why; a level is retired with a reason. */
  reason?: string | null
  /** The level that takes the place of a retired one. */
  successor?: string | null
  /** Why a warning is no ground to hold the change back. */
  comment?: string | null
  /** Revision of the subject that the values were made from; null: made when it was not in the table. Where it is not the one in force nothing is written. Left out: the one in force for a new change, and the one stored for an edit; to state the one in force brings an edited change up to date. */
  base_revision?: number | null
  change?: string
  etag?: string
  unanswered?: UnansweredChange
}

/** What the same account sent before of the same subject and has no answer to. Where exactly that stands there by now, as the version right after `etag` (without change: as the first), the item is written upon it; anything else that came between is refused as ever. For a writer that cannot wait, such as a page that closes. */
export interface UnansweredChange {
  action: ChangeAction
  /** LevelValues, SourceValues, SpeciesValues, IsotopeValues or HyperfineValues, by kind. Not for retire. */
  values?: Record<string, unknown>
  reason?: string | null
  /** The level that takes the place of a retired one. */
  successor?: string | null
  comment?: string | null
}

export interface WrittenBatch {
  /** Those written, in the order given. */
  changes: AmendmentChange[]
  removed: string[]
}

export interface Consequences {
  /** The edition compared with: the newest. */
  edition: number
  counts: {
    moved: number
    g_changed: number
    new: number
    gone: number
  }
  /** Allowed E1 lines, those that move most first; counts tell of all. */
  lines: LineConsequence[]
  /** Whether lines holds all that counts tells of. */
  complete: boolean
}

export interface Statement {
  comment?: string
}

export interface Comment {
  id: string
  amendment: string
  change: string | null
  /** First comment of the thread; null for the first itself. */
  thread: string | null
  author: PersonName
  text: string
  created_at: Instant
  resolved_at: Instant | null
  resolved_by: PersonName | null
  version: number
  /** For If-Match. */
  etag: string
}

export interface NewComment {
  text: string
  change?: string
  thread?: string
}

export interface CommentChange {
  resolved: boolean
}

export interface Tasks {
  /** Drafts with changes of yours that were not returned. */
  drafts: Amendment[]
  /** Yours, returned by a reviewer. */
  returned: Amendment[]
  /** Yours, waiting for a colleague. */
  in_review: Amendment[]
  /** Waiting for a review that you can give. */
  to_review: Amendment[]
  /** Accepted and waiting for an edition. */
  accepted: Amendment[]
  /** Whether all of it is here: of more than 500 open amendments only those touched last are looked at, and GET /amendments lists them all. */
  complete: boolean
  /** Open comment threads on amendments of yours. */
  open_threads: number
}

export interface LevelValuesOf {
  /** Species, dot, ordinal given at creation and never reused. */
  level: string
  revision: number
  edition: number
  values: LevelValues
}

export interface AuditEvent {
  id: number
  at: Instant
  action: string
  /** Null for what the command line of the server did, and for a link out of a mail. */
  actor: {
    id: string
    name: string
  } | null
  /** The key it was done with. */
  key: string | null
  key_name: string | null
  /** The browser session it was done in. */
  session: string | null
  subject: {
    kind: string
    id: string | null
  }
  /** What it was; null where there was nothing. */
  before?: unknown
  after?: unknown
  ip: string | null
  request_id: string | null
}

export interface Live {
  status: 'ok'
}

export interface Ready {
  status: 'ok'
  checks: {
    database: 'ok'
    /** Newest edition. */
    edition: number
  }
}

export interface OpenApiDocument {
  openapi: string
  info: {
    title: string
    version: string
  }
}

export interface Operations {
  /** All species of an edition */
  listSpecies: {
    method: 'get'
    path: '/species'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Species[]
      meta: Meta
      page: Page
    }
  }
  /** One species: name, stage, ionisation energy, isotopes, number of levels, sources */
  getSpecies: {
    method: 'get'
    path: '/species/{species}'
    parameters: {
      /** Species: element and Roman stage. */
      species: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Species
      meta: Meta
    }
  }
  /** Levels by species, term, J, energy, g_J, source, or in words. A level whose value is not known never matches a bound on that value; how many were left out so is counted in meta.excluded. */
  listLevels: {
    method: 'get'
    path: '/levels'
    parameters: {
      /** Species; may be given several times. */
      species?: string | string[]
      /** Words: ion, configuration, term in any notation, level name. */
      q?: string | number
      /** Term symbol: 2P matches either parity, 2P* odd only, z5P* the label too; with J (2P*3/2) that J only. */
      term?: string | number
      /** Total spin S. */
      s?: string | number
      /** Total orbital angular momentum L. */
      l?: number
      /** Total angular momentum J. */
      j?: string | number
      /** Parity. */
      parity?: 'even' | 'odd'
      /** Configuration, with or without dots and spaces. */
      configuration?: string | number
      /** Lowest energy. */
      energy_min_invcm?: number
      /** Highest energy. */
      energy_max_invcm?: number
      /** Smallest adopted g_J. */
      g_min?: number
      /** Largest adopted g_J. */
      g_max?: number
      /** Key of a source that a value of the level rests on. */
      source?: string | number
      /** Order of the rows. */
      sort?: 'energy' | '-energy' | 'j' | 'g' | 'species'
      /** List what default filters and rules took out, not only how many, in meta.explained. */
      explain?: true | false
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Level[]
      meta: Meta
      page: Page
    }
  }
  /** One level with every value, its source and evidence */
  getLevel: {
    method: 'get'
    path: '/levels/{level}'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: LevelDetail
      meta: Meta
    }
  }
  /** g_J: adopted, coupled (exact and real), measured, and how it is derived */
  getGFactor: {
    method: 'get'
    path: '/levels/{level}/g-factor'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: GFactor
      meta: Meta
    }
  }
  /** Energies of the sublevels at a field, one row per m. model=auto diagonalises within the LS term where the linear law errs by more than the tolerance; meta.validity tells by how much. With hyperfine=true the sublevels F, m_F of one isotope, by full diagonalisation in |m_J, m_I>. */
  getSublevels: {
    method: 'get'
    path: '/levels/{level}/sublevels'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** Magnetic field from 0 to 10000 T: a number with T, mT, µT (or uT), G or kG; a bare number is tesla. */
      field: string | number
      /** linear: the weak-field law; intermediate: diagonalised within the term; auto: intermediate where linear errs by more than the tolerance. */
      model?: 'auto' | 'linear' | 'intermediate'
      /** Landé factors to use: adopted, of the stated coupling, or of LS coupling. */
      g_values?: 'adopted' | 'coupled' | 'ls'
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number
      /** Relative error above which the linear law counts as not valid. */
      tolerance?: number
      /** Add the quadratic (diamagnetic) shift, where one electron outside closed shells allows it to be computed. */
      diamagnetic?: true | false
      /** Put hyperfine structure in, diagonalised in full within one J for an isotope. */
      hyperfine?: true | false
      /** Isotope by its mass number, with hyperfine=true. Without it the only isotope with constants is taken. */
      isotope?: number
      /** Tell the amplitudes of each state. */
      amplitudes?: true | false
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: (Sublevel | HyperfineSublevel)[]
      meta: Meta
      page: Page
    }
  }
  /** Where two sublevels cross, come nearest, or keep their distance to first order in the field. By root finding on analytic slopes between two fields: hyperfine sublevels (F, m_F) of the level for one isotope, or, without hyperfine=true, sublevels (J, m) of its LS term. */
  getCrossings: {
    method: 'get'
    path: '/levels/{level}/crossings'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** First sublevel: F,m_F with hyperfine=true, else J,m of the level's term. */
      a: string | number
      /** Second sublevel: F,m_F with hyperfine=true, else J,m of the level's term. */
      b: string | number
      /** Where to begin, as a field with its unit. */
      from?: string | number
      /** Where to end, as a field with its unit. */
      to: string | number
      /** Put hyperfine structure in, diagonalised in full within one J for an isotope. */
      hyperfine?: true | false
      /** Isotope by its mass number, with hyperfine=true. Without it the only isotope with constants is taken. */
      isotope?: number
      /** Landé factors to use: adopted, of the stated coupling, or of LS coupling. */
      g_values?: 'adopted' | 'coupled' | 'ls'
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Crossings
      meta: Meta
    }
  }
  /** Allowed partners of a level; the others too, with the rules that fail. Without kind each pair is judged as E1 where the parities differ, else M1, else E2. What the rules leave out is counted in meta.excluded. */
  listLevelTransitions: {
    method: 'get'
    path: '/levels/{level}/transitions'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** Kind of transition. Default: E1 where the parities differ, else M1, else E2. */
      kind?: 'E1' | 'M1' | 'E2'
      /** ls: lines that meet the LS rules too, where they apply; rigorous: intercombination lines as well, marked. */
      rules?: 'ls' | 'rigorous'
      /** forbidden: list the pairs that fail as well. */
      include?: 'allowed' | 'forbidden'
      /** List what default filters and rules took out, not only how many, in meta.explained. */
      explain?: true | false
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Transition[]
      meta: Meta
      page: Page
    }
  }
  /** Lines in a window of wavelength, wavenumber or frequency, over all species. Sorted by wavenumber. With rules=ls, which is the default, intercombination lines are left out and counted in meta.excluded; rules=rigorous lists them, marked. */
  listTransitions: {
    method: 'get'
    path: '/transitions'
    parameters: {
      /** Species; may be given several times. */
      species?: string | string[]
      /** Kind of transition. */
      kind?: 'E1' | 'M1' | 'E2'
      /** ls: lines that meet the LS rules too, where they apply; rigorous: intercombination lines as well, marked. */
      rules?: 'ls' | 'rigorous'
      /** Shortest wavelength, in the medium given. */
      wavelength_min_nm?: number
      /** Longest wavelength, in the medium given. */
      wavelength_max_nm?: number
      /** Medium of wavelengths. conventional: air from 200 to 2000 nm (judged on the vacuum value), vacuum outside. */
      medium?: 'conventional' | 'air' | 'vacuum'
      /** Smallest wavenumber. */
      wavenumber_min_invcm?: number
      /** Largest wavenumber. */
      wavenumber_max_invcm?: number
      /** Lowest frequency. */
      frequency_min_thz?: number
      /** Highest frequency. */
      frequency_max_thz?: number
      /** Smallest effective Landé factor. */
      g_eff_min?: number
      /** Largest effective Landé factor. */
      g_eff_max?: number
      /** List what default filters and rules took out, not only how many, in meta.explained. */
      explain?: true | false
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Transition[]
      meta: Meta
      page: Page
    }
  }
  /** One line or forbidden pair: both levels, every rule with its verdict, wavelengths, g_eff, moments, pattern */
  getTransition: {
    method: 'get'
    path: '/transitions/{transition}'
    parameters: {
      /** Transition: two levels with ~ between them, in either order. */
      transition: string | number
      /** Kind of transition. Default: E1 where the parities differ, else M1, else E2. */
      kind?: 'E1' | 'M1' | 'E2'
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: TransitionDetail
      meta: Meta
    }
  }
  /** Components of a line at a field: positions, polarisation, strength, intensity, and how far the model holds. q = m_upper - m_lower, for absorption and emission alike; a positive shift is to higher wavenumber, to the blue. Strengths of each q sum to 1 at zero field. model=auto diagonalises within both LS terms where the linear law errs by more than the tolerance in positions or strengths. With hyperfine=true the components of one isotope, or of the natural mixture (isotope=natural), between sublevels F, m_F. */
  getComponents: {
    method: 'get'
    path: '/transitions/{transition}/components'
    parameters: {
      /** Transition: two levels with ~ between them, in either order. */
      transition: string | number
      /** Magnetic field from 0 to 10000 T: a number with T, mT, µT (or uT), G or kG; a bare number is tesla. */
      field: string | number
      /** One standard deviation of the field, as a field with its unit; without it the field is exact. */
      field_unc?: string | number
      /** Kind of transition. Default: E1 where the parities differ, else M1, else E2. */
      kind?: 'E1' | 'M1' | 'E2'
      /** linear: the weak-field law; intermediate: diagonalised within the term; auto: intermediate where linear errs by more than the tolerance. */
      model?: 'auto' | 'linear' | 'intermediate'
      /** Landé factors to use: adopted, of the stated coupling, or of LS coupling. */
      g_values?: 'adopted' | 'coupled' | 'ls'
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number
      /** Angle between the field and the direction from source to observer; without it intensities are averaged over angle. */
      theta_deg?: number
      /** Medium of wavelengths. conventional: air from 200 to 2000 nm (judged on the vacuum value), vacuum outside. */
      medium?: 'conventional' | 'air' | 'vacuum'
      /** Relative error above which the linear law counts as not valid. */
      tolerance?: number
      /** Add the quadratic (diamagnetic) shift, where one electron outside closed shells allows it to be computed. */
      diamagnetic?: true | false
      /** Put hyperfine structure in, diagonalised in full within one J for an isotope. */
      hyperfine?: true | false
      /** Isotope by its mass number, or natural for the mixture by abundance, with hyperfine=true. Without it the only isotope with constants is taken. */
      isotope?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Components | HyperfineComponents
      meta: Meta
    }
  }
  /** Judge two levels given in the request */
  judgeTransition: {
    method: 'post'
    path: '/transitions/judge'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: {
      lower: InlineLevel
      upper: InlineLevel
      kind?: 'E1' | 'M1' | 'E2' | null
      g_s?: number | null
    }
    answer: {
      data: JudgedTransition
      meta: Meta
    }
  }
  /** A bare term symbol decoded without the table */
  decodeTerm: {
    method: 'get'
    path: '/terms/{symbol}'
    parameters: {
      /** Term symbol with or without J: 2P*3-2, 3P2, 5D4, ²P°₃/₂; * marks odd parity, and - may stand for the / of a half-integer. */
      symbol: string | number
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: DecodedTerm
      meta: Meta
    }
  }
  /** Sublevels of one LS term, or of one level with its nucleus, given in the request, over fields. Either `levels` of one LS term, or `level` with `nucleus` (hyperfine structure, diagonalised in full). model=auto diagonalises within the term where the linear law of some level errs by more than the tolerance at the largest field. */
  computeSublevels: {
    method: 'post'
    path: '/sublevels'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: {
      levels: InlineLevel[]
      field: string | number | {
        values: number[]
        unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
      }
      model?: 'auto' | 'linear' | 'intermediate'
      g_values?: 'adopted' | 'coupled' | 'ls'
      g_s?: number | null
      /** Relative error above which model=auto leaves the linear law; 0.01. */
      tolerance?: number | null
    } | {
      level: {
        j: number
        /** Null only for J = 0. */
        g_j?: number | null
      }
      nucleus: {
        i: number
        a_mhz: number
        /** Dropped where I or J is under 1. */
        b_mhz?: number | null
        /** g_I' in units of mu_B, negative for a positive moment; without it 0. */
        g_i?: number | null
      }
      field: string | number | {
        values: number[]
        unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
      }
    }
    answer: {
      data: SublevelMatrix | HyperfineMatrix
      meta: Meta
    }
  }
  /** A magnetic field from measured positions of components, with its uncertainty. Weighted least squares on centred data for one field and a free zero of each line. Components are assigned by hand (m_lower with m_upper), by polarisation (q), as a whole unresolved group (group), or automatically. model=auto fits by the linear law, and again by diagonalised terms where the linear law does not hold at the field found. Where the data do not fix the field the answer is 200 with status undetermined and says why. mode is positions; a fit to a whole spectrum is not built yet, and another mode is refused as spectrum_fit_not_built. Tables (csv, ndjson, arrow) hold the residuals, one row per measurement. Up to 20 lines and 300 measurements; assignments that would need too much work are refused as fit_too_large, and so are lines given level by level whose distinct multiplets have more than 30000 components between them. A field beyond 10 000 T is told as undetermined. */
  fitField: {
    method: 'post'
    path: '/field-fits'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'arrow'
    }
    body: {
      /** Edition to read: its number, or latest, which is the default. */
      edition?: number | 'latest'
      mode?: 'positions'
      /** field: one field over all lines. g: the field is known, and g_J of one or both levels of one line is wanted. */
      unknown?: 'field' | 'g'
      lines: ({
        transition: string
        kind?: Kind | null
        /** Lines with the same text share one zero, their distances taken from the levels; without it each line has a zero of its own. */
        zero?: string | null
      } | {
        lower: InlineLevel
        upper: InlineLevel
        /** The other levels of the term of the lower level, which the intermediate model needs. */
        lower_others?: InlineLevel[] | null
        /** The other levels of the term of the upper level, which the intermediate model needs. */
        upper_others?: InlineLevel[] | null
        kind?: Kind | null
        /** Lines with the same text share one zero, their distances taken from the levels; without it each line has a zero of its own. */
        zero?: string | null
      })[]
      quantity?: FitQuantity
      /** Of positions and separations; ring radii have none. */
      unit?: 'nm' | 'pm' | 'cm-1' | 'mcm-1' | 'GHz' | 'MHz' | null
      /** Of wavelengths; default conventional, judged on each line. */
      medium?: 'conventional' | 'air' | 'vacuum' | null
      etalon?: {
        /** Or give thickness_mm. */
        free_spectral_range_invcm?: number | null
        /** One standard deviation. */
        free_spectral_range_unc_invcm?: number | null
        /** Distance of the plates: the free spectral range is 1/(2 n t). */
        thickness_mm?: number | null
        refractive_index?: number
        /** Step of radius squared from one order to the next, for the first line; or give order_radii. That of the other lines follows, since it grows as the wavelength. */
        square_step?: number | null
        /** One standard deviation. */
        square_step_unc?: number | null
        /** Radii of one component of the first line in successive orders, from the inside: the step is found by least squares, with its deviation from the scatter where there are three. */
        order_radii?: number[] | null
      } | null
      measurements: ({
        /** Index of its line, from 0. */
        line?: number
        /** Position, separation or ring radius, in the unit given. */
        position: number
        /** One standard deviation in the same unit; for all measurements or for none. */
        position_unc?: number | null
        /** With m_upper: the component, assigned by hand. */
        m_lower?: number | null
        m_upper?: number | null
        /** Polarisation where it is known; sigma: either sense. The component is then found among these. */
        q?: number | 'sigma' | null
        /** The peak is the whole unresolved group of this q, at its centre of gravity. */
        group?: number | null
        /** Rings only: how many orders outwards from the innermost one used. */
        order?: number | null
      })[]
      scale?: {
        /** Measured = zero + scale x true distance. */
        value?: number
        /** One standard deviation: the scale is then fitted within it. Without it, or at 0, exact. */
        unc?: number | null
        /** Fitted without knowing anything of it, which needs lines that share a zero. */
        free?: boolean
      } | null
      model?: Model
      g_values?: GValues
      g_s?: number | null
      tolerance?: number
      /** Which polarisations can be seen, for automatic assignment; default all. */
      visible_q?: number[] | null
      /** Or the angle between field and line of sight: along the field only sigma is seen. */
      theta_deg?: number | null
      /** unknown=g: the field, with its unit; a bare number is tesla. */
      field?: string | number | null
      /** unknown=g: one standard deviation of it; without it exact. */
      field_unc?: string | number | null
      /** unknown=g: whose g_J is fitted; default upper. */
      free_g?: 'lower' | 'upper' | 'both' | null
    }
    answer: {
      data: FieldFit
      meta: Meta
    }
  }
  /** Components of many lines and multiplets over many fields. One block per line, then one per multiplet, in the order given. Components keep one order over all fields (q, m_lower, j_lower, j_upper). `model=auto` is decided once per block from the largest field asked and named in the block. JSON gives all blocks in data; NDJSON one block per row and a last row {"meta": ..., "complete": true}; Arrow one record batch per block and one row per component, with value, derivative, strength (and intensity) as fixed-size lists of float64 over the fields, units in the field metadata, and the field grid, the transition, the model and the validity in the metadata of the batch. Up to 5 000 000 values (fields times components) a request. Answers of any size are streamed; large ones wait for their turn beside those of other callers. */
  predict: {
    method: 'post'
    path: '/predictions'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'ndjson' | 'arrow'
    }
    body: {
      /** Edition to read: its number, or latest, which is the default. */
      edition?: number | 'latest'
      lines?: PredictionLine[]
      multiplets?: PredictionMultiplet[]
      field: PredictionField
      model?: Model
      g_values?: GValues
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number | null
      /** Angle between the field and the direction from source to observer: asks for intensities beside strengths. */
      theta_deg?: number | null
      /** Derivatives of the values with respect to the field. */
      derivatives?: boolean
      /** Off: positions alone, which is the fastest. */
      strengths?: boolean
      quantity?: PredictionQuantity
      /** Relative error above which the linear law counts as not valid. */
      tolerance?: number
    }
    answer: {
      data: PredictionBlock[]
      meta: Meta
    }
  }
  /** A multiplet over an interval of fields, to interpolate without the network. Nodes of field with positions, strengths and their slopes. Between two nodes a and b, with h = b - a and t = (B - a)/h, a value is v_a + (v_b - v_a) t^2 (3 - 2t) + h t (1 - t) ((1 - t) s_a - t s_b), which is cubic Hermite interpolation; max_error_invcm and max_strength_error are proved bounds of what it errs by. */
  makeFieldTable: {
    method: 'post'
    path: '/field-tables'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'arrow'
    }
    body: {
      /** Edition to read: its number, or latest, which is the default. */
      edition?: number | 'latest'
      multiplet: PredictionMultiplet
      field: {
        start: number
        stop: number
        unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
      }
      model?: 'intermediate' | 'linear'
      g_values?: GValues
      /** g factor of the electron spin; default: the CODATA value. */
      g_s?: number | null
      /** The largest error of an interpolated position that is let pass. */
      max_error_invcm?: number
      /** The same for strengths, of which all of the multiplet sum to 1. */
      max_strength_error?: number
    }
    answer: {
      data: FieldTable
      meta: Meta
    }
  }
  /** Stokes I, Q and V of several lines at one field, as an instrument shows them. Optically thin sums of Voigt profiles over the components of every line. The integral of I of a line over wavenumber is its weight. Widths: temperature with mass, microturbulence, instrument, Lorentzian; at least one is needed, none below 1e-15 of the wavenumber. Reversing the field (theta_deg to 180 - theta_deg) turns V and leaves I and Q. Up to 100 lines; the distinct multiplets of lines whose levels stand in the request have up to 30000 components between them, more is refused as answer_too_large. */
  computeProfiles: {
    method: 'post'
    path: '/profiles'
    parameters: {
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'arrow'
    }
    body: {
      /** Edition to read: its number, or latest, which is the default. */
      edition?: number | 'latest'
      lines: ({
        transition: string
        /** Integral of Stokes I over wavenumber, in any unit that all lines share. */
        weight?: number
        kind?: Kind | null
        /** Mass of this line's atom, before every other source of it. */
        mass_u?: number | null
      } | {
        lower: InlineLevel
        upper: InlineLevel
        /** The other levels of the term of the lower level, which the intermediate model needs. */
        lower_others?: InlineLevel[] | null
        /** The other levels of the term of the upper level, which the intermediate model needs. */
        upper_others?: InlineLevel[] | null
        /** Integral of Stokes I over wavenumber, in any unit that all lines share. */
        weight?: number
        kind?: Kind | null
        /** Mass of this line's atom, before every other source of it. */
        mass_u?: number | null
      })[]
      field: string | number | {
        values: number[]
        unit: 'T' | 'mT' | 'µT' | 'G' | 'kG'
      }
      model?: Model
      g_values?: GValues
      g_s?: number | null
      tolerance?: number
      /** Angle between the field and the direction from source to observer; without it intensities are averaged over angle, and there are no Q and V. */
      theta_deg?: number | null
      /** Mass number, of a species of the table: its mass broadens, and with hyperfine its structure is in the profile. natural: the isotopes listed, by abundance. */
      isotope?: number | 'natural' | null
      /** Put the hyperfine structure of the isotope into the profile; without isotope the natural mixture. */
      hyperfine?: boolean
      temperature_k?: number | null
      /** Mass of the atom for all lines; without it that of the isotope, or the mean of the isotopes listed. */
      mass_u?: number | null
      /** Most probable speed. */
      microturbulence_km_s?: number | null
      /** Full width at half maximum of the instrument; or give resolving_power. */
      instrument_fwhm_invcm?: number | null
      /** Wavenumber over the full width at half maximum of the instrument. */
      resolving_power?: number | null
      /** Natural and pressure width, full at half maximum. */
      lorentzian_fwhm_invcm?: number | null
      mode?: 'emission' | 'absorption'
      stokes_sign?: StokesSign
      analyser?: Analyser
      /** Even steps from start up to stop; without it a grid that shows the lines. */
      grid?: {
        start: number
        stop: number
        count: number
        unit?: 'wavenumber_invcm' | 'vacuum_nm' | 'air_nm' | 'frequency_ghz'
      } | null
    }
    answer: {
      data: Profiles
      meta: Meta
    }
  }
  /** Between vacuum and air wavelength, wavenumber, frequency and energy */
  convertWavelength: {
    method: 'get'
    path: '/wavelengths/convert'
    parameters: {
      /** The number to convert, above 0. */
      value: number
      /** Scale of the value. */
      from: 'vacuum_nm' | 'air_nm' | 'wavenumber_invcm' | 'frequency_thz' | 'energy_ev'
      /** Scale wanted. */
      to: 'vacuum_nm' | 'air_nm' | 'wavenumber_invcm' | 'frequency_thz' | 'energy_ev'
      /** Dispersion formula of standard air. */
      formula?: 'ciddor1996' | 'peck_reeder1972' | 'edlen1966'
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Conversion
      meta: Meta
    }
  }
  /** All editions, the newest first */
  listEditions: {
    method: 'get'
    path: '/editions'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Edition[]
      meta: Meta
      page: Page
    }
  }
  /** Publish all accepted amendments as the next edition, whole or not at all. Every check is run again on all accepted changes together, on the table as it would be. Where two of them conflict, or one was made from a revision that is no longer in force, nothing is published, and 409 names every conflict with its amendments and changes. With `amendments` exactly those versions are published, or nothing. */
  publishEdition: {
    method: 'post'
    path: '/editions'
    parameters: Record<string, never>
    body: NewEdition
    answer: {
      data: Edition
      meta: Meta
    }
  }
  /** What the next edition would be: amendments, counts, notes written from the changes, conflicts */
  previewNextEdition: {
    method: 'get'
    path: '/editions/next'
    parameters: Record<string, never>
    body: undefined
    answer: {
      data: NextEdition
      meta: Meta
    }
  }
  /** One edition: label, notes, counts, checksum */
  getEdition: {
    method: 'get'
    path: '/editions/{n}'
    parameters: {
      /** Number of the edition. */
      n: number
    }
    body: undefined
    answer: {
      data: Edition
      meta: Meta
    }
  }
  /** What changed since another edition, thing by thing, field by field. Edition n against edition since: `before` is the value in since, `after` the value in n. Either may be the later one; where since is later, the comparison runs backwards, and what n does not have yet is `absent`, what was retired in between `restored`. What came and went in between is not told. Sources first, then species, isotopes, levels and hyperfine constants in the order of the table. meta.total counts what the filters leave, meta.counts everything by kind and action. In CSV one row a field; what is new or absent has one row. */
  listEditionChanges: {
    method: 'get'
    path: '/editions/{n}/changes'
    parameters: {
      /** Number of the edition. */
      n: number
      /** Edition to compare with; 0 is the empty table. Default: the edition before. */
      since?: number
      /** Only this kind of thing. */
      kind?: 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'
      /** Only what this happened to. */
      action?: 'created' | 'replaced' | 'retired' | 'restored' | 'absent'
      /** Only what belongs to this species; may be given several times. */
      species?: string | string[]
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson'
    }
    body: undefined
    answer: {
      data: Change[]
      meta: Meta
      page: Page
    }
  }
  /** Where the levels of an earlier edition stand in this one, as a file for refits. Not paged: every active level of edition since with its place in edition n, then the levels that are new. same and changed: the same level, without and with other values. retired: level_new is the active level at the end of its successors, or empty. created: level_old is empty. Choose the form with format= or Accept: json, csv or ndjson. */
  getLevelMap: {
    method: 'get'
    path: '/editions/{n}/level-map'
    parameters: {
      /** Number of the edition. */
      n: number
      /** Earlier edition; 0 is the empty table. Default: the edition before. */
      since?: number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson'
    }
    body: undefined
    answer: {
      data: MappedLevel[]
      meta: Meta
    }
  }
  /** The whole table of an edition as a file. Not paged. Choose the form with format= or Accept: json, csv, ndjson, ecsv or arrow. */
  downloadEditionLevels: {
    method: 'get'
    path: '/editions/{n}/levels'
    parameters: {
      /** Number of the edition. */
      n: number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Level[]
      meta: Meta
    }
  }
  /** The canonical content of an edition: exactly the bytes that its checksum is made of. SHA-256 of the body, as it comes, is the edition's `checksum`: `curl -s .../editions/1/content | sha256sum`. The body is one JSON object in the canonical form of RFC 8785 (keys in order, no spaces, numbers as ECMAScript writes them, UTF-8): `constants` (edition of the fundamental constants), `content`, `counts`, `label`, `notes`, `number`. `content` has the arrays `hyperfine_constants`, `isotopes`, `levels` (retired ones too), `measured_g`, `sources`, `species`; each holds one flat object for each thing that the edition shows, in the order of its `id` (code units), several of one id in the order of their own canonical text. Angular momenta are twice their value (`two_j`), literals are text, what is not known is null. Whoever parses the body and writes it again by RFC 8785 gets the same bytes; `npm run verify-edition -- N --url ...` does so. */
  getEditionContent: {
    method: 'get'
    path: '/editions/{n}/content'
    parameters: {
      /** Number of the edition. */
      n: number
    }
    body: undefined
    answer: EditionContentDocument
  }
  /** How to cite an edition: text, BibTeX, CSL-JSON */
  getEditionCitation: {
    method: 'get'
    path: '/editions/{n}/citation'
    parameters: {
      /** Number of the edition. */
      n: number
    }
    body: undefined
    answer: {
      data: Citation
      meta: Meta
    }
  }
  /** Feed of everything that editions changed, in one sequence. Sequence numbers rise and never change; there may be gaps. Ask again with after= the last one seen: nothing is missed, since an edition enters the feed whole; `meta.last_sequence` is that one, and stays what was asked for where nothing is new. What the first edition of a new installation holds is not in it. */
  listChanges: {
    method: 'get'
    path: '/changes'
    parameters: {
      /** Last sequence number already seen. */
      after?: number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson'
    }
    body: undefined
    answer: {
      data: FeedEntry[]
      meta: Meta
      page: Page
    }
  }
  /** Every revision of a level: since which edition, what changed, by whose amendment, and why. The newest first, over all editions; a retired level has its history too. */
  getLevelHistory: {
    method: 'get'
    path: '/levels/{level}/history'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
    }
    body: undefined
    answer: {
      data: LevelRevision[]
      meta: Meta
    }
  }
  /** The bibliography of an edition */
  listSources: {
    method: 'get'
    path: '/sources'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson' | 'ecsv' | 'arrow'
    }
    body: undefined
    answer: {
      data: Source[]
      meta: Meta
      page: Page
    }
  }
  /** One source and how many values rest on it */
  getSource: {
    method: 'get'
    path: '/sources/{key}'
    parameters: {
      /** Key of the source. */
      key: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Source
      meta: Meta
    }
  }
  /** How to cite a source: text, BibTeX, CSL-JSON */
  getSourceCitation: {
    method: 'get'
    path: '/sources/{key}/citation'
    parameters: {
      /** Key of the source. */
      key: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Citation
      meta: Meta
    }
  }
  /** The one search box: levels and lines from words, with how each word was understood */
  find: {
    method: 'get'
    path: '/find'
    parameters: {
      /** What to find: an ion, a configuration, a term, a wavelength with its unit, a line name. */
      q: string | number
      /** Levels to list. */
      levels_limit?: number
      /** Lines to list. */
      lines_limit?: number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: Find
      meta: Meta
    }
  }
  /** Columns that an import reads, with their units. Those of an export of levels, and what a curator needs beside them. Columns of an export that the table computes itself are left out when it is imported. */
  listImportColumns: {
    method: 'get'
    path: '/import-columns'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson'
    }
    body: undefined
    answer: {
      data: ImportColumn[]
      meta: Meta
      page: Page
    }
  }
  /** Import a table of levels into an amendment, or try it. Takes a file as an export gives it, or any other table with a mapping of its headers. Every row is matched with the level that it is about, checked together with all others, and written as a change of the amendment; a file with any row in error, or that could be about several levels, changes nothing.
   * 
   * Rows are matched by the column `id`, else by species, configuration, label, term, J and repeat index, else by species, term, J and parity with nearly the same energy or the same configuration.
   * 
   * A column that the file does not have leaves its values as they are, except that printed digits go where the energy beside them changes; an empty cell empties its value. A column `revision`, as an export has it, keeps a row that is older than the table from putting back what was corrected since. Of several measured g_J of a level a file shows one: it is replaced where the row says another, and the others stay.
   * 
   * Rows that say what the table or the amendment has already change nothing, so a file may be imported again and again. */
  importLevels: {
    method: 'post'
    path: '/amendments/{id}/import'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Only report what each row would do. */
      dry_run?: true | false
      /** Answer when it is done. Otherwise 202 at once: ask for the import until it is no longer running. */
      wait?: true | false
    }
    body: FormData
    answer: {
      data: Import
      meta: Meta
    }
  }
  /** Imports of an amendment and their dry runs, the newest first */
  listImports: {
    method: 'get'
    path: '/amendments/{id}/imports'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Import[]
      meta: Meta
      page: Page
    }
  }
  /** One import, and how far it is */
  getImport: {
    method: 'get'
    path: '/amendments/{id}/imports/{import}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the import. */
      import: string | number
    }
    body: undefined
    answer: {
      data: Import
      meta: Meta
    }
  }
  /** Stop a running import; nothing of it is written */
  stopImport: {
    method: 'post'
    path: '/amendments/{id}/imports/{import}/stop'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the import. */
      import: string | number
    }
    body: undefined
    answer: {
      data: Import
      meta: Meta
    }
  }
  /** What an import says of each row of its file. Kept until the next import of the amendment has ended. CSV and NDJSON hold every row of the verdict asked, from the cursor on where one is given; limit is for JSON. */
  listImportRows: {
    method: 'get'
    path: '/amendments/{id}/imports/{import}/rows'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the import. */
      import: string | number
      /** Only rows of this verdict. */
      verdict?: 'new' | 'changed' | 'same' | 'ambiguous' | 'error'
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
      /** Representation, instead of the Accept field. Default: what Accept prefers, else json. */
      format?: 'json' | 'csv' | 'ndjson'
    }
    body: undefined
    answer: {
      data: ImportRow[]
      meta: Meta
      page: Page
    }
  }
  /** Sign in in a browser. Sets the session cookie. Scripts use an API key instead. Failures make the next attempt wait, never more than a quarter of an hour. */
  signIn: {
    method: 'post'
    path: '/session'
    parameters: Record<string, never>
    body: SignInRequest
    answer: {
      data: SignedIn
      meta: Meta
    }
  }
  /** Sign out: the session ends at once */
  signOut: {
    method: 'delete'
    path: '/session'
    parameters: Record<string, never>
    body: undefined
    answer: undefined
  }
  /** Your account and the role in force */
  getMe: {
    method: 'get'
    path: '/me'
    parameters: Record<string, never>
    body: undefined
    answer: {
      data: Account
      meta: Meta
    }
  }
  /** Set a new password; your other sessions end. You are told of it by mail, so that you hear of it where it was not you. */
  changePassword: {
    method: 'post'
    path: '/password-changes'
    parameters: Record<string, never>
    body: PasswordChange
    answer: undefined
  }
  /** Your API keys, the newest first; an admin sees all */
  listKeys: {
    method: 'get'
    path: '/keys'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: ApiKey[]
      meta: Meta
      page: Page
    }
  }
  /** Make an API key; it is shown once. Only the SHA-256 of the key is kept. A key made with a key has at most its role and ends no later. */
  createKey: {
    method: 'post'
    path: '/keys'
    parameters: Record<string, never>
    body: NewKeyRequest
    answer: {
      data: NewKey
      meta: Meta
    }
  }
  /** One API key, without its secret */
  getKey: {
    method: 'get'
    path: '/keys/{id}'
    parameters: {
      /** Identifier of the key. */
      id: string | number
    }
    body: undefined
    answer: {
      data: ApiKey
      meta: Meta
    }
  }
  /** Revoke an API key, at once and for good */
  revokeKey: {
    method: 'delete'
    path: '/keys/{id}'
    parameters: {
      /** Identifier of the key. */
      id: string | number
    }
    body: undefined
    answer: undefined
  }
  /** Everyone who has an account, by name */
  listPeople: {
    method: 'get'
    path: '/people'
    parameters: {
      /** Only those whose name or address holds this. */
      q?: string | number
      /** Only those of this role. */
      role?: 'reader' | 'curator' | 'admin'
      /** Only open accounts, or only closed ones. */
      active?: 'true' | 'false'
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: PersonAccount[]
      meta: Meta
      page: Page
    }
  }
  /** One account */
  getPerson: {
    method: 'get'
    path: '/people/{id}'
    parameters: {
      /** Identifier of the person. */
      id: string | number
    }
    body: undefined
    answer: {
      data: PersonAccount
      meta: Meta
    }
  }
  /** Change the name or role of an account, close it or open it again. A new role is in force at once, in sessions and keys too. Closing ends all sessions and revokes all keys at once, and with them invitations and links to set a password that are still open; webhooks of the person are switched off. The last admin who can sign in stays one. Not for keys: a key must not make its holder more than they are. */
  changePerson: {
    method: 'patch'
    path: '/people/{id}'
    parameters: {
      /** Identifier of the person. */
      id: string | number
    }
    body: PersonChanges
    answer: {
      data: PersonAccount
      meta: Meta
    }
  }
  /** Invitations, the newest first */
  listInvitations: {
    method: 'get'
    path: '/invitations'
    parameters: {
      /** Only those of this state. */
      state?: 'open' | 'accepted' | 'revoked' | 'expired'
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Invitation[]
      meta: Meta
      page: Page
    }
  }
  /** Invite a person; the link goes out by mail. The link is good for seven days and stands in the mail only. One open invitation to an address. */
  createInvitation: {
    method: 'post'
    path: '/invitations'
    parameters: Record<string, never>
    body: NewInvitation
    answer: {
      data: Invitation
      meta: Meta
    }
  }
  /** Take an invitation back */
  revokeInvitation: {
    method: 'delete'
    path: '/invitations/{id}'
    parameters: {
      /** Identifier of the invitation. */
      id: string | number
    }
    body: undefined
    answer: undefined
  }
  /** What an invitation offers, for the holder of its link */
  readInvitation: {
    method: 'post'
    path: '/invitations/read'
    parameters: Record<string, never>
    body: InvitationToken
    answer: {
      data: InvitationOffer
      meta: Meta
    }
  }
  /** Accept an invitation: makes the account and signs in */
  acceptInvitation: {
    method: 'post'
    path: '/invitations/accept'
    parameters: Record<string, never>
    body: InvitationAcceptance
    answer: {
      data: SignedIn
      meta: Meta
    }
  }
  /** Ask for a mail with a link to set a new password. The answer is the same, after the same time, whether or not there is an account. The link is good for an hour and once; a new one makes older ones void. */
  askPasswordReset: {
    method: 'post'
    path: '/password-resets'
    parameters: Record<string, never>
    body: PasswordResetRequest
    answer: undefined
  }
  /** Set a new password with the link of a mail; every session of the account ends. The owner of the account is told of it by mail. */
  usePasswordReset: {
    method: 'post'
    path: '/password-resets/use'
    parameters: Record<string, never>
    body: PasswordReset
    answer: undefined
  }
  /** Species, levels and lines that you follow, the newest first */
  listFollows: {
    method: 'get'
    path: '/follows'
    parameters: {
      /** Only this species, level or line. */
      subject?: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Follow[]
      meta: Meta
      page: Page
    }
  }
  /** Follow a species, level or line: a mail tells you when an edition changes a value of it. A line is told of where either of its levels changes. Following twice is following once. */
  createFollow: {
    method: 'post'
    path: '/follows'
    parameters: Record<string, never>
    body: NewFollow
    answer: {
      data: Follow
      meta: Meta
    }
  }
  /** Follow no longer */
  deleteFollow: {
    method: 'delete'
    path: '/follows/{id}'
    parameters: {
      /** Identifier of the follow. */
      id: string | number
    }
    body: undefined
    answer: undefined
  }
  /** Addresses that are told of events, the newest first */
  listWebhooks: {
    method: 'get'
    path: '/webhooks'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Webhook[]
      meta: Meta
      page: Page
    }
  }
  /** Have an address told of events; the signing secret is shown once. Each event is a POST of JSON `{id, event, at, data}` with Lodeterm-Delivery (its id), Lodeterm-Event, Lodeterm-Timestamp (seconds) and Lodeterm-Signature: `v1=` and the hexadecimal HMAC-SHA256 of `timestamp.body` under the secret. Any 2xx is taken for received; redirects are not followed; other answers are tried again with growing pauses, eight times in all. */
  createWebhook: {
    method: 'post'
    path: '/webhooks'
    parameters: Record<string, never>
    body: NewWebhook
    answer: {
      data: NewWebhookAnswer
      meta: Meta
    }
  }
  /** One webhook, without its secret */
  getWebhook: {
    method: 'get'
    path: '/webhooks/{id}'
    parameters: {
      /** Identifier of the webhook. */
      id: string | number
    }
    body: undefined
    answer: {
      data: Webhook
      meta: Meta
    }
  }
  /** Change a webhook, or switch it off and on */
  changeWebhook: {
    method: 'patch'
    path: '/webhooks/{id}'
    parameters: {
      /** Identifier of the webhook. */
      id: string | number
    }
    body: WebhookChanges
    answer: {
      data: Webhook
      meta: Meta
    }
  }
  /** Remove a webhook; nothing more is sent to it */
  deleteWebhook: {
    method: 'delete'
    path: '/webhooks/{id}'
    parameters: {
      /** Identifier of the webhook. */
      id: string | number
    }
    body: undefined
    answer: undefined
  }
  /** Send the event ping at once, and say what came of it */
  testWebhook: {
    method: 'post'
    path: '/webhooks/{id}/test'
    parameters: {
      /** Identifier of the webhook. */
      id: string | number
    }
    body: undefined
    answer: {
      data: WebhookDelivery
      meta: Meta
    }
  }
  /** What was sent to a webhook and what came of it, the newest first */
  listDeliveries: {
    method: 'get'
    path: '/webhooks/{id}/deliveries'
    parameters: {
      /** Identifier of the webhook. */
      id: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: WebhookDelivery[]
      meta: Meta
      page: Page
    }
  }
  /** Mail that would have been sent, the newest first, where a local stand-in takes it. Your own mail; an admin at a browser sees all. 404 where mail goes to a real server. */
  listOutbox: {
    method: 'get'
    path: '/outbox'
    parameters: {
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: OutboxMail[]
      meta: Meta
      page: Page
    }
  }
  /** Amendments, the newest first */
  listAmendments: {
    method: 'get'
    path: '/amendments'
    parameters: {
      /** Only those in this state. */
      state?: 'draft' | 'in_review' | 'accepted' | 'published' | 'withdrawn'
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Amendment[]
      meta: Meta
      page: Page
    }
  }
  /** Begin an amendment, as a draft */
  createAmendment: {
    method: 'post'
    path: '/amendments'
    parameters: Record<string, never>
    body: NewAmendment
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** One amendment with its reviews, and what you may do with it */
  getAmendment: {
    method: 'get'
    path: '/amendments/{id}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: undefined
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** Change title or note; any curator may. An amendment that is in review or accepted is a draft again afterwards. */
  changeAmendment: {
    method: 'patch'
    path: '/amendments/{id}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: AmendmentChanges
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** Changes of an amendment, in the order they came */
  listAmendmentChanges: {
    method: 'get'
    path: '/amendments/{id}/changes'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Only changes of this kind of thing. */
      kind?: 'level' | 'source' | 'species' | 'isotope' | 'hyperfine'
      /** Only changes with findings of this severity. */
      severity?: 'error' | 'warning'
      /** Words that the subject, the values or the comment hold. */
      q?: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: AmendmentChange[]
      meta: Meta
      page: Page
    }
  }
  /** Add a change: make, replace or retire something. It is checked at once. A change with errors is kept, so that it can be mended, and blocks submission. A new level gets its ordinal here. */
  createAmendmentChange: {
    method: 'post'
    path: '/amendments/{id}/changes'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: ChangeRequest
    answer: {
      data: AmendmentChangeDetail
      meta: Meta
    }
  }
  /** Check changes without writing anything. Findings are those that the changes would have beside the ones that the amendment has already. */
  checkAmendmentChanges: {
    method: 'post'
    path: '/amendments/{id}/changes/check'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: ChangeBatch
    answer: {
      data: CheckedBatch
      meta: Meta
    }
  }
  /** Add, edit and take out several changes, together or not at all */
  writeAmendmentChanges: {
    method: 'post'
    path: '/amendments/{id}/changes/batch'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: ChangeBatch
    answer: {
      data: WrittenBatch
      meta: Meta
    }
  }
  /** One change with before, after, findings, and the lines it moves */
  getAmendmentChange: {
    method: 'get'
    path: '/amendments/{id}/changes/{change}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the change. */
      change: string | number
    }
    body: undefined
    answer: {
      data: AmendmentChangeDetail
      meta: Meta
    }
  }
  /** Edit a change; its subject stays. The revision that it was made from stays too, unless base_revision states the one in force. */
  replaceAmendmentChange: {
    method: 'put'
    path: '/amendments/{id}/changes/{change}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the change. */
      change: string | number
    }
    body: ChangeRequest
    answer: {
      data: AmendmentChangeDetail
      meta: Meta
    }
  }
  /** Take a change out. Only of an amendment that is not published yet. The ordinal of a new level is not given again. */
  deleteAmendmentChange: {
    method: 'delete'
    path: '/amendments/{id}/changes/{change}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the change. */
      change: string | number
    }
    body: undefined
    answer: undefined
  }
  /** Which lines the amendment moves, makes or takes away, and which effective Landé factors it changes */
  getAmendmentConsequences: {
    method: 'get'
    path: '/amendments/{id}/consequences'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: undefined
    answer: {
      data: Consequences
      meta: Meta
    }
  }
  /** Ask for a review. Errors block it; warnings need a comment, their own or this one. Every check is made again against the newest edition. */
  submitAmendment: {
    method: 'post'
    path: '/amendments/{id}/submit'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: Statement
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** Give an amendment back to its authors as a draft, saying why. A comment is needed. */
  returnAmendment: {
    method: 'post'
    path: '/amendments/{id}/return'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: Statement
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** Accept the version reviewed. Nobody who began the amendment, or wrote or edited a change of it, may. Binds to this version: a later edit makes it a draft again. */
  acceptAmendment: {
    method: 'post'
    path: '/amendments/{id}/accept'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: Statement
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** End an amendment without publishing it. Its author or an admin may. */
  withdrawAmendment: {
    method: 'post'
    path: '/amendments/{id}/withdraw'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: Statement
    answer: {
      data: AmendmentDetail
      meta: Meta
    }
  }
  /** What was said about an amendment, the oldest first */
  listAmendmentComments: {
    method: 'get'
    path: '/amendments/{id}/comments'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: Comment[]
      meta: Meta
      page: Page
    }
  }
  /** Say something about an amendment or one of its changes, or answer in a thread */
  createAmendmentComment: {
    method: 'post'
    path: '/amendments/{id}/comments'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
    }
    body: NewComment
    answer: {
      data: Comment
      meta: Meta
    }
  }
  /** Resolve a thread, or open it again */
  changeAmendmentComment: {
    method: 'patch'
    path: '/amendments/{id}/comments/{comment}'
    parameters: {
      /** Identifier of the amendment. */
      id: string | number
      /** Identifier of the comment. */
      comment: string | number
    }
    body: CommentChange
    answer: {
      data: Comment
      meta: Meta
    }
  }
  /** What waits for you */
  getTasks: {
    method: 'get'
    path: '/me/tasks'
    parameters: Record<string, never>
    body: undefined
    answer: {
      data: Tasks
      meta: Meta
    }
  }
  /** The values of a level as a curator writes them: what to send back, changed, in a replace */
  getLevelValues: {
    method: 'get'
    path: '/levels/{level}/values'
    parameters: {
      /** Level: species, dot, ordinal. */
      level: string | number
      /** Edition to read: its number, or latest. */
      edition?: string | number
    }
    body: undefined
    answer: {
      data: LevelValuesOf
      meta: Meta
    }
  }
  /** Who did what, when, from where; the newest first */
  listAudit: {
    method: 'get'
    path: '/audit'
    parameters: {
      /** Only this action. */
      action?: string | number
      /** Only about things of this kind. */
      subject_kind?: string | number
      /** Only about this thing, by its identifier; changes are also found by the level or source that they are about, and batches of changes by each that they name. */
      subject_id?: string | number
      /** Only what this person did. */
      actor?: string | number
      /** Only what was done with this key. */
      key?: string | number
      /** Only what was done in this browser session. */
      session?: string | number
      /** Only what was done at this time or later. */
      from?: string | number
      /** Only what was done before this time. */
      until?: string | number
      /** Rows on one page. */
      limit?: number
      /** Where the next page begins: page.next_cursor of the page before, as it was given. It belongs to one query and one edition. */
      cursor?: string | number
    }
    body: undefined
    answer: {
      data: AuditEvent[]
      meta: Meta
      page: Page
    }
  }
  /** The process answers */
  getLive: {
    method: 'get'
    path: '/health/live'
    parameters: Record<string, never>
    body: undefined
    answer: Live
  }
  /** The database answers and an edition is published */
  getReady: {
    method: 'get'
    path: '/health/ready'
    parameters: Record<string, never>
    body: undefined
    answer: Ready
  }
  /** This description of the API, as OpenAPI 3.1 */
  getOpenApi: {
    method: 'get'
    path: '/openapi.json'
    parameters: Record<string, never>
    body: undefined
    answer: OpenApiDocument
  }
}

/** What the client has to know of each operation. `safe`: it changes nothing, so it may be asked again. */
export const OPERATIONS = {
  listSpecies: { method: 'get', path: '/species', inPath: [], inQuery: ['limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getSpecies: { method: 'get', path: '/species/{species}', inPath: ['species'], inQuery: ['edition'], formats: ['json'], safe: true },
  listLevels: { method: 'get', path: '/levels', inPath: [], inQuery: ['species', 'q', 'term', 's', 'l', 'j', 'parity', 'configuration', 'energy_min_invcm', 'energy_max_invcm', 'g_min', 'g_max', 'source', 'sort', 'explain', 'limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getLevel: { method: 'get', path: '/levels/{level}', inPath: ['level'], inQuery: ['edition'], formats: ['json'], safe: true },
  getGFactor: { method: 'get', path: '/levels/{level}/g-factor', inPath: ['level'], inQuery: ['g_s', 'edition'], formats: ['json'], safe: true },
  getSublevels: { method: 'get', path: '/levels/{level}/sublevels', inPath: ['level'], inQuery: ['field', 'model', 'g_values', 'g_s', 'tolerance', 'diamagnetic', 'hyperfine', 'isotope', 'amplitudes', 'limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getCrossings: { method: 'get', path: '/levels/{level}/crossings', inPath: ['level'], inQuery: ['a', 'b', 'from', 'to', 'hyperfine', 'isotope', 'g_values', 'g_s', 'edition'], formats: ['json'], safe: true },
  listLevelTransitions: { method: 'get', path: '/levels/{level}/transitions', inPath: ['level'], inQuery: ['kind', 'rules', 'include', 'explain', 'limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  listTransitions: { method: 'get', path: '/transitions', inPath: [], inQuery: ['species', 'kind', 'rules', 'wavelength_min_nm', 'wavelength_max_nm', 'medium', 'wavenumber_min_invcm', 'wavenumber_max_invcm', 'frequency_min_thz', 'frequency_max_thz', 'g_eff_min', 'g_eff_max', 'explain', 'limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getTransition: { method: 'get', path: '/transitions/{transition}', inPath: ['transition'], inQuery: ['kind', 'edition'], formats: ['json'], safe: true },
  getComponents: { method: 'get', path: '/transitions/{transition}/components', inPath: ['transition'], inQuery: ['field', 'field_unc', 'kind', 'model', 'g_values', 'g_s', 'theta_deg', 'medium', 'tolerance', 'diamagnetic', 'hyperfine', 'isotope', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  judgeTransition: { method: 'post', path: '/transitions/judge', inPath: [], inQuery: ['edition'], formats: ['json'], safe: true },
  decodeTerm: { method: 'get', path: '/terms/{symbol}', inPath: ['symbol'], inQuery: ['g_s', 'edition'], formats: ['json'], safe: true },
  computeSublevels: { method: 'post', path: '/sublevels', inPath: [], inQuery: ['edition'], formats: ['json'], safe: true },
  fitField: { method: 'post', path: '/field-fits', inPath: [], inQuery: ['edition', 'format'], formats: ['json', 'csv', 'ndjson', 'arrow'], safe: true },
  predict: { method: 'post', path: '/predictions', inPath: [], inQuery: ['edition', 'format'], formats: ['json', 'ndjson', 'arrow'], safe: true },
  makeFieldTable: { method: 'post', path: '/field-tables', inPath: [], inQuery: ['edition', 'format'], formats: ['json', 'arrow'], safe: true },
  computeProfiles: { method: 'post', path: '/profiles', inPath: [], inQuery: ['edition', 'format'], formats: ['json', 'csv', 'ndjson', 'arrow'], safe: true },
  convertWavelength: { method: 'get', path: '/wavelengths/convert', inPath: [], inQuery: ['value', 'from', 'to', 'formula', 'edition'], formats: ['json'], safe: true },
  listEditions: { method: 'get', path: '/editions', inPath: [], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  publishEdition: { method: 'post', path: '/editions', inPath: [], inQuery: [], formats: [], safe: false },
  previewNextEdition: { method: 'get', path: '/editions/next', inPath: [], inQuery: [], formats: ['json'], safe: true },
  getEdition: { method: 'get', path: '/editions/{n}', inPath: ['n'], inQuery: [], formats: ['json'], safe: true },
  listEditionChanges: { method: 'get', path: '/editions/{n}/changes', inPath: ['n'], inQuery: ['since', 'kind', 'action', 'species', 'limit', 'cursor', 'format'], formats: ['json', 'csv', 'ndjson'], safe: true },
  getLevelMap: { method: 'get', path: '/editions/{n}/level-map', inPath: ['n'], inQuery: ['since', 'format'], formats: ['json', 'csv', 'ndjson'], safe: true },
  downloadEditionLevels: { method: 'get', path: '/editions/{n}/levels', inPath: ['n'], inQuery: ['format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getEditionContent: { method: 'get', path: '/editions/{n}/content', inPath: ['n'], inQuery: [], formats: ['json'], safe: true },
  getEditionCitation: { method: 'get', path: '/editions/{n}/citation', inPath: ['n'], inQuery: [], formats: ['json'], safe: true },
  listChanges: { method: 'get', path: '/changes', inPath: [], inQuery: ['after', 'limit', 'cursor', 'format'], formats: ['json', 'csv', 'ndjson'], safe: true },
  getLevelHistory: { method: 'get', path: '/levels/{level}/history', inPath: ['level'], inQuery: [], formats: ['json'], safe: true },
  listSources: { method: 'get', path: '/sources', inPath: [], inQuery: ['limit', 'cursor', 'edition', 'format'], formats: ['json', 'csv', 'ndjson', 'ecsv', 'arrow'], safe: true },
  getSource: { method: 'get', path: '/sources/{key}', inPath: ['key'], inQuery: ['edition'], formats: ['json'], safe: true },
  getSourceCitation: { method: 'get', path: '/sources/{key}/citation', inPath: ['key'], inQuery: ['edition'], formats: ['json'], safe: true },
  find: { method: 'get', path: '/find', inPath: [], inQuery: ['q', 'levels_limit', 'lines_limit', 'edition'], formats: ['json'], safe: true },
  listImportColumns: { method: 'get', path: '/import-columns', inPath: [], inQuery: ['limit', 'cursor', 'format'], formats: ['json', 'csv', 'ndjson'], safe: true },
  importLevels: { method: 'post', path: '/amendments/{id}/import', inPath: ['id'], inQuery: ['dry_run', 'wait'], formats: ['json'], safe: false },
  listImports: { method: 'get', path: '/amendments/{id}/imports', inPath: ['id'], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  getImport: { method: 'get', path: '/amendments/{id}/imports/{import}', inPath: ['id', 'import'], inQuery: [], formats: ['json'], safe: true },
  stopImport: { method: 'post', path: '/amendments/{id}/imports/{import}/stop', inPath: ['id', 'import'], inQuery: [], formats: ['json'], safe: false },
  listImportRows: { method: 'get', path: '/amendments/{id}/imports/{import}/rows', inPath: ['id', 'import'], inQuery: ['verdict', 'limit', 'cursor', 'format'], formats: ['json', 'csv', 'ndjson'], safe: true },
  signIn: { method: 'post', path: '/session', inPath: [], inQuery: [], formats: [], safe: false },
  signOut: { method: 'delete', path: '/session', inPath: [], inQuery: [], formats: [], safe: false },
  getMe: { method: 'get', path: '/me', inPath: [], inQuery: [], formats: ['json'], safe: true },
  changePassword: { method: 'post', path: '/password-changes', inPath: [], inQuery: [], formats: [], safe: false },
  listKeys: { method: 'get', path: '/keys', inPath: [], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  createKey: { method: 'post', path: '/keys', inPath: [], inQuery: [], formats: [], safe: false },
  getKey: { method: 'get', path: '/keys/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  revokeKey: { method: 'delete', path: '/keys/{id}', inPath: ['id'], inQuery: [], formats: [], safe: false },
  listPeople: { method: 'get', path: '/people', inPath: [], inQuery: ['q', 'role', 'active', 'limit', 'cursor'], formats: ['json'], safe: true },
  getPerson: { method: 'get', path: '/people/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  changePerson: { method: 'patch', path: '/people/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  listInvitations: { method: 'get', path: '/invitations', inPath: [], inQuery: ['state', 'limit', 'cursor'], formats: ['json'], safe: true },
  createInvitation: { method: 'post', path: '/invitations', inPath: [], inQuery: [], formats: [], safe: false },
  revokeInvitation: { method: 'delete', path: '/invitations/{id}', inPath: ['id'], inQuery: [], formats: [], safe: false },
  readInvitation: { method: 'post', path: '/invitations/read', inPath: [], inQuery: [], formats: ['json'], safe: true },
  acceptInvitation: { method: 'post', path: '/invitations/accept', inPath: [], inQuery: [], formats: [], safe: false },
  askPasswordReset: { method: 'post', path: '/password-resets', inPath: [], inQuery: [], formats: [], safe: false },
  usePasswordReset: { method: 'post', path: '/password-resets/use', inPath: [], inQuery: [], formats: [], safe: false },
  listFollows: { method: 'get', path: '/follows', inPath: [], inQuery: ['subject', 'limit', 'cursor'], formats: ['json'], safe: true },
  createFollow: { method: 'post', path: '/follows', inPath: [], inQuery: [], formats: [], safe: false },
  deleteFollow: { method: 'delete', path: '/follows/{id}', inPath: ['id'], inQuery: [], formats: [], safe: false },
  listWebhooks: { method: 'get', path: '/webhooks', inPath: [], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  createWebhook: { method: 'post', path: '/webhooks', inPath: [], inQuery: [], formats: [], safe: false },
  getWebhook: { method: 'get', path: '/webhooks/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  changeWebhook: { method: 'patch', path: '/webhooks/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  deleteWebhook: { method: 'delete', path: '/webhooks/{id}', inPath: ['id'], inQuery: [], formats: [], safe: false },
  testWebhook: { method: 'post', path: '/webhooks/{id}/test', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  listDeliveries: { method: 'get', path: '/webhooks/{id}/deliveries', inPath: ['id'], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  listOutbox: { method: 'get', path: '/outbox', inPath: [], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  listAmendments: { method: 'get', path: '/amendments', inPath: [], inQuery: ['state', 'limit', 'cursor'], formats: ['json'], safe: true },
  createAmendment: { method: 'post', path: '/amendments', inPath: [], inQuery: [], formats: [], safe: false },
  getAmendment: { method: 'get', path: '/amendments/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  changeAmendment: { method: 'patch', path: '/amendments/{id}', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  listAmendmentChanges: { method: 'get', path: '/amendments/{id}/changes', inPath: ['id'], inQuery: ['kind', 'severity', 'q', 'limit', 'cursor'], formats: ['json'], safe: true },
  createAmendmentChange: { method: 'post', path: '/amendments/{id}/changes', inPath: ['id'], inQuery: [], formats: [], safe: false },
  checkAmendmentChanges: { method: 'post', path: '/amendments/{id}/changes/check', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  writeAmendmentChanges: { method: 'post', path: '/amendments/{id}/changes/batch', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  getAmendmentChange: { method: 'get', path: '/amendments/{id}/changes/{change}', inPath: ['id', 'change'], inQuery: [], formats: ['json'], safe: true },
  replaceAmendmentChange: { method: 'put', path: '/amendments/{id}/changes/{change}', inPath: ['id', 'change'], inQuery: [], formats: ['json'], safe: false },
  deleteAmendmentChange: { method: 'delete', path: '/amendments/{id}/changes/{change}', inPath: ['id', 'change'], inQuery: [], formats: [], safe: false },
  getAmendmentConsequences: { method: 'get', path: '/amendments/{id}/consequences', inPath: ['id'], inQuery: [], formats: ['json'], safe: true },
  submitAmendment: { method: 'post', path: '/amendments/{id}/submit', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  returnAmendment: { method: 'post', path: '/amendments/{id}/return', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  acceptAmendment: { method: 'post', path: '/amendments/{id}/accept', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  withdrawAmendment: { method: 'post', path: '/amendments/{id}/withdraw', inPath: ['id'], inQuery: [], formats: ['json'], safe: false },
  listAmendmentComments: { method: 'get', path: '/amendments/{id}/comments', inPath: ['id'], inQuery: ['limit', 'cursor'], formats: ['json'], safe: true },
  createAmendmentComment: { method: 'post', path: '/amendments/{id}/comments', inPath: ['id'], inQuery: [], formats: [], safe: false },
  changeAmendmentComment: { method: 'patch', path: '/amendments/{id}/comments/{comment}', inPath: ['id', 'comment'], inQuery: [], formats: ['json'], safe: false },
  getTasks: { method: 'get', path: '/me/tasks', inPath: [], inQuery: [], formats: ['json'], safe: true },
  getLevelValues: { method: 'get', path: '/levels/{level}/values', inPath: ['level'], inQuery: ['edition'], formats: ['json'], safe: true },
  listAudit: { method: 'get', path: '/audit', inPath: [], inQuery: ['action', 'subject_kind', 'subject_id', 'actor', 'key', 'session', 'from', 'until', 'limit', 'cursor'], formats: ['json'], safe: true },
  getLive: { method: 'get', path: '/health/live', inPath: [], inQuery: [], formats: ['json'], safe: true },
  getReady: { method: 'get', path: '/health/ready', inPath: [], inQuery: [], formats: ['json'], safe: true },
  getOpenApi: { method: 'get', path: '/openapi.json', inPath: [], inQuery: [], formats: ['json'], safe: true },
} as const satisfies { [id in keyof Operations]: { method: string; path: string; inPath: readonly string[]; inQuery: readonly string[]; formats: readonly string[]; safe: boolean } }
