import { afterEach, describe, expect, it, vi } from 'vitest'
import { keepsMail } from '../../db/scripts/steps.mjs'

afterEach(() => void vi.unstubAllEnvs())

describe('the local stand-in for a mail server', () => {
  it.each([
    ['127.0.0.1', '', '', true], ['localhost', '1', '', true], ['0.0.0.0', '1', '', true],
    ['127.0.0.1', '0', '', false], ['127.0.0.1', 'false', '', false], ['0.0.0.0', '', '', false], ['0.0.0.0', '0', '', false],
    ['127.0.0.1', '1', 'smtp://mail.example', false],
  ])('on %s with DEMO=%s and SMTP_URL=%s: %s', (host, demo, smtp, kept) => {
    vi.stubEnv('DEMO', demo)
    vi.stubEnv('SMTP_URL', smtp)
    expect(keepsMail(host)).toBe(kept)
  })
})
