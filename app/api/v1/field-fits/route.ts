import { endpoint, resource } from '@/app/api/endpoint'
import { askingOf } from '@/app/api/heavy'
import { fieldFitAnswer } from '@/lib/prediction/field-fits/answer'
import { fitFieldOperation } from '@/openapi/operations/field-fits'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(fitFieldOperation, (call) => fieldFitAnswer(call.snapshot, call.body, call.warn, askingOf(call))))
