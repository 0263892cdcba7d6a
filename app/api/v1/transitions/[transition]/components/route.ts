import { endpoint, resource } from '@/app/api/endpoint'
import { componentsAnswer } from '@/lib/prediction/answers/lines'
import { getComponents } from '@/openapi/operations/transitions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(
  endpoint(getComponents, ({ snapshot, params, query, warn }) => componentsAnswer(snapshot, params.transition, query, warn)),
)
