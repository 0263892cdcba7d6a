import { describe, expect, it } from 'vitest'
import { oneLine } from '@/openapi/core/one-line'

describe('a name or title', () => {
  it.each(['Na I 3p ²P°₃/₂', 'Ω–Å', 'नमस्ते', 'می‌خواهم', '<b>'])('may be %s', (text) => {
    expect(oneLine().parse(` ${text} `)).toBe(text)
  })

  it.each([['nothing', '  '], ['a line break', 'a\nb'], ['a carriage return', 'N\r\nBcc: q'], ['a mark of direction', 'a\u202eb'], ['only characters of no width', '\u200b\u200b'], ['a control character', 'a\u0007'], ['too much', 'x'.repeat(201)]])('is not %s', (_, text) => {
    expect(oneLine().safeParse(text).success).toBe(false)
  })
})
