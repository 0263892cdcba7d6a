import { endpoint, resource } from '@/app/api/endpoint'
import { levelList } from '@/lib/prediction/answers/levels'
import { listLevels } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listLevels, ({ snapshot, query, after }) => levelList(snapshot, query, after)))
