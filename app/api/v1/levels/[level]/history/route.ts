import { endpoint, resource } from '@/app/api/endpoint'
import { historyOf } from '@/lib/prediction/answers/editions'
import { getLevelHistory } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getLevelHistory, ({ params }) => historyOf(params.level)))
