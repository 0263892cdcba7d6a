import { endpoint, resource } from '@/app/api/endpoint'
import { editionCitation } from '@/lib/prediction/answers/editions'
import { getEditionCitation } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getEditionCitation, ({ edition }) => editionCitation(edition)))
