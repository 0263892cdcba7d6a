import { endpoint, resource } from '@/app/api/endpoint'
import { fieldFitAnswer } from '@/lib/prediction/field-fits/answer'
import { fitFieldOperation } from '@/openapi/operations/field-fits'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(fitFieldOperation, ({ snapshot, body, warn }) => fieldFitAnswer(snapshot, body, warn)))
