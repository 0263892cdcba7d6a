import { z } from 'zod'
import { TransitionId, ValueStatus } from './common'
import { RuleName } from './transition'
import { Validity } from './validity'

export const BudgetPart = z
  .strictObject({
    part: z.enum(['energy_lower', 'energy_upper', 'g_lower', 'g_upper', 'field', 'constants']),
    value_invcm: z.number().nullable(),
    status: z.enum(['known', 'unknown', 'exact']),
  })
  .meta({ id: 'BudgetPart' })
export type BudgetPart = z.infer<typeof BudgetPart>

const highField = z.number().nullable().meta({ description: 'M_L or M_S that the sublevel tends to at high field; null in the linear model, which names none.' })

export const Component = z
  .strictObject({
    j_lower: z.number().nullable().meta({ description: 'By continuity from zero field; null where two zero-field energies coincide.' }),
    m_lower: z.number(),
    j_upper: z.number().nullable(),
    m_upper: z.number(),
    q: z.int().meta({ description: 'm_upper - m_lower, for absorption and emission alike.' }),
    polarisation: z.enum(['pi', 'sigma+', 'sigma-', 'q=+2', 'q=-2']),
    m_l_lower: highField,
    m_s_lower: highField,
    m_l_upper: highField,
    m_s_upper: highField,
    shift_lorentz: z.number().nullable().meta({ description: 'Null at zero field in the intermediate model.' }),
    shift_invcm: z.number(),
    shift_ghz: z.number(),
    shift_mhz: z.number(),
    shift_pm: z.number().nullable().meta({ description: 'Wavelength minus that of the centre, in the medium asked for.' }),
    wavenumber_invcm: z
      .number()
      .meta({ description: 'Negative where the field has brought the upper sublevel below the lower one; wavelengths are then null, with warning level_crossing.' }),
    wavelength_vac_nm: z.number().nullable(),
    wavelength_air_nm: z.number().nullable(),
    frequency_thz: z.number(),
    derivative_invcm_per_tesla: z.number().meta({ description: 'Of the position with respect to the field; analytic.' }),
    strength: z.number().nullable().meta({ description: 'Null where the model gives none: meta.warnings says why.' }),
    intensity: z.number().nullable().meta({ description: 'Strength seen at theta_deg; averaged over angle when none is given.' }),
    intensity_status: ValueStatus,
    stokes_q: z.number().nullable(),
    stokes_v: z.number().nullable(),
    vanishes_by: RuleName.nullable().meta({ description: 'The rule that makes the strength zero, where one does.' }),
    wavenumber_unc_invcm: z.number().nullable().meta({ description: 'Null where any part is unknown.' }),
    wavenumber_known_unc_invcm: z.number().meta({ description: 'The known parts alone.' }),
    budget: z.array(BudgetPart),
  })
  .meta({ id: 'Component' })
export type Component = z.infer<typeof Component>

const Centre = z.strictObject({
  wavenumber_invcm: z.number(),
  wavelength_vac_nm: z.number(),
  wavelength_air_nm: z.number().nullable(),
  wavelength_air_status: ValueStatus,
  frequency_thz: z.number(),
})

export const Components = z
  .strictObject({
    transition: TransitionId,
    field_tesla: z.number(),
    model: z.enum(['linear', 'intermediate']),
    theta_deg: z.number().nullable(),
    centre: Centre,
    components: z.array(Component).meta({ description: 'Sorted by q, then shift, then m_lower.' }),
    validity: Validity,
  })
  .meta({ id: 'Components' })
export type Components = z.infer<typeof Components>

/** An isotope as it enters an answer: the nucleus, the constants used, and its weight. */
export const UsedIsotope = z
  .strictObject({
    mass_number: z.int(),
    nuclear_spin: z.number().nullable(),
    g_i: z.number().nullable().meta({ description: "g_I' in units of mu_B, negative for a positive moment; null is not known and taken as 0." }),
    abundance_percent: z.number().nullable(),
    weight: z.number().meta({ description: 'Share in the pattern; the weights of an answer sum to 1.' }),
    shift_mhz: z.number().meta({ description: 'Isotope shift of the line that was put in.' }),
    shift_status: ValueStatus.meta({ description: 'unknown: the table gives no isotope shift, and 0 was put in.' }),
    a_lower_mhz: z.number().nullable(),
    b_lower_mhz: z.number().nullable(),
    a_upper_mhz: z.number().nullable(),
    b_upper_mhz: z.number().nullable(),
  })
  .meta({ id: 'UsedIsotope' })
export type UsedIsotope = z.infer<typeof UsedIsotope>

export const HyperfineBudgetPart = z
  .strictObject({
    part: z.enum(['a_lower', 'b_lower', 'g_lower', 'a_upper', 'b_upper', 'g_upper', 'field', 'constants']),
    value_mhz: z.number().nullable(),
    status: z.enum(['known', 'unknown', 'exact']),
  })
  .meta({ id: 'HyperfineBudgetPart' })
export type HyperfineBudgetPart = z.infer<typeof HyperfineBudgetPart>

export const HyperfineComponent = z
  .strictObject({
    mass_number: z.int(),
    f_lower: z.number().nullable().meta({ description: 'By continuity from zero field; null where two zero-field energies coincide.' }),
    m_f_lower: z.number(),
    f_upper: z.number().nullable(),
    m_f_upper: z.number(),
    q: z.int().meta({ description: 'm_F upper - m_F lower.' }),
    polarisation: z.enum(['pi', 'sigma+', 'sigma-', 'q=+2', 'q=-2']),
    m_j_lower: z.number().meta({ description: 'What the sublevel tends to at high field.' }),
    m_i_lower: z.number(),
    m_j_upper: z.number(),
    m_i_upper: z.number(),
    detuning_mhz: z.number().meta({ description: 'From the line between the centres of gravity of both levels, isotope shift included.' }),
    derivative_mhz_per_tesla: z.number(),
    shift_invcm: z.number().meta({ description: 'detuning_mhz in wavenumber.' }),
    shift_ghz: z.number(),
    shift_pm: z.number().nullable(),
    wavenumber_invcm: z.number(),
    wavelength_vac_nm: z.number().nullable(),
    wavelength_air_nm: z.number().nullable(),
    frequency_thz: z.number(),
    strength: z.number().meta({ description: 'Over one isotope all components sum to 1 at any field.' }),
    weight: z.number().meta({ description: 'Share of the isotope.' }),
    intensity: z.number().nullable().meta({ description: 'Strength times weight as seen at theta_deg, times three, so that a line sums to 1; averaged over angle when none is given.' }),
    intensity_status: ValueStatus,
    stokes_q: z.number().nullable(),
    stokes_v: z.number().nullable(),
    detuning_unc_mhz: z.number().nullable().meta({ description: 'One standard deviation of the detuning; the energies of the levels are not in it. Null where any part is unknown.' }),
    detuning_known_unc_mhz: z.number(),
    budget: z.array(HyperfineBudgetPart),
  })
  .meta({ id: 'HyperfineComponent' })
export type HyperfineComponent = z.infer<typeof HyperfineComponent>

export const HyperfineComponents = z
  .strictObject({
    transition: TransitionId,
    field_tesla: z.number(),
    field_gauss: z.number(),
    model: z.literal('hyperfine'),
    theta_deg: z.number().nullable(),
    centre: Centre,
    isotopes: z.array(UsedIsotope).min(1),
    listed_abundance_percent: z.number().nullable().meta({ description: 'Sum of the abundances that the weights were divided by; null for one isotope named.' }),
    components: z.array(HyperfineComponent).meta({ description: 'Sorted by q, then detuning, then isotope and m_F lower.' }),
    validity: Validity.meta({ description: 'Of the law without hyperfine structure: where J itself stops being good.' }),
  })
  .meta({ id: 'HyperfineComponents' })
export type HyperfineComponents = z.infer<typeof HyperfineComponents>
