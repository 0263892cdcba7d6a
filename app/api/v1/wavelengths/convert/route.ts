import { endpoint, resource } from '@/app/api/endpoint'
import { conversionAnswer } from '@/lib/prediction/answers/physics'
import { convertWavelength } from '@/openapi/operations/computed'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(convertWavelength, ({ query, warn }) => conversionAnswer(query, warn)))
