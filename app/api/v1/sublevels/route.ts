import { endpoint, resource } from '@/app/api/endpoint'
import { sublevelMatrixAnswer } from '@/lib/prediction/answers/physics'
import { computeSublevels } from '@/openapi/operations/computed'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(computeSublevels, ({ body, warn }) => sublevelMatrixAnswer(body, warn)))
