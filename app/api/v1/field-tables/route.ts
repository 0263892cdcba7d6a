import { endpoint, resource } from '@/app/api/endpoint'
import { askingOf } from '@/app/api/heavy'
import { fieldTableAnswer } from '@/lib/prediction/answers/bulk'
import { makeFieldTable } from '@/openapi/operations/field-tables'

export const { GET, HEAD, OPTIONS, POST, PUT, PATCH, DELETE } = resource(endpoint(makeFieldTable, (call) => fieldTableAnswer(call.snapshot, call.body, call.format, askingOf(call))))
