import { endpoint, resource } from '@/app/api/endpoint'
import { termAnswer } from '@/lib/prediction/answers/physics'
import { decodeTerm } from '@/openapi/operations/computed'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(decodeTerm, ({ params, query }) => termAnswer(params.symbol, query.g_s)))
