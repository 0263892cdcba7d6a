import { endpoint, resource } from '@/app/api/endpoint'
import { partnerList } from '@/lib/prediction/answers/lines'
import { listLevelTransitions } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(listLevelTransitions, ({ snapshot, params, query, after, warn }) => partnerList(snapshot, params.level, query, after, warn)),
)
