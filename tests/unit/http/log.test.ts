import { Writable } from 'node:stream'
import { DrizzleQueryError } from 'drizzle-orm/errors'
import pino from 'pino'
import { describe, expect, it } from 'vitest'
import { logSettings, shownError } from '@/lib/http/log'
import { Problem } from '@/lib/problem'

const SECRET = 'whsec_3f9c-do-not-tell\n    at secret (frame.js:1:1)'

const databaseError = (code: string, message: string, more: object = {}) =>
  Object.assign(new Error(message), { code, severity: 'ERROR', detail: `Failing row contains (${SECRET}).`, where: `unnamed portal parameter $1 = '${SECRET}'`, ...more })

const failed = (cause: Error) => new DrizzleQueryError(`insert into "webhooks" ("secret") values ($1)${' '.repeat(5000)}`, [SECRET, 'x'.repeat(1_000_000)], cause)

function written(error: unknown): { line: string; err: Record<string, unknown> } {
  let line = ''
  const log = pino(logSettings('info'), new Writable({ write(chunk: Buffer, _encoding, done) { line += chunk.toString(); done() } }))
  log.error({ err: error }, 'failed')
  return { line, err: (JSON.parse(line) as { err: Record<string, unknown> }).err }
}

describe('errors in the log', () => {
  it('tell of a failed query without its parameters', () => {
    const { line, err } = written(failed(databaseError('23505', 'duplicate key value violates unique constraint "webhooks_secret"', { table: 'webhooks', constraint: 'webhooks_secret' })))
    expect(line).not.toContain('whsec_')
    expect(line).not.toContain('frame.js')
    expect(line.length).toBeLessThan(12_000)
    expect(err).toMatchObject({ code: '23505', table: 'webhooks', constraint: 'webhooks_secret' })
    expect(err.query).toMatch(/^insert into "webhooks"/)
    expect(JSON.stringify(err)).toContain('log.test.ts')
  })

  it('tell nothing of it where it is the cause of another error, or quoted by one', () => {
    const inner = failed(databaseError('22P02', `invalid input syntax for type uuid: "${SECRET}"`))
    const { line, err } = written(new Problem('internal', 'Something failed.', { cause: inner }))
    expect(line).not.toContain('whsec_')
    expect(err).toMatchObject({ code: '22P02' })
    expect(line).toContain('invalid input syntax for type uuid')
    expect(written(new Error(`Told again: ${inner.message}`, { cause: inner })).line).not.toContain('whsec_')
  })

  it('keep message and place of any other error', () => {
    expect(shownError(new TypeError('x is not a function'))).toMatchObject({ type: 'TypeError', message: 'x is not a function', stack: expect.stringContaining('log.test.ts') as unknown })
    expect(shownError({ password: SECRET })).toEqual({ type: 'object' })
  })
})
