import { endpoint, resource } from '@/app/api/endpoint'
import { findAnswer } from '@/lib/prediction/answers/find'
import { find } from '@/openapi/operations/find'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(find, ({ snapshot, query, warn }) => findAnswer(snapshot, query, warn)))
