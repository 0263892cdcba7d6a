import { endpoint, resource } from '@/app/api/endpoint'
import { sourceList } from '@/lib/prediction/answers/catalogue'
import { listSources } from '@/openapi/operations/species'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listSources, ({ snapshot, query, after }) => sourceList(snapshot, query, after)))
