import fs from 'node:fs'
import path from 'node:path'
import { fileURLToPath } from 'node:url'

// Writes api.ts, the types of the client, from the OpenAPI document. Run by `npm run openapi`; a test fails when api.ts is stale.

type Json = null | boolean | number | string | Json[] | { [key: string]: Json }
interface Schema {
  $ref?: string
  type?: string | string[]
  enum?: Json[]
  const?: Json
  anyOf?: Schema[]
  oneOf?: Schema[]
  allOf?: Schema[]
  items?: Schema
  prefixItems?: Schema[]
  properties?: Record<string, Schema>
  required?: string[]
  additionalProperties?: boolean | Schema
  description?: string
  contentMediaType?: string
}
interface Parameter { name: string; in: string; required?: boolean; description?: string; schema: Schema }
interface Content { [type: string]: { schema: Schema } | undefined }
interface Operation {
  operationId: string
  summary?: string
  description?: string
  parameters?: Parameter[]
  requestBody?: { content: Content }
  responses: Record<string, { content?: Content }>
}
interface Document { paths: Record<string, Record<string, Operation>>; components: { schemas: Record<string, Schema> } }

const METHODS = ['get', 'post', 'put', 'patch', 'delete']
const FORMATS: Record<string, string> = {
  'application/json': 'json', 'text/csv': 'csv', 'application/x-ndjson': 'ndjson', 'application/x-ecsv': 'ecsv', 'application/vnd.apache.arrow.stream': 'arrow',
}

const quoted = (text: string): string => `'${text.replaceAll('\\', '\\\\').replaceAll("'", "\\'").replaceAll('\n', '\\n')}'`
const literal = (value: Json): string => (typeof value === 'string' ? quoted(value) : JSON.stringify(value))
const key = (name: string): string => (/^[A-Za-z_$][\w$]*$/.test(name) ? name : quoted(name))
const union = (types: string[]): string => [...new Set(types)].join(' | ')
const within = (type: string): string => (/ [|&] /.test(type) && !/^[{(]/.test(type) ? `(${type})` : type)

function comment(text: string | undefined, indent: string): string {
  return text === undefined || text === '' ? '' : `${indent}/** ${text.replaceAll('*/', '* /').replaceAll('\n', `\n${indent} * `)} */\n`
}

function plainType(type: string, schema: Schema, indent: string): string {
  switch (type) {
    case 'string': return schema.contentMediaType === 'application/octet-stream' ? 'Blob' : 'string'
    case 'integer': case 'number': return 'number'
    case 'boolean': case 'null': return type
    case 'array': {
      if (schema.prefixItems !== undefined) return `[${schema.prefixItems.map((item) => typeOf(item, indent)).join(', ')}]`
      const item = schema.items === undefined ? 'unknown' : typeOf(schema.items, indent)
      return item.includes(' | ') || item.includes(' & ') ? `(${item})[]` : `${item}[]`
    }
    case 'object': return objectType(schema, indent)
    default: return 'unknown'
  }
}

function objectType(schema: Schema, indent: string): string {
  const members = Object.entries(schema.properties ?? {}).map(([name, member]) => {
    const mark = schema.required?.includes(name) === true ? '' : '?'
    return `${comment(member.description, `${indent}  `)}${indent}  ${key(name)}${mark}: ${typeOf(member, `${indent}  `)}\n`
  })
  const rest = schema.additionalProperties
  if (members.length === 0) return rest === false ? 'Record<string, never>' : `Record<string, ${typeof rest === 'object' ? typeOf(rest, indent) : 'unknown'}>`
  if (rest === undefined || rest === true) members.push(`${indent}  [other: string]: unknown\n`)
  return `{\n${members.join('')}${indent}}`
}

function typeOf(schema: Schema, indent: string): string {
  if (schema.$ref !== undefined) return schema.$ref.split('/').at(-1) ?? 'unknown'
  if (schema.const !== undefined) return literal(schema.const)
  if (schema.enum !== undefined) return union(schema.enum.map(literal))
  const choices = schema.anyOf ?? schema.oneOf
  if (choices !== undefined) return union(choices.map((choice) => typeOf(choice, indent)))
  if (schema.allOf !== undefined) return schema.allOf.map((part) => within(typeOf(part, indent))).join(' & ')
  if (schema.type === undefined) return schema.properties === undefined ? 'unknown' : objectType(schema, indent)
  return union([schema.type].flat().map((type) => plainType(type, schema, indent)))
}

/** A parameter is text on its way: numbers may be given where text is meant, so `field: 1.5` and `edition: 1` read well. */
function parameterType(schema: Schema, indent: string): string {
  const type = typeOf(schema, indent)
  if (type === 'string') return 'string | number'
  if (type === 'string[]') return 'string | string[]'
  return type
}

function operationType(method: string, at: string, operation: Operation): string {
  const indent = '    '
  const given = (operation.parameters ?? []).filter((parameter) => parameter.in !== 'header')
  const parameters = given.map((parameter) => `${comment(parameter.description, `${indent}  `)}${indent}  ${key(parameter.name)}${parameter.required === true ? '' : '?'}: ${parameterType(parameter.schema, `${indent}  `)}\n`)
  const body = Object.entries(operation.requestBody?.content ?? {}).map(([type, content]) => (type === 'multipart/form-data' ? 'FormData' : content === undefined ? 'unknown' : typeOf(content.schema, indent)))
  const answers = Object.entries(operation.responses).filter(([status]) => status.startsWith('2')).map(([, response]) => {
    const schema = response.content?.['application/json']?.schema
    return schema === undefined ? 'undefined' : typeOf(schema, indent)
  })
  return [
    comment([operation.summary, operation.description].filter(Boolean).join('. '), '  '),
    `  ${operation.operationId}: {\n`,
    `${indent}method: ${quoted(method)}\n${indent}path: ${quoted(at)}\n`,
    `${indent}parameters: ${parameters.length === 0 ? 'Record<string, never>' : `{\n${parameters.join('')}${indent}}`}\n`,
    `${indent}body: ${body.length === 0 ? 'undefined' : union(body)}\n`,
    `${indent}answer: ${union(answers)}\n`,
    '  }\n',
  ].join('')
}

/** What the runtime has to know of an operation. A POST that answers 200 and takes no Idempotency-Key computes and changes nothing. */
function operationEntry(method: string, at: string, operation: Operation): string {
  const names = (where: string): string => `[${(operation.parameters ?? []).filter((parameter) => parameter.in === where).map(({ name }) => quoted(name)).join(', ')}]`
  const headers = (operation.parameters ?? []).filter((parameter) => parameter.in === 'header').map(({ name }) => name)
  const safe = method === 'get' || (method === 'post' && operation.responses['200'] !== undefined && !headers.includes('Idempotency-Key') && !headers.includes('If-Match'))
  const formats = Object.keys(operation.responses['200']?.content ?? {}).flatMap((type) => (FORMATS[type] === undefined ? [] : [quoted(FORMATS[type])]))
  return `  ${operation.operationId}: { method: ${quoted(method)}, path: ${quoted(at)}, inPath: ${names('path')}, inQuery: ${names('query')}, formats: [${formats.join(', ')}], safe: ${String(safe)} },\n`
}

/** The text of api.ts for an OpenAPI document given as text. */
export function clientTypes(document: string): string {
  const { paths, components } = JSON.parse(document) as Document
  const operations = Object.entries(paths).flatMap(([at, methods]) => METHODS.flatMap((method) => (methods[method] === undefined ? [] : [{ method, at, operation: methods[method] }])))
  const schemas = Object.entries(components.schemas).map(([name, schema]) => {
    const type = typeOf(schema, '')
    const isObject = schema.type === 'object' && type.startsWith('{')
    return `${comment(schema.description, '')}${isObject ? `export interface ${name} ${type}` : `export type ${name} = ${type}`}\n\n`
  })
  return [
    '// Written by generate.ts from the OpenAPI document (npm run openapi); do not edit.\n\n',
    ...schemas,
    'export interface Operations {\n', ...operations.map(({ method, at, operation }) => operationType(method, at, operation)), '}\n\n',
    '/** What the client has to know of each operation. `safe`: it changes nothing, so it may be asked again. */\n',
    'export const OPERATIONS = {\n', ...operations.map(({ method, at, operation }) => operationEntry(method, at, operation)),
    '} as const satisfies { [id in keyof Operations]: { method: string; path: string; inPath: readonly string[]; inQuery: readonly string[]; formats: readonly string[]; safe: boolean } }\n',
  ].join('')
}

const here = path.dirname(fileURLToPath(import.meta.url))
export const DOCUMENT_FILE = path.join(here, '../../openapi/openapi.json')
export const TYPES_FILE = path.join(here, 'api.ts')

if (process.argv[1] === fileURLToPath(import.meta.url)) fs.writeFileSync(TYPES_FILE, clientTypes(fs.readFileSync(DOCUMENT_FILE, 'utf8')))
