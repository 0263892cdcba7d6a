import { endpoint, resource } from '@/app/api/endpoint'
import { sublevelList } from '@/lib/prediction/answers/levels'
import { getSublevels } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(getSublevels, ({ snapshot, params, query, after, warn }) => sublevelList(snapshot, params.level, query, after, warn)),
)
