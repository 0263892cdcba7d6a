import { endpoint, resource } from '@/app/api/endpoint'
import { feedList } from '@/lib/prediction/answers/editions'
import { listChanges } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listChanges, ({ query, after }) => feedList(query, after)))
