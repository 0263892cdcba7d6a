import { z } from 'zod'

/** How far a value was checked against its source; never raised by us. */
export const Evidence = z.enum(['read', 'quoted', 'recalled', 'computed']).meta({
  id: 'Evidence',
  description:
    'How far a value was checked: read in the publication; quoted from a text that quotes it; recalled from memory, the publication named is where it is believed to stand; computed from other values.',
})
export type Evidence = z.infer<typeof Evidence>

export const Parity = z.enum(['even', 'odd']).meta({ id: 'Parity' })
export type Parity = z.infer<typeof Parity>

export const Coupling = z.enum(['LS', 'J1K', 'jj', 'unassigned']).meta({
  id: 'Coupling',
  description: 'Coupling scheme the level is named in: LS (Russell-Saunders), J1K (pair), jj, or unassigned.',
})
export type Coupling = z.infer<typeof Coupling>

export const Kind = z.enum(['E1', 'M1', 'E2']).meta({ id: 'Kind', description: 'Electric dipole, magnetic dipole or electric quadrupole.' })
export type Kind = z.infer<typeof Kind>

export const Model = z.enum(['linear', 'intermediate', 'auto']).meta({
  id: 'Model',
  description: 'linear: the weak-field law. intermediate: diagonalised within the term. auto: intermediate where linear errs by more than the tolerance.',
})
export type Model = z.infer<typeof Model>

export const GValues = z.enum(['adopted', 'coupled', 'ls']).meta({
  id: 'GValues',
  description: 'Which Landé factors are used: the adopted ones, those of the stated coupling, or those of LS coupling.',
})
export type GValues = z.infer<typeof GValues>

export const Medium = z.enum(['conventional', 'air', 'vacuum']).meta({
  id: 'Medium',
  description: 'Medium of a wavelength. conventional: air from 200 to 2000 nm (judged on the vacuum value), vacuum outside.',
})
export type Medium = z.infer<typeof Medium>

export const AirFormula = z.enum(['ciddor1996', 'peck_reeder1972', 'edlen1966']).meta({
  id: 'AirFormula',
  description: 'Dispersion formula of standard air (15 C, 101 325 Pa, dry).',
})
export type AirFormula = z.infer<typeof AirFormula>

/** Whether a number that is null is unknown or has no meaning here. */
export const ValueStatus = z.enum(['ok', 'unknown', 'not_applicable']).meta({ id: 'ValueStatus' })
export type ValueStatus = z.infer<typeof ValueStatus>

export const SPECIES_ID = /^[A-Z][a-z]?-[IVXLC]+$/
export const LEVEL_ID = /^[A-Z][a-z]?-[IVXLC]+\.[1-9][0-9]{0,6}$/
export const TRANSITION_ID = /^[A-Z][a-z]?-[IVXLC]+\.[1-9][0-9]{0,6}~[A-Z][a-z]?-[IVXLC]+\.[1-9][0-9]{0,6}$/

export const SpeciesId = z.string().regex(SPECIES_ID, 'the name of a species, such as Na-I').meta({ description: 'Element and Roman stage.', example: 'Na-I' })
export const LevelId = z.string().regex(LEVEL_ID, 'the name of a level, such as Na-I.3').meta({ description: 'Species, dot, ordinal given at creation and never reused.', example: 'Na-I.3' })
export const TransitionId = z
  .string()
  .regex(TRANSITION_ID, 'the name of a line, such as Na-I.1~Na-I.3')
  .meta({ description: 'lower~upper; lower is the level of lower energy in the edition read.', example: 'Na-I.1~Na-I.3' })
