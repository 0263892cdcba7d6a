import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { connect, DENIED, GUARDED, refusal, rolledBack } from './connections'

const REVISIONS = ['species_revisions', 'isotope_revisions', 'source_revisions', 'level_revisions', 'measured_g_revisions', 'hyperfine_revisions']
const IDENTITIES = ['species', 'isotopes', 'sources', 'levels', 'measured_g', 'hyperfine_constants']
const APPENDED = ['editions', 'audit_events']

let db: Awaited<ReturnType<typeof connect>>
beforeAll(async () => {
  db = await connect()
})
afterAll(async () => {
  await db.end()
})

const columnOf = (table: string) => ({ editions: 'notes', audit_events: 'action', species_revisions: 'name', isotope_revisions: 'note', source_revisions: 'citation', level_revisions: 'note', measured_g_revisions: 'note', hyperfine_revisions: 'note' })[table]

describe('the application works as a role that owns nothing', () => {
  it('is lodeterm_app, no superuser, and owner of no table', async () => {
    const { rows } = await db.app.query(
      "select current_user as name, (select rolsuper from pg_roles where rolname = current_user) as super, (select count(*)::int from pg_class where relowner = (select oid from pg_roles where rolname = current_user)) as owned",
    )
    expect(rows).toEqual([{ name: 'lodeterm_app', super: false, owned: 0 }])
  })

  it('cannot make or alter tables, or switch triggers off', async () => {
    await rolledBack(db.app, async () => {
      for (const text of ['create table mine (x int)', 'alter table level_revisions disable trigger all', 'drop table audit_events', "set session_replication_role = 'replica'"]) {
        expect(await refusal(db.app, text), text).toMatchObject({ code: DENIED })
      }
    })
  })
})

describe('published revisions, editions and audit rows stand', () => {
  it.each([...REVISIONS, ...APPENDED])('the application may not UPDATE, DELETE or TRUNCATE %s', async (table) => {
    await rolledBack(db.app, async () => {
      const { rows } = await db.app.query(`select count(*)::int as n from ${table}`)
      expect(rows[0].n).toBeGreaterThan(0)
      expect(await refusal(db.app, `update ${table} set ${columnOf(table)} = 'changed'`)).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, `delete from ${table}`)).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, `truncate ${table} cascade`)).toMatchObject({ code: DENIED })
    })
  })

  it.each([...REVISIONS, ...APPENDED])('not even the owner of %s changes them by mistake: triggers refuse', async (table) => {
    await rolledBack(db.owner, async () => {
      expect(await refusal(db.owner, `update ${table} set ${columnOf(table)} = 'changed'`)).toMatchObject({ code: GUARDED })
      expect(await refusal(db.owner, `delete from ${table}`)).toMatchObject({ code: GUARDED })
      expect(await refusal(db.owner, `truncate ${table} cascade`)).toMatchObject({ code: GUARDED })
    })
  })

  it.each(IDENTITIES)('identities in %s are neither changed nor deleted', async (table) => {
    await rolledBack(db.app, async () => {
      expect(await refusal(db.app, `delete from ${table}`)).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, `truncate ${table} cascade`)).toMatchObject({ code: DENIED })
    })
    await rolledBack(db.owner, async () => {
      expect(await refusal(db.owner, `delete from ${table}`)).toMatchObject({ code: GUARDED })
    })
  })

  it('the one change there is: published_until from null to the next edition, once', async () => {
    await rolledBack(db.app, async () => {
      const end = 'update level_revisions set published_until = $1 where level_id = $2'
      expect(await refusal(db.app, end, [3, 'Na-I.3'])).toMatchObject({ code: GUARDED, message: expect.stringContaining('the next edition is 2') })
      expect(await refusal(db.app, end, [1, 'Na-I.3'])).toMatchObject({ code: GUARDED })
      const done = await db.app.query(end, [2, 'Na-I.3'])
      expect(done.rowCount).toBe(1)
      expect(await refusal(db.app, end, [null, 'Na-I.3'])).toMatchObject({ code: GUARDED })
      expect(await refusal(db.app, end, [3, 'Na-I.3'])).toMatchObject({ code: GUARDED })
    })
  })

  it('nothing enters an edition that is published', async () => {
    await rolledBack(db.app, async () => {
      await db.app.query("insert into sources (key) values ('a-new-source')")
      const into = "insert into source_revisions (source_key, citation, kind, published_from) values ('a-new-source', 'A new source', 'other', $1)"
      expect(await refusal(db.app, into, [1])).toMatchObject({ code: GUARDED, message: expect.stringContaining('the next edition is 2') })
      expect(await refusal(db.app, into, [3])).toMatchObject({ code: GUARDED })
      expect(await refusal(db.app, into, [2])).toBeNull()
    })
  })

  it('a revision cannot name an edition that is never published: the transaction fails at its end', async () => {
    await db.app.query('begin')
    await db.app.query("insert into sources (key) values ('a-new-source')")
    await db.app.query("insert into source_revisions (source_key, citation, kind, published_from) values ('a-new-source', 'A new source', 'other', 2)")
    await expect(db.app.query('commit')).rejects.toMatchObject({ code: '23503' })
    const { rows } = await db.app.query("select count(*)::int as n from sources where key = 'a-new-source'")
    expect(rows).toEqual([{ n: 0 }])
  })

  it('editions are numbered without gaps, and one is sealed as soon as its row is there', async () => {
    await rolledBack(db.app, async () => {
      const add = "insert into editions (number, label, notes, checksum, counts, constants) values ($1, 'x', '', repeat('0', 64), '{}', 'x')"
      expect(await refusal(db.app, add, [3])).toMatchObject({ code: GUARDED })
      expect(await refusal(db.app, add, [1])).toMatchObject({ code: GUARDED })
      await db.app.query(add, [2])
      await db.app.query("insert into sources (key) values ('a-new-source')")
      const late = await refusal(db.app, "insert into source_revisions (source_key, citation, kind, published_from) values ('a-new-source', 'A new source', 'other', 2)")
      expect(late).toMatchObject({ code: GUARDED, message: expect.stringContaining('the next edition is 3') })
    })
  })
})

describe('accounts', () => {
  it("a key's role, secret and owner stand for its life; it can be renamed and revoked", async () => {
    await rolledBack(db.app, async () => {
      const user = await db.app.query("insert into users (email, name, role) values ('k@test.example', 'K', 'reader') returning id")
      const key = await db.app.query("insert into api_keys (user_id, name, prefix, sha256, role) values ($1, 'a key', 'ldt_abc', sha256('x'), 'reader') returning id", [user.rows[0].id])
      const id = key.rows[0].id
      expect(await refusal(db.app, "update api_keys set role = 'admin' where id = $1", [id])).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, "update api_keys set sha256 = sha256('y') where id = $1", [id])).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, "update api_keys set name = 'renamed', revoked_at = now() where id = $1", [id])).toBeNull()
      expect(await refusal(db.app, 'delete from api_keys')).toMatchObject({ code: DENIED })
      expect(await refusal(db.app, 'delete from users')).toMatchObject({ code: DENIED })
    })
  })
})
