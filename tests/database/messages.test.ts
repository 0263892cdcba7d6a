import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { listen } from '@/db/client'
import { connect } from './connections'

let db: Awaited<ReturnType<typeof connect>>
beforeAll(async () => {
  db = await connect()
})
afterAll(async () => {
  await db.end()
})

const until = async (condition: () => boolean, milliseconds = 10_000) => {
  const end = Date.now() + milliseconds
  while (!condition() && Date.now() < end) await new Promise((done) => setTimeout(done, 20))
  return condition()
}

describe('messages that keep caches fresh', () => {
  it('tells of a changed user, session and key, and not of mere use', async () => {
    const heard: string[] = []
    let open = false
    const listener = listen(['lodeterm_access'], (_channel, payload) => heard.push(payload), (connected) => (open = connected))
    try {
      expect(await until(() => open)).toBe(true)
      const user = (await db.app.query("insert into users (email, name, role) values ('m@test.example', 'M', 'reader') returning id")).rows[0].id
      const key = (await db.app.query("insert into api_keys (user_id, name, prefix, sha256, role) values ($1, 'k', 'ldt_m', sha256('messages'), 'reader') returning id", [user])).rows[0].id
      const session = (await db.app.query("insert into sessions (user_id, expires_at) values ($1, now() + interval '1 hour') returning id", [user])).rows[0].id
      await db.app.query('update api_keys set last_used_at = now() where id = $1', [key])
      await db.app.query('update sessions set last_seen_at = now() where id = $1', [session])
      await db.app.query('update api_keys set revoked_at = now() where id = $1', [key])
      await db.app.query('update sessions set ended_at = now() where id = $1', [session])
      await db.app.query('update users set active = false where id = $1', [user])
      expect(await until(() => heard.length >= 6)).toBe(true)
      expect(heard.map((payload) => JSON.parse(payload))).toEqual([
        { kind: 'user', id: user }, { kind: 'key', id: key }, { kind: 'session', id: session },
        { kind: 'key', id: key }, { kind: 'session', id: session }, { kind: 'user', id: user },
      ])
    } finally {
      await listener.close()
    }
  })

  it('says so when the connection is lost, and opens it again', async () => {
    const states: boolean[] = []
    const heard: string[] = []
    const listener = listen(['lodeterm_editions'], (_channel, payload) => heard.push(payload), (connected) => states.push(connected))
    try {
      expect(await until(() => states.length === 1)).toBe(true)
      await db.app.query("select pg_terminate_backend(pid) from pg_stat_activity where application_name = 'lodeterm listener'")
      expect(await until(() => states.length === 3)).toBe(true)
      expect(states).toEqual([true, false, true])
      await db.app.query("select pg_notify('lodeterm_editions', 'again')")
      expect(await until(() => heard.length === 1)).toBe(true)
      expect(heard).toEqual(['again'])
    } finally {
      await listener.close()
    }
  })
})
