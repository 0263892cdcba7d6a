import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fieldsBetween, levelValues } from '@/lib/prediction/changes'
import { citeEdition, citeSource, readAuthors } from '@/lib/prediction/citations'
import { levelMap } from '@/lib/prediction/level-map'
import { changeTable, levelMapTable } from '@/lib/prediction/tables/editions'
import { writeTable } from '@/lib/http/writers'
import type { Change } from '@/openapi/schemas/edition'
import { edition, level, SODIUM_LEVELS } from './edition'

const before = edition(SODIUM_LEVELS)
const after = edition(
  [
    ...SODIUM_LEVELS.slice(0, 1),
    level({ ...SODIUM_LEVELS[1], energyInvcm: 16956.17, revision: 2 }),
    level({ ...SODIUM_LEVELS[2], status: 'retired', retiredReason: 'named anew', successor: 'Na-I.4', publishedFrom: 2, revision: 2 }),
    level({ ...SODIUM_LEVELS[2], ordinal: 4, status: 'retired', retiredReason: 'named anew', successor: 'Na-I.5', publishedFrom: 2, revision: 2 }),
    level({ ...SODIUM_LEVELS[2], ordinal: 5, energyInvcm: 16973.4 }),
    level({ ordinal: 6, configuration: '4s', energyInvcm: 25739.999 }),
  ],
  { edition: 2 },
)

describe('what differs between two levels', () => {
  it('is told field by field, under dotted names', () => {
    const [old, now] = [before.level(before.indexOf('Na-I.2') ?? -1), after.level(after.indexOf('Na-I.2') ?? -1)]
    expect(fieldsBetween(levelValues(old), levelValues(now))).toEqual([{ field: 'energy_invcm', before: 16956.17025, after: 16956.17 }])
    expect(fieldsBetween(levelValues(old), levelValues(old))).toEqual([])
    expect(fieldsBetween(new Map(), levelValues(now))).toContainEqual({ field: 'term.symbol', before: null, after: '2P*1/2' })
  })

  it('has one row a field in CSV, and one for what is new', () => {
    const changes: Change[] = [
      { kind: 'level', subject: 'Na-I.6', level: 'Na-I.6', species: 'Na-I', action: 'created', fields: [{ field: 'energy_invcm', before: null, after: 1 }, { field: 'note', before: null, after: '=1' }] },
      { kind: 'source', subject: 'a-b', level: null, species: null, action: 'replaced', fields: [{ field: 'note', before: null, after: '=1' }, { field: 'year', before: 2000, after: 2001 }] },
    ]
    expect(writeTable('csv', changeTable(changes, 'x'), {}).body).toBe('kind,subject,level,species,action,field,before,after\r\nlevel,Na-I.6,Na-I.6,Na-I,created,,,\r\nsource,a-b,,,replaced,note,,\'=1\r\nsource,a-b,,,replaced,year,2000,2001\r\n')
  })
})

describe('the map of levels', () => {
  it('has every old level once: the same, changed, or led on by successors to the one in use; then those that are new', () => {
    const rows = [...levelMap(before, after, new Set(['Na-I.2']))]
    expect(rows.map(({ level_old, level_new, status }) => [level_old, level_new, status])).toEqual([
      ['Na-I.1', 'Na-I.1', 'same'], ['Na-I.2', 'Na-I.2', 'changed'], ['Na-I.3', 'Na-I.5', 'retired'], [null, 'Na-I.6', 'created'],
    ])
    expect(rows[1]?.shift_invcm).toBeCloseTo(-0.00025, 10)
    expect(rows[2]).toMatchObject({ energy_old_invcm: 16973.36619, energy_new_invcm: 16973.4, term: '2P*3/2' })
  })

  it('leads nowhere where the chain ends or runs in a circle', () => {
    const lost = edition([level({}), level({ ...SODIUM_LEVELS[1], status: 'retired', retiredReason: 'x', successor: 'Na-I.3', publishedFrom: 2 }), level({ ...SODIUM_LEVELS[2], status: 'retired', retiredReason: 'x', successor: 'Na-I.2', publishedFrom: 2 })], { edition: 2 })
    expect([...levelMap(before, lost, new Set())].map(({ level_new }) => level_new)).toEqual(['Na-I.1', null, null])
  })

  it('from the empty table says that all is new', () => {
    expect([...levelMap(null, before, new Set())].every(({ level_old, status }) => level_old === null && status === 'created')).toBe(true)
  })

  it('is a table with units in its names', () => {
    const csv = String(writeTable('csv', levelMapTable([...levelMap(before, after, new Set())], 'x'), {}).body)
    expect(csv.split('\r\n')[0]).toBe('level_old,level_new,status,species,configuration,term,energy_old_invcm,energy_new_invcm,shift_invcm,g_j_old,g_j_new')
    expect(csv).toContain('Na-I.3,Na-I.5,retired,Na-I,3p,2P*3/2,16973.36619,16973.4,')
  })
})

describe('citations', () => {
  const source = { key: 'mueller-2001', citation: 'Müller, J. & K. 5, 7 (2001)', kind: 'article' as const, authors: 'Müller, J. Ø.; Lee, K.', title: 'On 100% of {x}_1 & y', journal: 'J. & K. 5, 7\u20139', year: 2001, doi: '10.1/x_y', note: null }

  it.each([
    ['Morton, Wu & Drake', [{ family: 'Morton' }, { family: 'Wu' }, { family: 'Drake' }], false],
    ['Sansonetti et al.', [{ family: 'Sansonetti' }], true],
    ['J. E. Sansonetti, W. C. Martin', [{ family: 'Sansonetti', given: 'J. E.' }, { family: 'Martin', given: 'W. C.' }], false],
    ['Sansonetti, J. E., Martin, W. C.', [{ family: 'Sansonetti', given: 'J. E.' }, { family: 'Martin', given: 'W. C.' }], false],
    ['Müller, Jörg; Lee, Kim', [{ family: 'Müller', given: 'Jörg' }, { family: 'Lee', given: 'Kim' }], false],
    ['van der Berg, A. and Lee, K.', [{ family: 'van der Berg', given: 'A.' }, { family: 'Lee', given: 'K.' }], false],
  ])('read the authors of %s', (text, names, others) => {
    expect(readAuthors(text)).toEqual({ names, others })
  })

  it('map a source to CSL-JSON: journal, volume and pages apart', () => {
    expect(citeSource(source).csl_json).toEqual({
      id: 'mueller-2001', type: 'article-journal', title: source.title, author: [{ family: 'Müller', given: 'J. Ø.' }, { family: 'Lee', given: 'K.' }], 'container-title': 'J. & K.', volume: '5', page: '7\u20139',
      issued: { 'date-parts': [[2001]] }, DOI: '10.1/x_y', URL: 'https://doi.org/10.1/x_y',
    })
  })

  it('write BibTeX in which TeX takes nothing for its own, and addresses stay as they are', () => {
    const { bibtex } = citeSource(source)
    expect(bibtex).toContain('@article{mueller-2001,')
    expect(bibtex).toContain('title = {On 100\\% of \\{x\\}\\_1 \\& y}')
    expect(bibtex).toContain('journal = {J. \\& K.}')
    expect(bibtex).toContain('doi = {10.1/x_y}')
    expect(bibtex).toContain('author = {Müller, J. Ø. and Lee, K.}')
    expect(citeSource({ ...source, authors: 'Sansonetti et al.' }).bibtex).toMatch(/author = \{\{?Sansonetti\}? and others\}/)
  })

  it('come to an end for any text, with braces that fit', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'grapheme', maxLength: 60 }), fc.string({ unit: 'grapheme', maxLength: 40 }), (title, authors) => {
        const { bibtex } = citeSource({ ...source, title, authors })
        const bare = bibtex.replaceAll(/\\[{}]/g, '')
        expect(bare.split('{').length).toBe(bare.split('}').length)
      }),
      { numRuns: 200 },
    )
  })

  it('name an edition with its address and checksum', () => {
    const cited = citeEdition({ number: 2, label: 'Second edition', checksum: 'ab'.repeat(32), published_at: '2026-12-01T10:00:00.000Z' })
    expect(cited.text).toContain(`edition 2 (Second edition), published 2026-12-01`)
    expect(cited.text).toContain('ab'.repeat(32))
    expect(cited.csl_json).toMatchObject({ type: 'dataset', version: '2', issued: { 'date-parts': [[2026, 12]] } })
    expect(cited.bibtex).toContain('@misc{lodeterm-edition-2,')
  })
})
