import { afterAll, describe, expect, it } from 'vitest'
import { closeDb, getDb } from '@/db/client'
import { countContent, readEditionContent, sealEdition, verifyEdition } from '@/db/edition-content'
import { editions, sourceRevisions, sources } from '@/db/schema'
import { loadFirstEdition } from '@/seeds/load'
import { readSeed } from '@/seeds/read'

const db = getDb()
afterAll(closeDb)

const seed = readSeed()
const content = await readEditionContent(db, 1)
const byId = <T extends { id: string }>(list: T[]) => new Map(list.map((entity) => [entity.id, entity]))
const twice = (text: string) => (text.endsWith('/2') ? Number(text.slice(0, -2)) : 2 * Number(text))

describe('edition 1', () => {
  it('has 33 species and 407 levels, and counts what it holds', async () => {
    expect(countContent(content)).toEqual({ species: 33, levels: 407, sources: 55, measured_g: 51, isotopes: 81, hyperfine_constants: 25 })
    const [edition] = await db.select().from(editions)
    expect(edition?.counts).toEqual(countContent(content))
    expect(edition).toMatchObject({ number: 1, constants: 'CODATA 2022', publishedBy: null })
  })

  it('is loaded once: again changes nothing', async () => {
    expect(await loadFirstEdition(db)).toBeNull()
    expect(await readEditionContent(db, 1)).toEqual(content)
  })

  it('still has the content its checksum was made from', async () => {
    const sums = await verifyEdition(db, 1)
    expect(sums?.stored).toMatch(/^[0-9a-f]{64}$/)
    expect(sums?.computed).toBe(sums?.stored)
  })

  it('has another checksum as soon as one value differs, be it a source', async () => {
    const before = (await verifyEdition(db, 1))?.stored
    class Undo extends Error {}
    let next = ''
    await db.transaction(async (tx) => {
      await tx.insert(sources).values({ key: 'a-new-source' })
      await tx.insert(sourceRevisions).values({ sourceKey: 'a-new-source', citation: 'A new source', kind: 'other', publishedFrom: 2 })
      next = (await sealEdition(tx, { number: 2, label: 'First edition', notes: '', constants: 'CODATA 2022', publishedBy: null })).checksum
      throw new Undo()
    }).catch((error: unknown) => {
      if (!(error instanceof Undo)) throw error
    })
    expect(next).toMatch(/^[0-9a-f]{64}$/)
    expect(next).not.toBe(before)
  })
})

describe('the data as they were given', () => {
  it('stores each level bit for bit, numbered in the order of its species', () => {
    const stored = byId(content.levels)
    let compared = 0
    for (const species of seed.species) {
      species.levels.forEach((level, index) => {
        const row = stored.get(`${species.id}.${index + 1}`)
        expect(row).toMatchObject({
          species: species.id, energy_invcm: level.energy_invcm, energy_unc_invcm: null, energy_literal: null, energy_source: species.source,
          energy_evidence: level.evidence, line_checked: level.line_checked, label: level.label, coupling: level.coupling, parity: level.parity,
          two_j: twice(level.j), alternative_name: level.alternative_name ?? null, note: level.note ?? null, status: 'active',
        })
        expect(Object.is(row?.energy_invcm, level.energy_invcm)).toBe(true)
        // The canonical configuration says the same shells in the same order as the text it was read from.
        expect(String(row?.configuration).replaceAll(/[.*]/g, '')).toBe(level.configuration.replaceAll(/[ .*]/g, ''))
        compared += 1
      })
    }
    expect(compared).toBe(407)
  })

  it('stores isotopes and ionisation energies bit for bit, and raises no grade', () => {
    const [stored, isotopes] = [byId(content.species), byId(content.isotopes)]
    for (const species of seed.species) {
      expect(stored.get(species.id)).toMatchObject({
        name: species.name, z: species.z, charge: species.charge, ionisation_energy_invcm: species.ionisation_energy_invcm,
        ionisation_source: species.source, ionisation_evidence: species.evidence,
      })
      for (const isotope of species.isotopes) {
        expect(isotopes.get(`${species.id}/${isotope.mass_number}`)).toMatchObject({
          mass_u: isotope.mass_u, two_i: twice(isotope.spin), abundance_percent: isotope.abundance_percent, g_i: isotope.g_i ?? null, evidence: species.isotope_evidence,
        })
      }
    }
  })

  it('stores measured g and hyperfine constants bit for bit', () => {
    expect(content.measured_g.map(({ id, value, unc, source, evidence, note, literal }) => [id, value, unc, source, evidence, note, literal]).sort()).toEqual(
      seed.measuredG.map((row) => [row.level, row.value, row.unc, row.source, row.evidence, row.note, null]).sort(),
    )
    expect(content.hyperfine_constants.map((row) => [row.id, row.isotope, row.a_mhz, row.a_unc_mhz, row.b_mhz, row.b_unc_mhz, row.source, row.evidence, row.note]).sort()).toEqual(
      seed.hyperfine.map((row) => [row.level, `${row.level.slice(0, row.level.indexOf('.'))}/${row.mass_number}`, row.a_mhz, row.a_unc_mhz, row.b_mhz, row.b_unc_mhz, row.source, row.evidence, row.note]).sort(),
    )
  })

  it('gives every value a source that is in the edition', () => {
    const keys = new Set(content.sources.map(({ id }) => id))
    const named = [...content.levels.map((row) => row.energy_source), ...content.species.map((row) => row.ionisation_source), ...[...content.isotopes, ...content.measured_g, ...content.hyperfine_constants].map((row) => row.source)]
    expect(named.filter((key) => typeof key !== 'string' || !keys.has(key))).toEqual([])
    expect([...keys].filter((key) => !named.includes(key))).toEqual([])
  })
})

describe('rows that need care', () => {
  const levels = byId(content.levels)
  const core = new Map(content.species.map((row) => [row.id, row.core_configuration]))

  it('has the cores of the species, which need not be noble gases', () => {
    expect(Object.fromEntries(['Zn-I', 'Cd-I', 'Hg-I', 'Ne-I', 'O-I', 'N-II', 'Si-I', 'Ar-I', 'Ar-II', 'Kr-I', 'Xe-II', 'H-I'].map((id) => [id, core.get(id)]))).toEqual({
      'Zn-I': '[Ar].3d10', 'Cd-I': '[Kr].4d10', 'Hg-I': '[Xe].4f14.5d10', 'Ne-I': '1s2.2s2', 'O-I': '1s2.2s2', 'N-II': '1s2.2s2', 'Si-I': '[Ne].3s2',
      'Ar-I': '[Ne].3s2', 'Ar-II': '[Ne].3s2', 'Kr-I': '[Ar].3d10.4s2', 'Xe-II': '[Kr].4d10.5s2', 'H-I': '',
    })
  })

  it('brings the ground pair of Ar II to the core of its other levels', () => {
    expect(levels.get('Ar-II.1')).toMatchObject({ configuration: '3p5', two_s: 1, l: 1, two_j: 3 })
    expect(levels.get('Ar-II.2')).toMatchObject({ configuration: '3p5', two_s: 1, l: 1, two_j: 1 })
  })

  it('keeps the letter of a repeated term as the label, and the parents in the configuration', () => {
    expect(levels.get('Fe-I.1')).toMatchObject({ label: 'a', two_s: 4, l: 2, two_j: 8, configuration: '3d6.4s2' })
    expect(levels.get('Fe-I.15')).toMatchObject({ label: 'z', two_s: 6, l: 2, two_j: 6, configuration: '3d6.(5D).4s.4p.(3P*)' })
    expect(levels.get('Na-I.3')).toMatchObject({ label: null, two_s: 1, l: 1, two_j: 3, configuration: '3p' })
  })

  it('stores pair-coupled levels as such, with the second name that is in use for them', () => {
    expect(levels.get('Ne-I.2')).toMatchObject({ coupling: 'J1K', two_s: null, l: null, two_k: 3, core_two_s: 1, core_l: 1, core_two_j: 3, l_outer: 0, two_j: 4, alternative_name: '1s5', note: null })
    expect(levels.get('Ne-I.16')).toMatchObject({ alternative_name: '3s2', note: 'upper level of the 632.8 nm laser line' })
    expect(levels.get('Kr-I.10')).toMatchObject({ alternative_name: '2p3', note: null })
    expect(content.levels.filter((level) => level.coupling === 'J1K').length).toBe(15 + 14 + 10 + 5)
  })

  it('gives the measured g of neon to its levels in order of energy', () => {
    // 2[3/2] J = 1 comes three times: 3s 1.464, then 3p 0.669 and 0.999; 2[1/2] J = 1 in 5s has none.
    const g = (id: string) => content.measured_g.filter((row) => row.id === id).map((row) => row.value)
    expect([g('Ne-I.3'), g('Ne-I.9'), g('Ne-I.11'), g('Ne-I.14'), g('Ne-I.16'), g('Ne-I.4')]).toEqual([[1.464], [0.669], [0.999], [1.34], [], []])
    expect(g('Ar-I.12')).toEqual([0.819])
  })

  it('keeps both values where there are two', () => {
    const values = (id: string) => content.measured_g.filter((row) => row.id === id).map((row) => row.value).sort()
    expect(values('Cs-I.3')).toEqual([1.33408749, 1.334].sort())
    expect(values('Hg-I.3')).toEqual([1.486094, 1.48614])
  })

  it('has hyperfine constants only where the table has the level', () => {
    expect(content.hyperfine_constants.filter((row) => String(row.id).startsWith('Mn-I'))).toEqual([])
    expect(content.hyperfine_constants.filter((row) => row.isotope === 'Cr-I/53').map((row) => row.id)).toEqual(['Cr-I.1'])
  })
})
