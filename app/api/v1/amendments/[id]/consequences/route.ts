import { consequencesAnswer } from '@/app/api/amendments'
import { endpoint, resource } from '@/app/api/endpoint'
import * as operations from '@/openapi/operations/amendments'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(operations.getConsequences, ({ params }) => consequencesAnswer(params.id)))
