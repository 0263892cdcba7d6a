import { endpoint, resource } from '@/app/api/endpoint'
import { levelMapFile } from '@/lib/prediction/answers/editions'
import { getLevelMap } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getLevelMap, ({ snapshot, query }) => levelMapFile(snapshot, query.since)))
