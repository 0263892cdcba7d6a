import { parseSpecies } from '@/lib/atomic/elements'
import { parseTerm, type Term } from '@/lib/atomic/term'
import { quoted } from '@/lib/units/number'
import type { Parsed } from '@/lib/units/parsed'
import type { ParameterFault } from '@/openapi/core/define'
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

export const hyperfineParameter = flagParameter('Put hyperfine structure in, diagonalised in full within one J for an isotope.')
export const amplitudesParameter = flagParameter('Tell the amplitudes of each state.')
export const massNumberParameter = numberParameter('Isotope by its mass number, with hyperfine=true. Without it the only isotope with constants is taken.', { min: 1, max: 400, integer: true, example: 87 })
export const isotopeParameter = readBy<number | 'natural'>((text) => {
  if (text === 'natural') return { ok: true, value: text }
  if (/^[1-9][0-9]{0,2}$/.test(text)) return { ok: true, value: Number(text) }
  return { ok: false, code: 'number_malformed', detail: `${quoted(text)} is no isotope: give its mass number, such as 87, or "natural" for the mixture by abundance.` }
}, { description: 'Isotope by its mass number, or natural for the mixture by abundance, with hyperfine=true. Without it the only isotope with constants is taken.', type: 'string', pattern: '^(natural|[1-9][0-9]{0,2})$', example: '87' })

/** Refusals of what is asked of an isotope. */
export const NUCLEAR_PROBLEMS = ['isotope_unknown', 'isotope_ambiguous', 'hyperfine_unknown', 'nuclear_spin_unknown', 'isotope_without_hyperfine', 'models_conflict'] as const

/** What goes only with hyperfine structure, or not with it. */
export function hyperfineFaults(query: { hyperfine: boolean; isotope?: unknown; model?: string; diamagnetic?: boolean }): ParameterFault[] {
  const faults: ParameterFault[] = []
  if (!query.hyperfine && query.isotope !== undefined) faults.push({ parameter: 'isotope', code: 'isotope_without_hyperfine', detail: 'An isotope is told from others by its hyperfine structure here: add hyperfine=true, or leave isotope out.' })
  if (query.hyperfine && query.model === 'intermediate') faults.push({ parameter: 'model', code: 'models_conflict', detail: 'hyperfine=true diagonalises within one J, the intermediate model over all J of a term without a nucleus: leave one of them out.' })
  if (query.hyperfine && query.diamagnetic === true) faults.push({ parameter: 'diamagnetic', code: 'models_conflict', detail: 'The quadratic shift is not added to hyperfine sublevels: leave diamagnetic or hyperfine out.' })
  return faults
}

export const field = fieldParameter()

