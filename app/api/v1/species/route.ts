import { endpoint, resource } from '@/app/api/endpoint'
import { speciesList } from '@/lib/prediction/answers/catalogue'
import { listSpecies } from '@/openapi/operations/species'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(listSpecies, ({ snapshot, query, after }) => speciesList(snapshot, query, after)))
