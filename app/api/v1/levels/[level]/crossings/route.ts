import { endpoint, resource } from '@/app/api/endpoint'
import { crossingsAnswer } from '@/lib/prediction/answers/levels'
import { getCrossings } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(getCrossings, ({ snapshot, params, query, warn }) => crossingsAnswer(snapshot, params.level, query, warn)),
)
