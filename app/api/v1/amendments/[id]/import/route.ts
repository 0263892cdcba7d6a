import { actingOf, addressOf } from '@/app/api/acting'
import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { readImport, startImport } from '@/lib/curation/import'
import { getConfig } from '@/lib/config'
import { processLog } from '@/lib/http/log'
import { importLevels } from '@/openapi/operations/imports'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(importLevels, async (call) => {
    const { params, query, body } = call
    const { id, finished } = await startImport(getDb(), actingOf(call), params.id, body, query.dry_run,
      (failed, error) => processLog(getConfig().logLevel).error({ err: error, import: failed, requestId: call.requestId }, 'an import failed'))
    if (query.wait) await finished
    // nobody waits: what became of it stands in the import
    else finished.catch(() => undefined)
    return { data: await readImport(getDb(), params.id, id), status: query.wait ? 200 : 202, headers: { location: addressOf(`/amendments/${params.id}/imports/${id}`) } }
  }),
)
