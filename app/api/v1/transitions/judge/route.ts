import { endpoint, resource } from '@/app/api/endpoint'
import { judgeAnswer } from '@/lib/prediction/answers/lines'
import { judgeTransition } from '@/openapi/operations/transitions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(judgeTransition, ({ body, warn }) => judgeAnswer(body, warn)))
