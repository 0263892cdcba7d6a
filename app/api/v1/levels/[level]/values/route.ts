import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { levelValues } from '@/lib/curation/level-values'
import { levelIndex } from '@/lib/prediction/resolve'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(operations.getLevelValues, async ({ snapshot, params, edition }) => {
    // refuses what is not there, or is retired, as every other operation on a level does
    levelIndex(snapshot, params.level)
    return { data: await levelValues(getDb(), edition, params.level) }
  }),
)
