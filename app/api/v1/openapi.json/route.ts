import { endpoint, resource } from '@/app/api/endpoint'
import document from '@/openapi/openapi.json'
import { getOpenApi } from '@/openapi/operations/instance'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getOpenApi, () => ({ data: document })))
