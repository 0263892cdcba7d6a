import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { boundaryOf, readForm } from '@/lib/http/multipart'
import { readRequest, planRequest } from '@/lib/http/request'
import { Problem } from '@/lib/problem'
import { defineOperation, type Operation } from '@/openapi/core/define'
import { buildDocument } from '@/openapi/core/registry'
import { filePart, jsonPart, type UploadedFile } from '@/openapi/core/upload'

const schema = z.strictObject({ file: filePart('The file.'), note: z.string().max(5000).optional(), map: jsonPart(z.record(z.string(), z.string()), { description: 'A map.' }).optional() })
const operation = defineOperation({
  id: 'sendFile', method: 'post', path: '/files', summary: 's', tag: 't', role: 'curator', body: schema, multipart: { limitBytes: 2_000_000 }, answer: z.strictObject({ n: z.int() }), edition: 'none', idempotent: true, accepts202: true,
  example: { body: { file: 'a,b' } },
}) as unknown as Operation
const plan = planRequest(operation)

type Parts = Record<string, string | Blob>
function formOf(parts: Parts, name = 'levels.csv'): FormData {
  const form = new FormData()
  for (const [key, value] of Object.entries(parts)) {
    if (typeof value === 'string') form.append(key, value)
    else form.append(key, value, name)
  }
  return form
}

const send = (body: BodyInit, headers: Record<string, string> = {}) => {
  const request = new Request('http://here.example/api/v1/files', { method: 'POST', body, headers })
  // as a server sees it, where the framing fields stand
  const framed = new Headers(request.headers)
  if (!framed.has('content-length')) framed.set('transfer-encoding', 'chunked')
  return readRequest(operation, plan, new Request(request, { headers: framed }), { path: '/files', search: '' })
}
const refusal = async (reading: Promise<unknown>): Promise<Problem> => {
  const error = await reading.then(() => null, (caught: unknown) => caught)
  if (!(error instanceof Problem)) throw error ?? new Error('it was taken')
  return error
}
const codes = async (reading: Promise<unknown>): Promise<string[]> => ((await refusal(reading)).errors ?? []).map((fault) => `${fault.pointer} ${fault.code}`).sort()

const raw = (text: string) => readForm(schema, Buffer.from(text.replaceAll('\n', '\r\n'), 'latin1'), 'x')

describe('a form', () => {
  it('comes as values and one file, whatever its bytes and names are', async () => {
    const texts = fc.string({ unit: 'grapheme', maxLength: 100 }).map((text) => text.replaceAll('\0', '').replace(/\r\n|\r|\n/g, '\r\n'))
    await fc.assert(fc.asyncProperty(fc.uint8Array({ maxLength: 3000 }), texts, fc.stringMatching(/^[a-z" %;='ä😀]{1,20}$/u), async (bytes, note, name) => {
      const read = await send(formOf({ file: new Blob([bytes as Uint8Array<ArrayBuffer>]), note }, name))
      const body = read.body as { file: UploadedFile; note: string }
      expect([...body.file.bytes]).toEqual([...bytes])
      expect(body.note).toBe(note)
      expect(body.file.name).toBe(name.trim())
    }), { numRuns: 60 })
  })

  it('keeps content that looks like a boundary, and a part that is empty', () => {
    const { value } = raw('--x\nContent-Disposition: form-data; name="file"; filename="C:\\\\t\\\\a.csv"\nContent-Type: text/csv\n\n--y\n -- x\nx--\n--x\ncontent-disposition: form-data; name=note\n\n\n--x--\n')
    const body = value as { file: UploadedFile; note: string }
    expect(body.file.bytes.toString()).toBe('--y\r\n -- x\r\nx--')
    expect([body.file.name, body.file.mediaType, body.note]).toEqual(['a.csv', 'text/csv', ''])
  })

  it('is the same request with another boundary, and another with other bytes', async () => {
    const once = await send(formOf({ file: new Blob(['a']), note: 'n' }))
    const again = await send(formOf({ file: new Blob(['a']), note: 'n' }))
    const other = await send(formOf({ file: new Blob(['b']), note: 'n' }))
    expect(again.bodyIdentity).toBe(once.bodyIdentity)
    expect(other.bodyIdentity).not.toBe(once.bodyIdentity)
  })

  it('names every part that is unknown, missing, repeated or of the wrong kind', async () => {
    expect(await codes(send(formOf({ nto: 'x' })))).toEqual(['/file missing_field', '/nto unknown_field'])
    expect(await codes(send(formOf({ file: 'text', map: '{' })))).toEqual(['/file wrong_type', '/map format_mismatch'])
    expect(await codes(send(formOf({ file: new Blob(['a']), map: '{"a":"\\u0000"}', note: 'a\0b' })))).toEqual(['/map nul_byte', '/note nul_byte'])
    const twice = formOf({ file: new Blob(['a']) })
    twice.append('file', new Blob(['b']), 'b.csv')
    expect(await codes(send(twice))).toEqual(['/file part_repeated'])
  })

  it('is refused where it is cut, has no boundary, or is something else', async () => {
    const bad = ['', 'hello', '--x', '--x\n', '--x\n\n\na\n--x--', '--x\nContent-Disposition: form-data\n\na\n--x--', '--x\nContent-Disposition: form-data; name="file"; filename="a"\n\nabc', '--xy\nContent-Disposition: form-data; name="note"\n\na\n--xy--', '--x\nno field\n\na\n--x--']
    for (const text of bad) expect(() => raw(text), JSON.stringify(text)).toThrow(Problem)
    expect(() => boundaryOf('multipart/form-data')).toThrow(Problem)
    expect(boundaryOf('multipart/form-data; charset=utf-8; boundary="a b"')).toBe('a b')
    expect((await refusal(send('{}', { 'content-type': 'application/json' }))).code).toBe('unsupported_media_type')
    expect((await refusal(send(formOf({ file: new Blob([new Uint8Array(3_200_000)]) })))).code).toBe('body_too_large')
  })

  it('never makes the reader fail otherwise', () => {
    fc.assert(fc.property(fc.array(fc.constantFrom('--x', '\r\n', '--', 'Content-Disposition: form-data; name="file"', '; filename="a"', '\r\n\r\n', 'a', ':', '"', '\\', '\0', 'ÿ')).map((parts) => parts.join('')), (text) => {
      try {
        readForm(schema, Buffer.from(text, 'latin1'), 'x')
      } catch (error) {
        expect(error).toBeInstanceOf(Problem)
      }
    }), { numRuns: 500 })
  })

  it('stands in the document with its file', () => {
    const paths = buildDocument([operation]).paths as Record<string, Record<string, { requestBody: { content: Record<string, { schema: { properties: Record<string, unknown>; required: string[] } }> }; responses: Record<string, unknown> }>>
    const content = paths['/files']?.post?.requestBody.content['multipart/form-data']
    expect(content?.schema.properties.file).toMatchObject({ type: 'string', format: 'binary' })
    expect(content?.schema.required).toEqual(['file'])
    expect(Object.keys(paths['/files']?.post?.responses ?? {})).toEqual(expect.arrayContaining(['200', '202', '413', '415']))
  })
})
