import { endpoint, resource } from '@/app/api/endpoint'
import { oneEdition } from '@/lib/prediction/answers/editions'
import { getEdition } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getEdition, ({ params }) => oneEdition(params.n)))
