import { endpoint, resource } from '@/app/api/endpoint'
import { lineList } from '@/lib/prediction/answers/lines'
import { listTransitions } from '@/openapi/operations/transitions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listTransitions, ({ snapshot, query, after, warn }) => lineList(snapshot, query, after, warn)))
