import { endpoint, resource } from '@/app/api/endpoint'
import { askingOf } from '@/app/api/heavy'
import { predictionsAnswer } from '@/lib/prediction/answers/bulk'
import { predict } from '@/openapi/operations/predictions'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(predict, (call) => predictionsAnswer(call.snapshot, call.body, call.format, call.warn, askingOf(call))))
