import { endpoint, resource } from '@/app/api/endpoint'
import { getPool } from '@/db/client'
import { latestEdition } from '@/lib/catalogue/snapshot'
import { Problem } from '@/lib/problem'
import { getReady } from '@/openapi/operations/instance'

const notReady = (detail: string, cause?: unknown) => new Problem('not_ready', detail, { headers: { 'retry-after': '5' }, cause })

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(getReady, async () => {
    await getPool().query('select 1').catch((error: unknown) => Promise.reject(notReady('The database does not answer.', error)))
    const edition = await latestEdition()
    if (edition === 0) throw notReady('No edition has been published yet.')
    return { data: { status: 'ok' as const, checks: { database: 'ok' as const, edition } } }
  }),
)
