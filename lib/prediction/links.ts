import type { Edition } from '@/openapi/schemas/edition'
import type { LevelDetail } from '@/openapi/schemas/level'
import type { TransitionDetail } from '@/openapi/schemas/transition'

/** Links are paths on the same host: the API below /api/v1, the pages beside it. Ids hold no character that needs escaping. */
const API = '/api/v1'

export const linksOfLevel = (level: { id: string; species: string; energy_source: string }): LevelDetail['links'] => ({
  self: `${API}/levels/${level.id}`,
  page: `/levels/${level.id}`,
  species: `${API}/species/${level.species}`,
  g_factor: `${API}/levels/${level.id}/g-factor`,
  sublevels: `${API}/levels/${level.id}/sublevels`,
  transitions: `${API}/levels/${level.id}/transitions`,
  energy_source: `${API}/sources/${level.energy_source}`,
})

export function linksOfTransition(lower: string, upper: string): TransitionDetail['links'] {
  const id = `${lower}~${upper}`
  return {
    self: `${API}/transitions/${id}`,
    page: `/lines/${id}`,
    components: `${API}/transitions/${id}/components`,
    lower: `${API}/levels/${lower}`,
    upper: `${API}/levels/${upper}`,
  }
}

export const linksOfEdition = (number: number): Edition['links'] => ({
  self: `${API}/editions/${number}`,
  page: `/editions/${number}`,
  levels: `${API}/editions/${number}/levels`,
  changes: `${API}/editions/${number}/changes`,
})
