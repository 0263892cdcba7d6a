import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { atLeast, lowerRole } from '@/lib/access/caller'
import { isKeyShaped, keyDigest, mintKey } from '@/lib/access/keys'
import { checkPassword, hashPassword, verifyPassword } from '@/lib/access/passwords'
import { checkSameSite } from '@/lib/access/same-site'
import { waitAfter } from '@/lib/access/throttle'

describe('keys', () => {
  it('carry their mark, 142 random bits and a checksum', () => {
    const keys = Array.from({ length: 200 }, mintKey)
    expect(new Set(keys.map(({ key }) => key)).size).toBe(200)
    for (const { key, sha256, prefix } of keys) {
      expect(key).toMatch(/^ldt_[0-9A-Za-z]{30}$/)
      expect(isKeyShaped(key)).toBe(true)
      expect(keyDigest(key).equals(sha256)).toBe(true)
      expect(key.startsWith(prefix)).toBe(true)
      expect(prefix).toHaveLength(10)
    }
  })

  it('are known to be mistyped without asking anyone', () => {
    const { key } = mintKey()
    for (let at = 4; at < key.length; at += 1) expect(isKeyShaped(`${key.slice(0, at)}${key[at] === 'x' ? 'y' : 'x'}${key.slice(at + 1)}`)).toBe(false)
    for (const text of [key.slice(0, -1), `${key}x`, key.slice(4), '', 'ldt_']) expect(isKeyShaped(text)).toBe(false)
    fc.assert(fc.property(fc.string(), (text) => { expect(isKeyShaped(text)).toBe(false) }))
  })
})

describe('passwords', () => {
  it('are hashed by argon2id with the parameters we state', async () => {
    const hash = await hashPassword('granite lantern orbit')
    expect(hash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/)
    expect(await verifyPassword(hash, 'granite lantern orbit')).toBe(true)
    expect(await verifyPassword(hash, 'granite lantern orbi')).toBe(false)
    expect(await verifyPassword(null, 'granite lantern orbit')).toBe(false)
    expect(hash).not.toBe(await hashPassword('granite lantern orbit'))
  })

  it('are the same however their letters are composed', async () => {
    expect(await verifyPassword(await hashPassword('caf\u00e9 au lait'), 'cafe\u0301 au lait')).toBe(true)
  })

  it.each([
    ['1234567', 'password_too_short'], ['x'.repeat(129), 'password_too_long'], ['Password1', 'password_common'], ['aaaaaaaaaa', 'password_common'],
    ['abababab', 'password_common'], ['12345678', 'password_common'], ['hgfedcba', 'password_common'], ['Lodeterm123', 'password_common'],
  ])('refuse %s as %s', (password, code) => {
    expect(() => checkPassword(password, '/password')).toThrow(expect.objectContaining({ code }) as Error)
  })

  it('may be any eight characters that are not common', () => {
    for (const password of ['zx7 plum', 'granite lantern orbit', '\u{1F30B}\u{1F30A}\u{1F33E}\u{1F333}\u{1F335}\u{1F33B}\u{1F33C}\u{1F344}', 'x'.repeat(64) + 'y'.repeat(64)]) expect(() => checkPassword(password, '/p')).not.toThrow()
  })
})

describe('waiting after failures', () => {
  it('is nothing at first, doubles, and is never more than a quarter of an hour', () => {
    const waits = Array.from({ length: 40 }, (_, failures) => waitAfter(failures, 5))
    expect(waits.slice(0, 8)).toEqual([0, 0, 0, 0, 0, 2000, 4000, 8000])
    expect(Math.max(...waits)).toBe(900_000)
    expect(waits.every((wait, at) => at === 0 || wait >= (waits[at - 1] ?? 0))).toBe(true)
  })
})

describe('roles', () => {
  it('are in one order', () => {
    expect(atLeast('admin', 'curator')).toBe(true)
    expect(atLeast('reader', 'curator')).toBe(false)
    expect(lowerRole('admin', 'reader')).toBe('reader')
  })
})

describe('changes with a session cookie', () => {
  const check = (headers: Record<string, string>, needed = true) => () => checkSameSite('POST', new Headers(headers), 'https://here.example', needed)
  it('have to come from the site itself', () => {
    expect(check({ 'sec-fetch-site': 'same-origin' })).not.toThrow()
    expect(check({ origin: 'https://here.example' })).not.toThrow()
    for (const headers of [{}, { 'sec-fetch-site': 'same-site' }, { 'sec-fetch-site': 'cross-site', origin: 'https://here.example' }, { 'sec-fetch-site': 'none' }, { origin: 'null' }, { origin: 'http://here.example' }]) {
      expect(check(headers as Record<string, string>)).toThrow(/this site/)
    }
    expect(check({}, false)).not.toThrow()
    expect(check({ origin: 'https://elsewhere.example' }, false)).toThrow()
    expect(() => checkSameSite('GET', new Headers(), 'https://here.example')).not.toThrow()
  })
})
