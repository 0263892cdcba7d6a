import { z } from 'zod'
import { parseHalf } from '@/lib/atomic/half'
import { quoted } from '@/lib/units/number'
import type { Parsed } from '@/lib/units/parsed'
import { defineOperation } from '@/openapi/core/define'
import { choiceParameter, explainParameter, fieldParameter, halfParameter, numberParameter, readBy, repeatable, textParameter } from '@/openapi/core/parameters'
import { Crossings, GFactor, HyperfineSublevel, Level, LevelDetail, Sublevel } from '@/openapi/schemas/level'
import { Transition } from '@/openapi/schemas/transition'
import {
  amplitudesParameter, diamagneticParameter, field, gSParameter, gValuesParameter, hyperfineFaults, hyperfineParameter, kindParameter, levelPath, massNumberParameter, modelParameter,
  NUCLEAR_PROBLEMS, rulesParameter, speciesPath, termParameter, toleranceParameter,
} from './parameters'

const onlyLevel = z.strictObject({ level: levelPath })
const gone = ['level_unknown', 'level_retired']

/** A lower bound above its upper bound selects nothing, and is surely a slip. */
const ordered = <Q>(query: Q, pairs: readonly (readonly [keyof Q & string, keyof Q & string])[]) =>
  pairs.flatMap(([lower, upper]) => {
    const [low, high] = [query[lower], query[upper]]
    return typeof low === 'number' && typeof high === 'number' && low > high
      ? [{ parameter: lower, code: 'range_reversed', detail: `${lower} (${low}) is above ${upper} (${high}): exchange them.` }]
      : []
  })

export const listLevels = defineOperation({
  id: 'listLevels',
  method: 'get',
  path: '/levels',
  summary: 'Levels by species, term, J, energy, g_J, source, or in words',
  description: 'A level whose value is not known never matches a bound on that value; how many were left out so is counted in meta.excluded.',
  tag: 'Levels',
  role: 'reader',
  query: z.strictObject({
    species: repeatable(speciesPath, 'Species; may be given several times.').optional(),
    q: textParameter('Words: ion, configuration, term in any notation, level name.', { example: 'Na I 3p' }).optional(),
    term: termParameter.optional(),
    s: halfParameter('Total spin S.').optional(),
    l: numberParameter('Total orbital angular momentum L.', { min: 0, max: 30, integer: true }).optional(),
    j: halfParameter('Total angular momentum J.').optional(),
    parity: choiceParameter(['even', 'odd'], 'Parity.').optional(),
    configuration: textParameter('Configuration, with or without dots and spaces.', { example: '3d6.4s2' }).optional(),
    energy_min_invcm: numberParameter('Lowest energy.', { unit: 'cm^-1' }).optional(),
    energy_max_invcm: numberParameter('Highest energy.', { unit: 'cm^-1' }).optional(),
    g_min: numberParameter('Smallest adopted g_J.').optional(),
    g_max: numberParameter('Largest adopted g_J.').optional(),
    source: textParameter('Key of a source that a value of the level rests on.').optional(),
    sort: choiceParameter(['energy', '-energy', 'j', 'g', 'species'], 'Order of the rows.', 'energy'),
    explain: explainParameter,
  }),
  check: (query) => ordered(query, [['energy_min_invcm', 'energy_max_invcm'], ['g_min', 'g_max']]),
  answer: Level,
  list: true,
  edition: 'stored',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: ['species_unknown', 'source_unknown'],
  example: { query: { species: 'Na-I', term: '2P*' } },
})

export const getLevel = defineOperation({
  id: 'getLevel',
  method: 'get',
  path: '/levels/{level}',
  summary: 'One level with every value, its source and evidence',
  tag: 'Levels',
  role: 'reader',
  params: onlyLevel,
  answer: LevelDetail,
  edition: 'stored',
  problems: gone,
  example: { params: { level: 'Na-I.3' } },
})

export const getGFactor = defineOperation({
  id: 'getGFactor',
  method: 'get',
  path: '/levels/{level}/g-factor',
  summary: 'g_J: adopted, coupled (exact and real), measured, and how it is derived',
  tag: 'Levels',
  role: 'reader',
  params: onlyLevel,
  query: z.strictObject({ g_s: gSParameter.optional() }),
  answer: GFactor,
  edition: 'computed',
  problems: gone,
  example: { params: { level: 'Na-I.2' } },
})

export const getSublevels = defineOperation({
  id: 'getSublevels',
  method: 'get',
  path: '/levels/{level}/sublevels',
  summary: 'Energies of the sublevels at a field, one row per m',
  description:
    'model=auto diagonalises within the LS term where the linear law errs by more than the tolerance; meta.validity tells by how much. With hyperfine=true the sublevels F, m_F of one isotope, by full diagonalisation in |m_J, m_I>.',
  tag: 'Levels',
  role: 'reader',
  params: onlyLevel,
  query: z.strictObject({
    field,
    model: modelParameter,
    g_values: gValuesParameter,
    g_s: gSParameter.optional(),
    tolerance: toleranceParameter,
    diamagnetic: diamagneticParameter,
    hyperfine: hyperfineParameter,
    isotope: massNumberParameter.optional(),
    amplitudes: amplitudesParameter,
  }),
  check: hyperfineFaults,
  answer: z.union([Sublevel, HyperfineSublevel]),
  list: true,
  edition: 'computed',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: [...gone, 'term_incomplete', 'no_ls_g', 'g_unknown', ...NUCLEAR_PROBLEMS],
  example: { params: { level: 'Na-I.2' }, query: { field: '1.5T' } },
})

const sublevelName = (which: string) =>
  readBy((text): Parsed<{ twoF: number; twoM: number }> => {
    const parts = text.split(',')
    const [f, m] = parts.map((part) => parseHalf(part.trim()))
    if (parts.length !== 2 || f === undefined || m === undefined) return { ok: false, code: 'sublevel_malformed', detail: `${quoted(text)} is not a sublevel: write F and m_F (or J and m) with a comma between them, such as 2,1 or 3/2,-1/2.` }
    if (!f.ok) return f
    if (!m.ok) return m
    return { ok: true, value: { twoF: f.value, twoM: m.value } }
  }, { description: `${which} sublevel: F,m_F with hyperfine=true, else J,m of the level's term.`, type: 'string', pattern: '^[0-9./]+,[ ]*-?[0-9./]+$' })

export const getCrossings = defineOperation({
  id: 'getCrossings',
  method: 'get',
  path: '/levels/{level}/crossings',
  summary: 'Where two sublevels cross, come nearest, or keep their distance to first order in the field',
  description: 'By root finding on analytic slopes between two fields: hyperfine sublevels (F, m_F) of the level for one isotope, or, without hyperfine=true, sublevels (J, m) of its LS term.',
  tag: 'Levels',
  role: 'reader',
  params: onlyLevel,
  query: z.strictObject({
    a: sublevelName('First'),
    b: sublevelName('Second'),
    from: fieldParameter('Where to begin, as a field with its unit.').prefault('0T'),
    to: fieldParameter('Where to end, as a field with its unit.'),
    hyperfine: hyperfineParameter,
    isotope: massNumberParameter.optional(),
    g_values: gValuesParameter,
    g_s: gSParameter.optional(),
  }),
  check: (query) => [
    ...hyperfineFaults(query),
    ...(query.from < query.to ? [] : [{ parameter: 'to', code: 'range_reversed', detail: `The search ends at ${query.to} T, which is not beyond its begin at ${query.from} T.` }]),
  ],
  answer: Crossings,
  edition: 'computed',
  problems: [...gone, 'term_incomplete', 'no_such_sublevel', 'same_sublevel', 'sublevel_malformed', 'no_ls_g', 'g_unknown', ...NUCLEAR_PROBLEMS],
  example: { params: { level: 'Rb-I.1' }, query: { a: '1,-1', b: '2,1', to: '10G', isotope: '87', hyperfine: 'true' } },
})

export const listLevelTransitions = defineOperation({
  id: 'listLevelTransitions',
  method: 'get',
  path: '/levels/{level}/transitions',
  summary: 'Allowed partners of a level; the others too, with the rules that fail',
  description: 'Without kind each pair is judged as E1 where the parities differ, else M1, else E2. What the rules leave out is counted in meta.excluded.',
  tag: 'Levels',
  role: 'reader',
  params: onlyLevel,
  query: z.strictObject({
    kind: kindParameter.optional(),
    rules: rulesParameter('rigorous'),
    include: choiceParameter(['allowed', 'forbidden'], 'forbidden: list the pairs that fail as well.', 'allowed'),
    explain: explainParameter,
  }),
  answer: Transition,
  list: true,
  edition: 'computed',
  formats: ['csv', 'ndjson', 'ecsv', 'arrow'],
  problems: gone,
  example: { params: { level: 'Na-I.2' }, query: { include: 'forbidden' } },
})
