import { and, eq, isNull } from 'drizzle-orm'
import { afterAll, describe, expect, it } from 'vitest'
import { closeDb, getDb } from '@/db/client'
import { sealEdition } from '@/db/edition-content'
import { levelRevisions } from '@/db/schema'
import { loadEdition } from '@/lib/catalogue/load'
import { buildSnapshot, closeCatalogue, editionExists, getSnapshot, latestEdition } from '@/lib/catalogue/snapshot'
import { readSeed } from '@/seeds/read'

afterAll(async () => {
  await closeCatalogue()
  await closeDb()
})

describe('an edition loaded from the database', () => {
  it('is the data of the first edition, bit for bit', async () => {
    const snapshot = await getSnapshot(1)
    const seed = readSeed()
    expect(snapshot.species.map(({ id }) => id)).toEqual(seed.species.map(({ id }) => id))
    for (const species of seed.species) {
      species.levels.forEach((level, at) => {
        const index = snapshot.indexOf(`${species.id}.${at + 1}`)
        expect(index).toBeDefined()
        expect(snapshot.level(index ?? -1)).toMatchObject({
          energy_invcm: level.energy_invcm, energy_unc_invcm: null, energy_literal: null, energy_evidence: level.evidence, energy_source: species.source,
          coupling: level.coupling, line_checked: level.line_checked, note: level.note ?? null, alternative_name: level.alternative_name ?? null, status: 'active', revision: 1,
        })
      })
    }
    const measured = Array.from({ length: snapshot.size }, (_, i) => snapshot.level(i).g_j.all_measured.length).reduce((sum, count) => sum + count, 0)
    expect(measured).toBe(seed.measuredG.length)
    const hyperfine = Array.from({ length: snapshot.size }, (_, i) => snapshot.hyperfine(i).length).reduce((sum, count) => sum + count, 0)
    expect(hyperfine).toBe(seed.hyperfine.length)
  })

  it('is loaded once and kept', async () => {
    expect(await getSnapshot(1)).toBe(await getSnapshot(1))
  })

  it('knows which editions there are', async () => {
    expect(await latestEdition()).toBe(1)
    expect(await latestEdition()).toBe(1)
    expect(await editionExists(1)).toBe(true)
    for (const none of [0, -1, 2, 1.5, 2 ** 40]) expect(await editionExists(none)).toBe(false)
  })

  it('of a later number holds what stands in it: a retired level is gone there and stays in the earlier one', async () => {
    class Undo extends Error {}
    const seen: unknown[] = []
    await getDb()
      .transaction(async (tx) => {
        const [row] = await tx.select().from(levelRevisions).where(and(eq(levelRevisions.levelId, 'Na-I.4'), isNull(levelRevisions.publishedUntil)))
        await tx.update(levelRevisions).set({ publishedUntil: 2 }).where(and(eq(levelRevisions.levelId, 'Na-I.4'), isNull(levelRevisions.publishedUntil)))
        if (row === undefined) throw new Error('Na-I.4 is missing')
        const { coupling, configuration, twoS, l, twoJ, parity, energyInvcm, energySource, energyEvidence, levelId, speciesId } = row
        const values = { coupling, configuration, twoS, l, twoJ, parity, energyInvcm, energySource, energyEvidence, levelId, speciesId }
        await tx.insert(levelRevisions).values({ ...values, publishedFrom: 2, revision: 2, status: 'retired', retiredReason: 'entered twice', successor: 'Na-I.9' })
        await sealEdition(tx, { number: 2, label: 'Second edition', notes: '', constants: 'CODATA 2022', publishedBy: null })
        for (const edition of [1, 2]) {
          const snapshot = buildSnapshot(await loadEdition(tx, edition))
          seen.push([snapshot.size, snapshot.indexOf('Na-I.4') === undefined, snapshot.retired('Na-I.4')])
        }
        throw new Undo()
      })
      .catch((error: unknown) => {
        if (!(error instanceof Undo)) throw error
      })
    expect(seen).toEqual([
      [407, false, undefined],
      [406, true, { reason: 'entered twice', successor: 'Na-I.9', edition: 2 }],
    ])
    expect(await latestEdition()).toBe(1)
  })
})
