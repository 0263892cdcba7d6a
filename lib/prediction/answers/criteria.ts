import type { z } from 'zod'
import { parseConfiguration, printConfiguration } from '@/lib/atomic/configuration'
import { type LevelCriteria, wholeConfiguration } from '@/lib/catalogue/criteria'
import type { Snapshot } from '@/lib/catalogue/shape'
import { isProblemCode, parameterProblem } from '@/lib/problem'
import { sourceOf, speciesIndex } from '@/lib/prediction/resolve'
import type { listLevels } from '@/openapi/operations/levels'

function configurationWanted(text: string) {
  const parsed = parseConfiguration(text)
  if (parsed.ok) return wholeConfiguration(printConfiguration(parsed.value, 'canonical'))
  throw parameterProblem('configuration', isProblemCode(parsed.code) ? parsed.code : 'configuration_malformed', parsed.detail)
}

/** What a level must be, from the parameters of the list. Unknown species and sources are refused, not taken as matching nothing. */
export function levelCriteria(snapshot: Snapshot, query: z.output<(typeof listLevels)['query']>): LevelCriteria {
  const criteria: { -readonly [K in keyof LevelCriteria]: LevelCriteria[K] } = {}
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
  if (query.q !== undefined) criteria.words = query.q.split(/\s+/)
  return criteria
}
