import { endpoint, resource } from '@/app/api/endpoint'
import { oneSpecies } from '@/lib/prediction/answers/catalogue'
import { getSpecies } from '@/openapi/operations/species'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getSpecies, ({ snapshot, params }) => oneSpecies(snapshot, params.species)))
