import { endpoint, resource } from '@/app/api/endpoint'
import { oneSource } from '@/lib/prediction/answers/catalogue'
import { getSource } from '@/openapi/operations/species'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getSource, ({ snapshot, params }) => oneSource(snapshot, params.key)))
