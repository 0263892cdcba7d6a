import type { z } from 'zod'
import { parseConfiguration, printConfiguration } from '@/lib/atomic/configuration'
import { type LevelCriteria, levelVerdict, wholeConfiguration } from '@/lib/catalogue/criteria'
import { criteriaOfQuery } from '@/lib/catalogue/find'
import type { Snapshot } from '@/lib/catalogue/shape'
import { isProblemCode, parameterProblem } from '@/lib/problem'
import { sourceOf, speciesIndex } from '@/lib/prediction/resolve'
import type { listLevels } from '@/openapi/operations/levels'

function configurationWanted(text: string) {
  const parsed = parseConfiguration(text)
  if (parsed.ok) return wholeConfiguration(printConfiguration(parsed.value, 'canonical'))
  throw parameterProblem('configuration', isProblemCode(parsed.code) ? parsed.code : 'configuration_malformed', parsed.detail)
}

type Criteria = { -readonly [K in keyof LevelCriteria]: LevelCriteria[K] }

/** What the filters ask, words aside. Unknown species and sources are refused, not taken as matching nothing. */
function filters(snapshot: Snapshot, query: z.output<(typeof listLevels)['query']>): Criteria {
  const criteria: Criteria = {}
  if (query.species !== undefined) criteria.species = new Set(query.species.map((id) => speciesIndex(snapshot, id)))
  if (query.term !== undefined) criteria.terms = [query.term]
  if (query.s !== undefined) criteria.twoS = query.s
  if (query.l !== undefined) criteria.l = query.l
  if (query.j !== undefined) criteria.twoJ = [query.j]
  if (query.parity !== undefined) criteria.parity = query.parity
  if (query.configuration !== undefined) criteria.configurations = [configurationWanted(query.configuration)]
  if (query.energy_min_invcm !== undefined) criteria.energyMin = query.energy_min_invcm
  if (query.energy_max_invcm !== undefined) criteria.energyMax = query.energy_max_invcm
  if (query.g_min !== undefined) criteria.gMin = { value: query.g_min }
  if (query.g_max !== undefined) criteria.gMax = { value: query.g_max }
  if (query.source !== undefined) criteria.source = sourceOf(snapshot, query.source, 'source').key
  return criteria
}

function matching(snapshot: Snapshot, criteria: LevelCriteria): Set<number> {
  const verdict = levelVerdict(snapshot, criteria)
  const indices = new Set<number>()
  for (let i = 0; i < snapshot.size; i += 1) if (verdict(i) === 'in') indices.add(i)
  return indices
}

/** What a level must be, from the parameters of the list. Filters and words must both hold, also where they speak of the same thing. */
export function levelCriteria(snapshot: Snapshot, query: z.output<(typeof listLevels)['query']>): LevelCriteria {
  const criteria = filters(snapshot, query)
  if (query.q === undefined) return criteria
  const words = criteriaOfQuery(snapshot, query.q)
  const bothSpeak = Object.keys(words).some((name) => name in criteria)
  return bothSpeak ? { ...criteria, levels: matching(snapshot, words) } : { ...criteria, ...words }
}
