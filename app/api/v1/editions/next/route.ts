import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import * as next from '@/lib/curation/next-edition'
import { previewNextEdition } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(previewNextEdition, async () => ({ data: await next.previewNextEdition(getDb()) })))
