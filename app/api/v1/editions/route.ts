import { endpoint, resource } from '@/app/api/endpoint'
import { editionList } from '@/lib/prediction/answers/editions'
import { listEditions } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listEditions, ({ query, after }) => editionList(query, after)))
