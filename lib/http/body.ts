import type { z } from 'zod'
import { faultsOf, knownKeys, pointerPlace } from '@/lib/http/faults'
import { type Fault, Problem } from '@/lib/problem'

export const BODY_LIMIT_BYTES = 1_048_576

const tooLarge = (limit: number) => new Problem('body_too_large', `The body is larger than ${limit} bytes, which is the most that is taken; send less.`)

/** Refuses a body of another media type before a byte of it is read. */
export function checkContentType(contentType: string | null, hasBody: boolean, wanted = 'application/json'): void {
  if (!hasBody) return
  const type = (contentType ?? '').split(';')[0]?.trim().toLowerCase() ?? ''
  if (type !== wanted) {
    throw new Problem('unsupported_media_type', contentType === null ? `The body has no Content-Type; send ${wanted}.` : `The body is ${JSON.stringify(type.slice(0, 100))}; send ${wanted}.`, { headers: { 'accept': wanted } })
  }
}

/** Whether a request carries a body, by its framing fields. */
export const hasBody = (headers: Headers): boolean => headers.has('transfer-encoding') || Number(headers.get('content-length') ?? '0') > 0

/** How much of a refused body is read: what anyone sends by mistake. Nothing of it is kept. */
const DRAIN_BYTES = 64 * BODY_LIMIT_BYTES

/**
 * Reads a refused body to its end, or as far as anyone sends by mistake, and throws it away, before the refusal is sent: a client that is
 * still sending would else find the connection closed under it before it could read why.
 */
async function drain(reader: ReadableStreamDefaultReader<Uint8Array>, most: number): Promise<void> {
  let length = 0
  try {
    for (let step = await reader.read(); !step.done && length < most; step = await reader.read()) length += step.value.byteLength
    await reader.cancel()
  } catch {
    // the client has gone: nobody waits for the answer
  }
}

/** The body's bytes, at most `limit` of them; a declared length beyond that is refused without keeping anything. */
export async function readBytes(request: Request, limit: number): Promise<Buffer> {
  const declared = Number(request.headers.get('content-length') ?? '0')
  if (request.body === null) return Buffer.alloc(0)
  const reader = request.body.getReader()
  const refuse = async (): Promise<never> => {
    await drain(reader, Math.max(DRAIN_BYTES, 4 * limit))
    throw tooLarge(limit)
  }
  if (declared > limit) await refuse()
  // with a declared length the pieces go straight to their place, so that a large file stands in memory once
  const whole = declared > BODY_LIMIT_BYTES ? Buffer.allocUnsafe(declared) : null
  const pieces: Uint8Array[] = []
  let length = 0
  for (;;) {
    const step = await reader.read()
    if (step.done) break
    const from = length
    length += step.value.byteLength
    if (length > (whole?.byteLength ?? limit)) await refuse()
    if (whole === null) pieces.push(step.value)
    else whole.set(step.value, from)
  }
  return whole === null ? Buffer.concat(pieces) : whole.subarray(0, length)
}

export async function readText(request: Request): Promise<string> {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(await readBytes(request, BODY_LIMIT_BYTES))
  } catch (error) {
    if (error instanceof TypeError) throw new Problem('body_not_json', 'The body is not valid UTF-8, which JSON has to be.')
    throw error
  }
}

/** Characters that no text here can hold: NUL, and one half of a surrogate pair, which is no character at all. */
function characterFaults(value: unknown, path: readonly PropertyKey[], faults: Fault[]): void {
  if (typeof value === 'string') {
    if (value.includes('\0')) faults.push({ ...pointerPlace(path), code: 'nul_byte', detail: 'Text cannot hold a NUL character.' })
    if (!value.isWellFormed()) faults.push({ ...pointerPlace(path), code: 'format_mismatch', detail: 'The text holds half of a surrogate pair, which is no character.' })
  } else if (typeof value === 'object' && value !== null) {
    for (const [key, inside] of Object.entries(value)) {
      if (key.includes('\0') || !key.isWellFormed()) faults.push({ ...pointerPlace(path), code: 'nul_byte', detail: 'A key cannot hold a NUL character, nor half of a surrogate pair.' })
      characterFaults(inside, [...path, key], faults)
    }
  }
}

const DEEPEST = 32

/** Brackets opened and not closed at the deepest place, outside of strings: a bound before anything recursive looks at the body. */
export function nesting(text: string): number {
  let depth = 0
  let deepest = 0
  let inText = false
  for (let i = 0; i < text.length; i += 1) {
    const c = text.charCodeAt(i)
    if (inText) {
      if (c === 92) i += 1
      else if (c === 34) inText = false
    } else if (c === 34) inText = true
    else if (c === 91 || c === 123) deepest = Math.max(deepest, (depth += 1))
    else if (c === 93 || c === 125) depth -= 1
  }
  return deepest
}

function parseJson(text: string): unknown {
  if (nesting(text) > DEEPEST) throw new Problem('body_not_json', `The body is nested deeper than ${DEEPEST} levels, which nothing here is.`)
  try {
    return JSON.parse(text)
  } catch (error) {
    const where = error instanceof Error ? /position (\d+)/.exec(error.message)?.[1] : undefined
    throw new Problem('body_not_json', text.trim() === '' ? 'The body is empty.' : `The body cannot be parsed as JSON${where === undefined ? '' : ` (character ${where})`}.`)
  }
}

/** The body as a domain value, or everything that is wrong with it. */
export function readBody(schema: z.ZodType, text: string): { value: unknown; faults: Fault[] } {
  const json = parseJson(text)
  const nul: Fault[] = []
  // both come in JSON only as escapes, NUL also as it is
  if (text.includes('\0') || /\\u(?:0000|[dD][89a-fA-F])/.test(text)) characterFaults(json, [], nul)
  const result = schema.safeParse(json)
  if (result.success) return { value: result.data, faults: nul }
  return { value: undefined, faults: [...nul, ...faultsOf(result.error.issues, json, pointerPlace, (path) => knownKeys(schema, path))] }
}
