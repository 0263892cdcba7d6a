import { z } from 'zod'
import { Evidence, SpeciesId } from './common'

export const Isotope = z
  .strictObject({
    mass_number: z.int(),
    mass_u: z.number().nullable(),
    nuclear_spin: z.number().nullable().meta({ description: 'I, a half-integer.' }),
    abundance_percent: z.number().nullable(),
    g_i: z.number().nullable().meta({ description: "g_I' in units of mu_B, negative for a positive moment." }),
    source: z.string().nullable(),
    evidence: Evidence.nullable(),
  })
  .meta({ id: 'Isotope' })
export type Isotope = z.infer<typeof Isotope>

export const Species = z
  .strictObject({
    id: SpeciesId,
    element: z.string().meta({ example: 'Na' }),
    z: z.int().meta({ description: 'Atomic number.' }),
    stage: z.string().meta({ description: 'Roman stage: I is the neutral atom.', example: 'I' }),
    charge: z.int(),
    name: z.string().meta({ example: 'sodium' }),
    core_configuration: z.string().meta({ description: 'Closed shells that level configurations leave out.', example: '[Ne]' }),
    ionisation_energy_invcm: z.number().nullable(),
    ionisation_source: z.string().nullable(),
    ionisation_evidence: Evidence.nullable(),
    level_count: z.int().meta({ description: 'Active levels in the edition read.' }),
    isotopes: z.array(Isotope),
    isotope_abundance_sum_percent: z.number().nullable().meta({ description: 'Sum over the isotopes listed; under 100 where only the main ones are.' }),
    sources: z.array(z.string()).meta({ description: 'Keys of every source a value of this species rests on.' }),
    note: z.string().nullable(),
  })
  .meta({ id: 'Species' })
export type Species = z.infer<typeof Species>
