import { endpoint, resource } from '@/app/api/endpoint'
import { oneLevel } from '@/lib/prediction/answers/levels'
import { getLevel } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getLevel, ({ snapshot, params }) => oneLevel(snapshot, params.level)))
