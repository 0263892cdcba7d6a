import { endpoint, resource } from '@/app/api/endpoint'
import { sourceCitation } from '@/lib/prediction/answers/editions'
import { getSourceCitation } from '@/openapi/operations/editions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getSourceCitation, ({ snapshot, params }) => sourceCitation(snapshot, params.key)))
