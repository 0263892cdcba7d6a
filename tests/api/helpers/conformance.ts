import fs from 'node:fs'
import path from 'node:path'
import addFormats from 'ajv-formats'
import Ajv2020, { type ValidateFunction } from 'ajv/dist/2020'

interface Schema { [keyword: string]: unknown }
interface HeaderDoc { required?: boolean; schema?: Schema }
interface ResponseDoc { headers?: Record<string, HeaderDoc>; content?: Record<string, { schema: Schema }> }
export interface ParameterDoc { name: string; in: 'path' | 'query' | 'header'; required?: boolean; schema: Schema; example?: unknown }
export interface OperationDoc {
  operationId: string
  'x-role': 'public' | 'reader' | 'account' | 'curator' | 'admin'
  security: Record<string, unknown>[]
  parameters?: ParameterDoc[]
  requestBody?: { content: Record<string, { schema: Schema; example?: unknown }> }
  responses: Record<string, ResponseDoc>
}
export interface ApiDocument { paths: Record<string, Record<string, OperationDoc>>; components: { schemas: Record<string, Schema> } }

export const document = JSON.parse(fs.readFileSync(path.join(import.meta.dirname, '../../../openapi/openapi.json'), 'utf8')) as ApiDocument

export interface Documented { method: string; path: string; operation: OperationDoc }
/** Every operation of the document. */
export const documented: Documented[] = Object.entries(document.paths).flatMap(([at, methods]) => Object.entries(methods).map(([method, operation]) => ({ method, path: at, operation })))

const ajv = new Ajv2020({ strict: false, allErrors: true })
addFormats(ajv)
ajv.addSchema(document, 'api')
const compiled = new Map<string, ValidateFunction>()

/** A validator of one schema inside the document, by its JSON pointer. */
export function validatorAt(pointer: readonly string[]): ValidateFunction {
  const reference = `api#/${pointer.map((part) => encodeURIComponent(part.replaceAll('~', '~0').replaceAll('/', '~1'))).join('/')}`
  let validate = compiled.get(reference)
  if (validate === undefined) compiled.set(reference, (validate = ajv.compile({ $ref: reference })))
  return validate
}

const templateFits = (template: string, at: string): boolean =>
  new RegExp(`^${template.replace(/[.*+?^$()|[\]\\]/g, '\\$&').replace(/\{[^}]+\}/g, '[^/]+')}$`).test(at)

/** Path template that an address below /api/v1 belongs to; one without parameters wins. */
export function templateOf(at: string): string | undefined {
  const fitting = Object.keys(document.paths).filter((template) => templateFits(template, at))
  return fitting.find((template) => !template.includes('{')) ?? fitting[0]
}

export interface Answered { status: number; headers: Record<string, string | undefined>; text: string; bytes: Buffer }

const REQUEST_ID = /^[0-9a-f]{8}-[0-9a-f]{4}-4[0-9a-f]{3}-[89ab][0-9a-f]{3}-[0-9a-f]{12}$/

function headerFaults(headers: Record<string, HeaderDoc>, answered: Answered): string[] {
  return Object.entries(headers).flatMap(([name, doc]) => {
    const value = answered.headers[name.toLowerCase()]
    if (value === undefined) return doc.required === true ? [`header ${name} is missing`] : []
    const validate = ajv.compile(doc.schema ?? {})
    return validate(value) ? [] : [`header ${name} is ${value}: ${ajv.errorsText(validate.errors)}`]
  })
}

const parse = (text: string): unknown => {
  try {
    return JSON.parse(text) as unknown
  } catch {
    return undefined
  }
}

/** What every problem document has to be, wherever it comes from. */
function problemFaults(answered: Answered): string[] {
  const body = parse(answered.text) as Record<string, unknown> | undefined
  if (body === undefined) return ['the problem is not JSON']
  const faults: string[] = []
  const validate = validatorAt(['components', 'schemas', 'Problem'])
  if (!validate(body)) faults.push(`problem: ${ajv.errorsText(validate.errors)}`)
  if (body.status !== answered.status) faults.push(`status in the problem is ${String(body.status)}`)
  if (body.instance !== answered.headers['x-request-id']) faults.push('instance is not the request id')
  if (!String(body.type).endsWith(`/problems/${String(body.code)}`)) faults.push(`type ${String(body.type)} is not the page of ${String(body.code)}`)
  return faults
}

/** Everything in which an answer is not as the OpenAPI document says; empty when it conforms. */
export function conformanceFaults(method: string, url: string, answered: Answered): string[] {
  const faults: string[] = []
  if (!REQUEST_ID.test(answered.headers['x-request-id'] ?? '')) faults.push('no X-Request-Id')
  const verb = method.toLowerCase()
  if (verb === 'options') return faults
  const at = (url.split('?')[0] ?? '').replace(/^\/api\/v1/, '')
  const template = templateOf(at)
  const type = (answered.headers['content-type'] ?? '').split(';')[0] ?? ''
  if (answered.status >= 400) {
    if (type !== 'application/problem+json') faults.push(`an error of type ${type}`)
    else if (verb !== 'head') faults.push(...problemFaults(answered))
    if (answered.status === 401 && !answered.headers['www-authenticate']) faults.push('401 without WWW-Authenticate')
    if (answered.status === 405 && !answered.headers.allow) faults.push('405 without Allow')
    if ((answered.status === 429 || answered.status === 503) && !answered.headers['retry-after']) faults.push(`${answered.status} without Retry-After`)
  }
  const operation = template === undefined ? undefined : document.paths[template]?.[verb === 'head' ? 'get' : verb]
  if (template === undefined) return answered.status === 404 || answered.status === 400 || answered.status === 401 ? faults : [...faults, `${at} is not in the document and answered ${answered.status}`]
  if (operation === undefined) return [405, 401, 400].includes(answered.status) ? faults : [...faults, `${method} ${template} is not in the document and answered ${answered.status}`]
  const response = operation.responses[String(answered.status)]
  if (response === undefined) return [...faults, `status ${answered.status} of ${operation.operationId} is not documented`]
  faults.push(...headerFaults(response.headers ?? {}, answered))
  if (answered.status === 204 || answered.status === 304) return answered.text === '' ? faults : [...faults, `${answered.status} with a body`]
  if (response.content?.[type] === undefined) faults.push(`media type ${type} is not documented for ${answered.status}`)
  else if (verb === 'head') return answered.text === '' ? faults : [...faults, 'HEAD with a body']
  else if (type === 'application/json') {
    const body = parse(answered.text)
    const validate = validatorAt(['paths', template, verb, 'responses', String(answered.status), 'content', type, 'schema'])
    if (!validate(body)) faults.push(`body: ${ajv.errorsText(validate.errors, { separator: '; ' }).slice(0, 1500)}`)
  }
  return faults
}
