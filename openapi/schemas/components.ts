import { z } from 'zod'
import { TransitionId, ValueStatus } from './common'
import { RuleName } from './transition'
import { Validity } from './validity'

export const BudgetPart = z
  .strictObject({
    part: z.string().meta({ example: 'energy_upper' }),
    value_invcm: z.number().nullable(),
    status: z.enum(['known', 'unknown', 'exact']),
  })
  .meta({ id: 'BudgetPart' })
export type BudgetPart = z.infer<typeof BudgetPart>

export const Component = z
  .strictObject({
    m_lower: z.number(),
    m_upper: z.number(),
    q: z.int().meta({ description: 'm_upper - m_lower, for absorption and emission alike.' }),
    polarisation: z.enum(['pi', 'sigma+', 'sigma-', 'q=+2', 'q=-2']),
    shift_lorentz: z.number().nullable(),
    shift_invcm: z.number(),
    shift_ghz: z.number(),
    shift_pm: z.number().nullable().meta({ description: 'Wavelength minus that of the centre, in the medium asked for.' }),
    wavenumber_invcm: z
      .number()
      .meta({ description: 'Negative where the field has brought the upper sublevel below the lower one; wavelengths are then null, with warning level_crossing.' }),
    wavelength_vac_nm: z.number().nullable(),
    wavelength_air_nm: z.number().nullable(),
    frequency_thz: z.number(),
    strength: z.number().nullable(),
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

export const Components = z
  .strictObject({
    transition: TransitionId,
    field_tesla: z.number(),
    model: z.enum(['linear', 'intermediate']),
    theta_deg: z.number().nullable(),
    centre: z.strictObject({
      wavenumber_invcm: z.number(),
      wavelength_vac_nm: z.number(),
      wavelength_air_nm: z.number().nullable(),
      wavelength_air_status: ValueStatus,
      frequency_thz: z.number(),
    }),
    components: z.array(Component).meta({ description: 'Sorted by q, then shift, then m_lower.' }),
    validity: Validity,
  })
  .meta({ id: 'Components' })
export type Components = z.infer<typeof Components>
