import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { CHECKED, connect, EXCLUDED, insertLevelRevision, rolledBack } from './connections'

let db: Awaited<ReturnType<typeof connect>>
beforeAll(async () => {
  db = await connect()
})
afterAll(async () => {
  await db.end()
})

/** Publishes a new level of sodium into edition 2 that is like 3p 2P*3/2 but for the changes. */
const addLike = (changes: Record<string, unknown>) =>
  rolledBack(db.app, async () => {
    await db.app.query("insert into levels (id, species_id, ordinal) values ('Na-I.900', 'Na-I', 900)")
    await insertLevelRevision(db.app, 'Na-I.3', { level_id: 'Na-I.900', published_from: 2, ...changes })
  })

describe('no twins within an edition', () => {
  it('refuses a second level that agrees in configuration, label, term, J and repeat index', async () => {
    await expect(addLike({})).rejects.toMatchObject({ code: EXCLUDED, constraint: 'level_revisions_no_twins' })
    await expect(addLike({ energy_invcm: 1 })).rejects.toMatchObject({ code: EXCLUDED })
  })

  it.each([{ two_j: 1, configuration: '9p' }, { configuration: '9p' }, { label: 'z' }, { repeat_index: 2 }])('accepts one that differs in %o', async (change) => {
    await expect(addLike(change)).resolves.toBeUndefined()
  })

  it('accepts the same name once the first has left: the range of editions counts', async () => {
    await rolledBack(db.app, async () => {
      await db.app.query("update level_revisions set published_until = 2 where level_id = 'Na-I.3'")
      await db.app.query("insert into levels (id, species_id, ordinal) values ('Na-I.900', 'Na-I', 900)")
      await db.app.query(
        `insert into level_revisions (level_id, species_id, configuration, coupling, two_s, l, two_j, parity, energy_invcm, energy_source, energy_evidence, published_from)
         select 'Na-I.900', species_id, configuration, coupling, two_s, l, two_j, parity, energy_invcm, energy_source, energy_evidence, 2 from level_revisions where level_id = 'Na-I.3'`,
      )
      const { rows } = await db.app.query("select level_id from level_revisions where species_id = 'Na-I' and configuration = '3p' and two_j = 3 and published_from <= 2 and (published_until is null or published_until > 2)")
      expect(rows).toEqual([{ level_id: 'Na-I.900' }])
    })
  })

  it('refuses two revisions of one level in one edition', async () => {
    await expect(rolledBack(db.app, () => insertLevelRevision(db.app, 'Na-I.3', { published_from: 2, revision: 2, label: 'z' }))).rejects.toMatchObject({
      code: EXCLUDED, constraint: 'level_revisions_one_per_edition',
    })
  })
})

describe('checks on the values of a level', () => {
  it.each([
    ['J beyond L + S', { two_j: 5 }, 'level_revisions_j_ls'],
    ['J of the wrong kind', { two_j: 2 }, 'level_revisions_j_ls'],
    ['negative J', { coupling: 'unassigned', two_s: null, l: null, two_j: -1 }, 'level_revisions_momenta'],
    ['LS without L', { l: null }, 'level_revisions_coupling'],
    ['K beside LS', { two_k: 3 }, 'level_revisions_coupling'],
    ['an unknown coupling', { coupling: 'LK' }, 'level_revisions_coupling'],
    ['an unknown parity', { parity: 'neither' }, 'level_revisions_parity'],
    ['a negative uncertainty', { energy_unc_invcm: -0.1 }, 'level_revisions_energy_unc'],
    ['an uncertainty that is no number', { energy_unc_invcm: 'NaN' }, 'level_revisions_energy_unc'],
    ['an energy that is no number', { energy_invcm: 'NaN' }, 'level_revisions_energy'],
    ['an infinite energy', { energy_invcm: 'Infinity' }, 'level_revisions_energy'],
    ['an unknown grade', { energy_evidence: 'guessed' }, 'level_revisions_evidence'],
    ['a retired level without a reason', { status: 'retired' }, 'level_revisions_status'],
    ['a chosen g without a reason', { g_chosen: 1.3 }, 'level_revisions_g_chosen'],
    ['a draft of no amendment', { published_from: null }, 'level_revisions_draft_has_amendment'],
  ])('refuses %s', async (_what, changes, constraint) => {
    await expect(addLike({ configuration: '9p', ...changes })).rejects.toMatchObject({ code: CHECKED, constraint })
  })

  it('refuses a draft that leaves an edition it never entered', async () => {
    await rolledBack(db.app, async () => {
      const author = (await db.app.query("insert into users (email, name, role) values ('d@test.example', 'D', 'curator') returning id")).rows[0].id
      const amendment_id = (await db.app.query("insert into amendments (title, author) values ('A draft', $1) returning id", [author])).rows[0].id
      const draft = { published_from: null, amendment_id, label: 'z' }
      await expect(insertLevelRevision(db.app, 'Na-I.3', draft)).resolves.toBeUndefined()
      await expect(insertLevelRevision(db.app, 'Na-I.3', { ...draft, published_until: 2 })).rejects.toMatchObject({ code: CHECKED, constraint: 'level_revisions_edition_range' })
    })
  })

  it('refuses pair coupling where J is not K +- 1/2, or K not made by the core and the outer electron', async () => {
    const pair = { configuration: '9p', coupling: 'J1K', two_s: null, l: null, core_two_s: 1, core_l: 1, core_two_j: 3, l_outer: 0, two_k: 3, two_j: 4 }
    await expect(addLike(pair)).resolves.toBeUndefined()
    await expect(addLike({ ...pair, two_j: 6 })).rejects.toMatchObject({ code: CHECKED, constraint: 'level_revisions_j_pair' })
    await expect(addLike({ ...pair, two_k: 5 })).rejects.toMatchObject({ code: CHECKED, constraint: 'level_revisions_j_pair' })
    await expect(addLike({ ...pair, core_two_j: 5 })).rejects.toMatchObject({ code: CHECKED, constraint: 'level_revisions_j_pair' })
  })

  it('refuses a level of one species under the identity of another', async () => {
    await expect(addLike({ species_id: 'K-I', configuration: '9p' })).rejects.toMatchObject({ code: '23503' })
  })

  it('refuses an identity that is not its species and ordinal', async () => {
    await expect(rolledBack(db.app, () => db.app.query("insert into levels (id, species_id, ordinal) values ('Na-I.901', 'Na-I', 900)"))).rejects.toMatchObject({ code: CHECKED })
  })
})

describe('an edition is a range condition', () => {
  it('shows each revision from its edition until the next one, and nothing else', async () => {
    await rolledBack(db.app, async () => {
      await db.app.query("update level_revisions set published_until = 2 where level_id = 'Na-I.3'")
      await db.app.query(
        `insert into level_revisions (level_id, species_id, configuration, coupling, two_s, l, two_j, parity, energy_invcm, energy_source, energy_evidence, published_from, revision)
         select level_id, species_id, configuration, coupling, two_s, l, two_j, parity, 17000, energy_source, energy_evidence, 2, 2 from level_revisions where level_id = 'Na-I.3'`,
      )
      const at = async (edition: number) =>
        (await db.app.query("select energy_invcm, revision from level_revisions where level_id = 'Na-I.3' and published_from <= $1 and (published_until is null or published_until > $1)", [edition])).rows
      expect(await at(1)).toEqual([{ energy_invcm: 16973.36619, revision: 1 }])
      expect(await at(2)).toEqual([{ energy_invcm: 17000, revision: 2 }])
      expect(await at(3)).toEqual([{ energy_invcm: 17000, revision: 2 }])
      expect(await at(0)).toEqual([])
    })
  })
})
