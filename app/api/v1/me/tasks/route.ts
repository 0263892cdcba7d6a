import { endpoint, resource } from '@/app/api/endpoint'
import { getDb } from '@/db/client'
import { tasksOf } from '@/lib/curation/tasks'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(operations.getTasks, async ({ caller }) => ({ data: await tasksOf(getDb(), caller), headers: { 'cache-control': 'no-store' } })))
