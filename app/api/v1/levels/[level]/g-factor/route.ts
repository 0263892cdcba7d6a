import { endpoint, resource } from '@/app/api/endpoint'
import { gFactorAnswer } from '@/lib/prediction/answers/levels'
import { getGFactor } from '@/openapi/operations/levels'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(getGFactor, ({ snapshot, params, query, warn }) => gFactorAnswer(snapshot, params.level, query, warn)))
