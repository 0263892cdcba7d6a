import { endpoint, resource } from '@/app/api/endpoint'
import { oneTransition } from '@/lib/prediction/answers/lines'
import { getTransition } from '@/openapi/operations/transitions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getTransition, ({ snapshot, params, query, warn }) => oneTransition(snapshot, params.transition, query, warn)))
