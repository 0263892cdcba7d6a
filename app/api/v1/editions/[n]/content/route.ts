import { endpoint, resource } from '@/app/api/endpoint'
import { contentFile } from '@/lib/prediction/answers/editions'
import { getEditionContent } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getEditionContent, ({ edition }) => contentFile(edition)))
