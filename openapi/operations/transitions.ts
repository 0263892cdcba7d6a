import { z } from 'zod'
import { defineOperation, type ParameterFault } from '@/openapi/core/define'
import { choiceParameter, explainParameter, numberParameter, repeatable } from '@/openapi/core/parameters'
import { Components, HyperfineComponents } from '@/openapi/schemas/components'
import { JudgedTransition, Transition, TransitionDetail } from '@/openapi/schemas/transition'
import {
  diamagneticParameter, field, fieldUncertaintyParameter, gSParameter, gValuesParameter, hyperfineFaults, hyperfineParameter, isotopeParameter, kindParameter, mediumParameter, modelParameter, NUCLEAR_PROBLEMS, rulesParameter, speciesPath, thetaParameter, toleranceParameter, transitionPath,
} from './parameters'
import { InlineLevel } from './inline'

const gone = ['level_unknown', 'level_retired', 'zero_interval', 'species_differ']

const WINDOWS = [
  ['wavelength_min_nm', 'wavelength_max_nm'],
  ['wavenumber_min_invcm', 'wavenumber_max_invcm'],
  ['frequency_min_thz', 'frequency_max_thz'],
] as const

const bound = (description: string, unit: string, example?: number) => numberParameter(description, { min: 0, unit, example }).optional()

export const listTransitions = defineOperation({
  id: 'listTransitions',
  method: 'get',
  path: '/transitions',
  summary: 'Lines in a window of wavelength, wavenumber or frequency, over all species',
  description:
    'Sorted by wavenumber. With rules=ls, which is the default, intercombination lines are left out and counted in meta.excluded; rules=rigorous lists them, marked.',
  tag: 'Lines',
  role: 'reader',
  query: z.strictObject({
    species: repeatable(speciesPath, 'Species; may be given several times.').optional(),
    kind: choiceParameter(['E1', 'M1', 'E2'], 'Kind of transition.', 'E1'),
    rules: rulesParameter('ls'),
    wavelength_min_nm: bound('Shortest wavelength, in the medium given.', 'nm', 588),
    wavelength_max_nm: bound('Longest wavelength, in the medium given.', 'nm', 590),
    medium: mediumParameter,
    wavenumber_min_invcm: bound('Smallest wavenumber.', 'cm^-1'),
    wavenumber_max_invcm: bound('Largest wavenumber.', 'cm^-1'),
    frequency_min_thz: bound('Lowest frequency.', 'THz'),
    frequency_max_thz: bound('Highest frequency.', 'THz'),
    g_eff_min: numberParameter('Smallest effective Landé factor.').optional(),
    g_eff_max: numberParameter('Largest effective Landé factor.').optional(),
    explain: explainParameter,
  }),
  check: (query) => {
    const faults: ParameterFault[] = []
    const used = WINDOWS.filter(([low, high]) => query[low] !== undefined || query[high] !== undefined)
    if (used.length > 1) {
      const second = used[1] as (typeof WINDOWS)[number]
      const name = query[second[0]] === undefined ? second[1] : second[0]
      faults.push({ parameter: name, code: 'two_windows', detail: 'Give one window only: in wavelength, in wavenumber or in frequency.' })
    }
    for (const [low, high] of [...WINDOWS, ['g_eff_min', 'g_eff_max'] as const]) {
      const [from, to] = [query[low], query[high]]
      if (from !== undefined && to !== undefined && from > to)
        faults.push({ parameter: low, code: 'range_reversed', detail: `${low} (${from}) is above ${high} (${to}): exchange them.` })
    }
    return faults
  },
  answer: Transition,
  list: true,
  edition: 'computed',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: ['species_unknown'],
  example: { query: { wavelength_min_nm: '588', wavelength_max_nm: '590', medium: 'air' } },
})

const onlyTransition = z.strictObject({ transition: transitionPath })

export const getTransition = defineOperation({
  id: 'getTransition',
  method: 'get',
  path: '/transitions/{transition}',
  summary: 'One line or forbidden pair: both levels, every rule with its verdict, wavelengths, g_eff, moments, pattern',
  tag: 'Lines',
  role: 'reader',
  params: onlyTransition,
  query: z.strictObject({ kind: kindParameter.optional() }),
  answer: TransitionDetail,
  edition: 'computed',
  problems: gone,
  example: { params: { transition: 'Na-I.1~Na-I.3' } },
})

export const getComponents = defineOperation({
  id: 'getComponents',
  method: 'get',
  path: '/transitions/{transition}/components',
  summary: 'Components of a line at a field: positions, polarisation, strength, intensity, and how far the model holds',
  description:
    'q = m_upper - m_lower, for absorption and emission alike; a positive shift is to higher wavenumber, to the blue. Strengths of each q sum to 1 at zero field. model=auto diagonalises within both LS terms where the linear law errs by more than the tolerance in positions or strengths. With hyperfine=true the components of one isotope, or of the natural mixture (isotope=natural), between sublevels F, m_F.',
  tag: 'Lines',
  role: 'reader',
  params: onlyTransition,
  query: z.strictObject({
    field,
    field_unc: fieldUncertaintyParameter.optional(),
    kind: kindParameter.optional(),
    model: modelParameter,
    g_values: gValuesParameter,
    g_s: gSParameter.optional(),
    theta_deg: thetaParameter.optional(),
    medium: mediumParameter,
    tolerance: toleranceParameter,
    diamagnetic: diamagneticParameter,
    hyperfine: hyperfineParameter,
    isotope: isotopeParameter.optional(),
  }),
  check: hyperfineFaults,
  answer: z.union([Components, HyperfineComponents]),
  edition: 'computed',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: [...gone, 'transition_forbidden', 'term_incomplete', 'no_ls_g', 'g_unknown', ...NUCLEAR_PROBLEMS, 'abundance_unknown'],
  example: { params: { transition: 'Na-I.1~Na-I.2' }, query: { field: '1.5T' } },
})

export const judgeTransition = defineOperation({
  id: 'judgeTransition',
  method: 'post',
  path: '/transitions/judge',
  summary: 'Judge two levels given in the request',
  tag: 'Lines',
  role: 'reader',
  query: z.strictObject({}),
  body: z.strictObject({
    lower: InlineLevel,
    upper: InlineLevel,
    kind: z.enum(['E1', 'M1', 'E2']).nullish(),
    g_s: z.number().min(0).max(3).nullish(),
  }),
  answer: JudgedTransition,
  edition: 'computed',
  problems: ['term_impossible', 'zero_interval', 'g_impossible'],
  example: {
    body: {
      lower: { energy_invcm: 0, s: 0, l: 0, j: 0, parity: 'even' },
      upper: { energy_invcm: 18000, s: 0, l: 1, j: 1, parity: 'odd' },
    },
  },
})
