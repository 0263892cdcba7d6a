import { z } from 'zod'

/** A file sent as a part of a multipart/form-data body. */
export interface UploadedFile {
  /** As the sender calls it, without folders. */
  name: string
  mediaType: string | null
  bytes: Buffer
}

const isUploaded = (value: unknown): value is UploadedFile => typeof value === 'object' && value !== null && 'bytes' in value && value.bytes instanceof Uint8Array

/** The part that carries the file. */
export const filePart = (description: string) =>
  z.unknown().transform((value, context): UploadedFile => {
    if (isUploaded(value)) return value
    context.addIssue(value === undefined
      ? { code: 'custom', message: 'Needed and not given: one part with a file name, which is the file.', params: { code: 'missing_field' } }
      : { code: 'custom', message: 'Send this part as a file, with a file name; it came as plain text.', params: { code: 'wrong_type' } })
    return z.NEVER
  }).meta({ type: 'string', format: 'binary', description })

/** Longest text that is read as JSON in a part. */
const LONGEST = 200_000
const NUL = String.fromCharCode(0)

/** A part that holds JSON of the shape given. */
export const jsonPart = <T extends z.ZodType>(shape: T, meta: { description: string; example?: string }) =>
  z.string().max(LONGEST).transform((text, context): unknown => {
    try {
      const value: unknown = JSON.parse(text)
      // neither can be kept in the database
      const whole = JSON.stringify(value)
      if (whole.includes('\\u0000') || text.includes(NUL)) context.addIssue({ code: 'custom', message: 'Text cannot hold a NUL character.', params: { code: 'nul_byte' } })
      else if (/\\ud[89a-f]/i.test(whole)) context.addIssue({ code: 'custom', message: 'It holds half of a character (a lone surrogate).', params: { code: 'format_mismatch' } })
      else return value
    } catch {
      context.addIssue({ code: 'custom', message: 'This part must be JSON, and cannot be parsed.', params: { code: 'format_mismatch' } })
    }
    return z.NEVER
  }).pipe(shape).meta({ type: 'string', contentMediaType: 'application/json', ...meta })
