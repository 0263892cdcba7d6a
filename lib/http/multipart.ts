import { createHash } from 'node:crypto'
import type { z } from 'zod'
import { faultsOf, knownKeys, pointerPlace } from '@/lib/http/faults'
import { type Fault, Problem } from '@/lib/problem'
import { quoted } from '@/lib/units/number'
import type { UploadedFile } from '@/openapi/core/upload'

/**
 * Bodies of multipart/form-data (RFC 7578, on RFC 2046 section 5.1) over the bytes as they came: a file is a view of them, not a copy.
 */

const MOST_PARTS = 20
const LONGEST_HEAD = 16_384
const LONGEST_TEXT = 1_048_576
const LINE = Buffer.from('\r\n')
const HEAD_END = Buffer.from('\r\n\r\n')
const HYPHEN = 45

const malformed = (detail: string): Problem => new Problem('multipart_malformed', detail)

/** The boundary that the Content-Type names. */
export function boundaryOf(contentType: string | null): string {
  const found = /;\s*boundary=(?:"([^"]{1,70})"|([^\s;,"]{1,70}))/i.exec(contentType ?? '')
  const boundary = found?.[1] ?? found?.[2]
  if (boundary === undefined) throw malformed('The Content-Type of multipart/form-data names no boundary (of 1 to 70 characters).')
  return boundary
}

interface Part { name: string; fileName: string | null; mediaType: string | null; bytes: Buffer }

const utf8 = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true })

function decoded(bytes: Buffer): string | null {
  try {
    return utf8.decode(bytes)
  } catch {
    return null
  }
}

/** Value of a parameter of Content-Disposition, with the escapes that browsers (%22) and other clients (\") write. */
function parameterOf(disposition: string, name: string): string | null {
  const found = new RegExp(`;\\s*${name}=(?:"((?:[^"\\\\]|\\\\.)*)"|([^\\s;"]+))`, 'i').exec(disposition)
  if (found === null) return null
  return (found[1] ?? found[2] ?? '').replace(/\\(["\\])/g, '$1').replace(/%22/g, '"').replace(/%0D/gi, '\r').replace(/%0A/gi, '\n')
}

/** The name of a file without its folders, and without what no file name should hold. */
const plainName = (name: string): string => (name.split(/[\\/]/).at(-1) ?? '').replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029\u202a-\u202e\u2066-\u2069]/g, '').trim().slice(0, 200).toWellFormed()

function readHead(head: Buffer): Omit<Part, 'bytes'> {
  const text = decoded(head) ?? head.toString('latin1')
  const fields = new Map(text.split('\r\n').map((line): [string, string] => {
    const colon = line.indexOf(':')
    if (colon < 1) throw malformed(`The head of a part holds a line that is no field: ${quoted(line)}.`)
    return [line.slice(0, colon).trim().toLowerCase(), line.slice(colon + 1).trim()]
  }))
  const disposition = fields.get('content-disposition') ?? ''
  const name = /^form-data\s*;/i.test(disposition) ? parameterOf(disposition, 'name') : null
  if (name === null) throw malformed('A part has no Content-Disposition: form-data; name="...".')
  const fileName = parameterOf(disposition, 'filename')
  return { name, fileName: fileName === null ? null : plainName(fileName), mediaType: fields.get('content-type')?.slice(0, 200) ?? null }
}

/** The parts of a body, one after the other. */
function* partsOf(body: Buffer, boundary: string): Generator<Part> {
  const mark = Buffer.from(`--${boundary}`)
  const delimiter = Buffer.concat([LINE, mark])
  const first = body.indexOf(mark)
  if (first < 0 || (first > 0 && body.subarray(first - 2, first).compare(LINE) !== 0)) throw malformed('The boundary that the Content-Type names does not stand in the body.')
  let at = first + mark.byteLength
  for (;;) {
    if (body[at] === HYPHEN && body[at + 1] === HYPHEN) return
    const line = body.indexOf(LINE, at)
    if (line < 0 || /[^ \t]/.test(body.toString('latin1', at, Math.min(line, at + 100)))) throw malformed('A boundary is not followed by the end of its line.')
    const headEnd = body.indexOf(HEAD_END, line)
    if (headEnd < 0 || headEnd - line > LONGEST_HEAD) throw malformed('A part has no end of its head within 16 KiB.')
    const head = readHead(body.subarray(line + LINE.byteLength, headEnd))
    const start = headEnd + HEAD_END.byteLength
    // an empty part: its delimiter begins with the line end that closes the head
    const end = body.indexOf(delimiter, start - LINE.byteLength)
    if (end < 0) throw malformed('The last part is not closed by a boundary: the body was cut short.')
    yield { ...head, bytes: body.subarray(start, Math.max(start, end)) }
    at = end + delimiter.byteLength
  }
}

export interface ReadForm { value: unknown; faults: Fault[]; identity: string }

/** A body as the contract's value, or everything that is wrong with it; `identity` is the same for the same parts, whatever the boundary. */
export function readForm(schema: z.ZodType, body: Buffer, boundary: string): ReadForm {
  const parts = new Map<string, string | UploadedFile>()
  const faults: Fault[] = []
  const identity = createHash('sha256')
  let count = 0
  for (const part of partsOf(body, boundary)) {
    if ((count += 1) > MOST_PARTS) throw malformed(`The body has more than ${MOST_PARTS} parts, which nothing here takes.`)
    identity.update(JSON.stringify([part.name, part.fileName, part.bytes.byteLength])).update(part.bytes)
    const place = pointerPlace([part.name.toWellFormed()])
    if (parts.has(part.name)) {
      faults.push({ ...place, code: 'part_repeated', detail: `${quoted(part.name)} stands in the body twice.` })
      continue
    }
    if (part.fileName !== null) {
      parts.set(part.name, { name: part.fileName, mediaType: part.mediaType, bytes: part.bytes })
      continue
    }
    const text = part.bytes.byteLength > LONGEST_TEXT ? null : decoded(part.bytes)
    if (text === null) faults.push({ ...place, code: part.bytes.byteLength > LONGEST_TEXT ? 'length_out_of_range' : 'format_mismatch', detail: part.bytes.byteLength > LONGEST_TEXT ? `Text in a part has at most ${LONGEST_TEXT} bytes.` : 'The text of this part is not valid UTF-8.' })
    else if (text.includes('\0')) faults.push({ ...place, code: 'nul_byte', detail: 'Text cannot hold a NUL character.' })
    parts.set(part.name, text ?? '')
  }
  // a part that was refused above is not told of twice
  const told = new Set(faults.map((fault) => fault.pointer))
  const input: unknown = Object.fromEntries(parts)
  const result = schema.safeParse(input)
  if (!result.success) faults.push(...faultsOf(result.error.issues, input, pointerPlace, (path) => knownKeys(schema, path)).filter((fault) => !told.has(fault.pointer)))
  return { value: result.success ? result.data : undefined, faults, identity: identity.digest('hex') }
}
