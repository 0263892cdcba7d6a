import { endpoint, resource } from '@/app/api/endpoint'
import { getLive } from '@/openapi/operations/instance'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getLive, () => ({ data: { status: 'ok' as const } })))
