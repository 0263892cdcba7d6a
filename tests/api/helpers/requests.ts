import { type Documented, type ParameterDoc } from './conformance'
import type { Sending } from './client'
import { formOf } from './form'

/** A request that an operation understands, made from the examples in the document. */
export interface Baseline { path: Record<string, string>; query: [string, string][]; body: unknown; form: Record<string, string> | null; headers: Record<string, string> }

const exampleOf = (parameter: ParameterDoc): unknown => parameter.example ?? parameter.schema.example

const textsOf = (value: unknown): string[] => (Array.isArray(value) ? value.map(String) : [String(value)])

export function baselineOf({ operation }: Documented): Baseline {
  const path: Record<string, string> = {}
  const query: [string, string][] = []
  for (const parameter of operation.parameters ?? []) {
    const example = exampleOf(parameter)
    if (parameter.in === 'path') {
      if (example === undefined) throw new Error(`${operation.operationId}: path parameter ${parameter.name} has no example in the document`)
      path[parameter.name] = String(example)
    } else if (parameter.in === 'query' && parameter.example !== undefined) for (const text of textsOf(example)) query.push([parameter.name, text])
    else if (parameter.in === 'query' && parameter.required === true) throw new Error(`${operation.operationId}: ${parameter.name} is required and has no example in the document`)
  }
  const multipart = operation.requestBody?.content['multipart/form-data']
  const content = multipart ?? operation.requestBody?.content['application/json']
  if (operation.requestBody !== undefined && content?.example === undefined) throw new Error(`${operation.operationId}: its body has no example in the document`)
  const needsTag = (operation.parameters ?? []).some((parameter) => parameter.name === 'If-Match')
  return { path, query, body: multipart === undefined ? content?.example : undefined, form: (multipart?.example as Record<string, string> | undefined) ?? null, headers: needsTag ? { 'if-match': '"none"' } : {} }
}

/** Address below /api/v1 of a request. */
export function addressOf(template: string, { path, query }: Pick<Baseline, 'path' | 'query'>): string {
  const at = template.replace(/\{([^}]+)\}/g, (_, name: string) => encodeURIComponent(path[name] ?? ''))
  return query.length === 0 ? at : `${at}?${query.map(([name, text]) => `${encodeURIComponent(name)}=${encodeURIComponent(text)}`).join('&')}`
}

export function sendingOf(baseline: Baseline): Sending {
  if (baseline.form === null) return { headers: baseline.headers, ...(baseline.body === undefined ? {} : { body: baseline.body }) }
  const { file = '', ...fields } = baseline.form
  const { raw, headers } = formOf(file, fields)
  return { raw, headers: { ...baseline.headers, ...headers } }
}
