import { parseSpecies } from '@/lib/atomic/elements'
import { parseTerm, type Term } from '@/lib/atomic/term'
import type { Parsed } from '@/lib/units/parsed'
import { choiceParameter, fieldParameter, flagParameter, numberParameter, readBy } from '@/openapi/core/parameters'
import { LEVEL_ID, SPECIES_ID, TRANSITION_ID } from '@/openapi/schemas/common'

/** Parameters that several reading operations share. Identifiers are checked for their form here; whether they exist is the table's to say. */

/** What a mistyped species seems to mean: ` Did you mean Na-I?`, or nothing. */
const meantSpecies = (text: string): string => {
  const species = parseSpecies(text)
  return species.ok ? ` Did you mean ${species.value.id}?` : ''
}

const identifier = (form: RegExp, what: string, example: string, code: string, description: string) =>
  readBy(
    (text): Parsed<string> =>
      form.test(text)
        ? { ok: true, value: text }
        : { ok: false, code, detail: `${JSON.stringify(text.slice(0, 60))} is not ${what}: write it like ${example}.${code === 'species_malformed' ? meantSpecies(text) : ''}` },
    { description, type: 'string', pattern: form.source, example },
  )

export const speciesPath = identifier(SPECIES_ID, 'a species', 'Na-I (element, hyphen, Roman stage)', 'species_malformed', 'Species: element and Roman stage.').meta({ example: 'Na-I' })
export const levelPath = identifier(LEVEL_ID, 'a level', 'Na-I.3 (species, dot, ordinal)', 'level_malformed', 'Level: species, dot, ordinal.').meta({ example: 'Na-I.3' })
export const transitionPath = identifier(
  TRANSITION_ID,
  'a transition',
  'Na-I.1~Na-I.3 (two levels with ~ between them)',
  'transition_malformed',
  'Transition: two levels with ~ between them, in either order.',
).meta({ example: 'Na-I.1~Na-I.3' })

const readTerm = (text: string): Parsed<Term> => parseTerm(text)

export const termPath = readBy<Term>(readTerm, {
  description: 'Term symbol with or without J: 2P*3-2, 3P2, 5D4, ²P°₃/₂; * marks odd parity, and - may stand for the / of a half-integer.',
  type: 'string',
  example: '2P*3-2',
})
export const termParameter = readBy<Term>(readTerm, {
  description: 'Term symbol: 2P matches either parity, 2P* odd only, z5P* the label too; with J (2P*3/2) that J only.',
  type: 'string',
  example: '2P*',
})

export const kindParameter = choiceParameter(['E1', 'M1', 'E2'], 'Kind of transition. Default: E1 where the parities differ, else M1, else E2.')
export const rulesParameter = (byDefault: 'ls' | 'rigorous') =>
  choiceParameter(['ls', 'rigorous'], 'ls: lines that meet the LS rules too, where they apply; rigorous: intercombination lines as well, marked.', byDefault)
export const mediumParameter = choiceParameter(
  ['conventional', 'air', 'vacuum'],
  'Medium of wavelengths. conventional: air from 200 to 2000 nm (judged on the vacuum value), vacuum outside.',
  'conventional',
)
export const modelParameter = choiceParameter(
  ['auto', 'linear', 'intermediate'],
  'linear: the weak-field law; intermediate: diagonalised within the term; auto: intermediate where linear errs by more than the tolerance.',
  'auto',
)
export const gValuesParameter = choiceParameter(['adopted', 'coupled', 'ls'], 'Landé factors to use: adopted, of the stated coupling, or of LS coupling.', 'adopted')
export const gSParameter = numberParameter('g factor of the electron spin; default: the CODATA value.', { min: 0, max: 3, example: 2 })
export const thetaParameter = numberParameter('Angle between the field and the direction from source to observer; without it intensities are averaged over angle.', {
  min: 0,
  max: 180,
  unit: 'degrees',
  example: 90,
})
export const toleranceParameter = numberParameter('Relative error above which the linear law counts as not valid.', { min: 1e-6, max: 1 }).prefault('0.01')
export const fieldUncertaintyParameter = fieldParameter('One standard deviation of the field, as a field with its unit; without it the field is exact.')

export const diamagneticParameter = flagParameter('Add the quadratic (diamagnetic) shift, where one electron outside closed shells allows it to be computed.')

export const field = fieldParameter()

