import { endpoint, resource } from '@/app/api/endpoint'
import { changeList } from '@/lib/prediction/answers/editions'
import { listEditionChanges } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listEditionChanges, ({ edition, query, after }) => changeList(edition, query, after)))
