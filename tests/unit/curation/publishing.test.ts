import { describe, expect, it } from 'vitest'
import { editionNotes, type NotedChange } from '@/lib/curation/edition-notes'
import { conflictsOf, type AcceptedChange } from '@/lib/curation/publish-accepted'
import { measuredDifference, type MeasuredInForce } from '@/lib/curation/publish-measured'
import type { Checked, LevelRow, MeasuredGRow, PublishedTable } from '@/lib/curation/rows'

const LEVEL: LevelRow = {
  configuration: '3p', coupling: 'LS', label: null, twoS: 1, l: 1, twoJ: 3, twoK: null, coreTwoS: null, coreL: null, coreTwoJ: null, lOuter: null, outerTwoJ: null, parity: 'odd',
  repeatIndex: null, alternativeName: null, energyInvcm: 16973.36619, energyUncInvcm: null, energyLiteral: null, energySource: 'a-b', energyEvidence: 'read', lineChecked: false, note: null,
  status: 'active', retiredReason: null, successor: null, gChosen: null, gChosenReason: null, measured: [],
}
const noted = (change: Partial<NotedChange>): NotedChange => ({ id: change.subject ?? 'x', kind: 'level', action: 'replace', subject: 'Na-I.3', reason: null, successor: null, ...change })
const values = (before: LevelRow | null, after: LevelRow | null) => ({ before: () => before, after: () => after })

describe('notes of an edition', () => {
  it('tell each correction with both energies, what is gone with its reason, and the sources', () => {
    const notes = editionNotes(
      [
        noted({}),
        noted({ subject: 'Na-I.9', action: 'retire', reason: 'Not found\nagain.', successor: 'Na-I.10' }),
        noted({ kind: 'source', subject: 'new-2020', action: 'create' }),
      ],
      values(LEVEL, { ...LEVEL, energyInvcm: 16973.3665, energyLiteral: '16973.36650' }),
      ['\u201cSodium\u201d'],
    )
    expect(notes).toBe(
      'From 1 amendment: \u201cSodium\u201d.\n\nNa I: 1 level corrected, 1 retired.\n- Na-I.3 3p \u00b2P\u00b0\u2083/\u2082: 16973.36619 \u2192 16973.36650 cm\u207b\u00b9 (+0.00031)\n- Na-I.9 3p \u00b2P\u00b0\u2083/\u2082 retired: Not found again. (Na-I.10 takes its place)\n\nSources added: new-2020.',
    )
  })

  it('count what is beyond their bounds', () => {
    const many = Array.from({ length: 100 }, (_, species) => Array.from({ length: 1000 }, (_, at) => noted({ id: `${species}.${at}`, subject: `N${String.fromCharCode(97 + (species % 26))}-${'I'.repeat(1 + Math.floor(species / 26))}.${at + 1}` }))).flat()
    const notes = editionNotes(many, values(LEVEL, { ...LEVEL, energyInvcm: 1 }), ['a'])
    expect(notes.length).toBeLessThan(16_000)
    expect(notes).toContain('988 more levels')
    expect(notes).toContain('60 more species: 60000 levels corrected.')
  })
})

describe('measured g_J of a level that is replaced', () => {
  const row = (value: number, source: string): MeasuredGRow => ({ value, unc: null, literal: null, source, evidence: 'read', note: null })
  const present: MeasuredInForce[] = [{ id: 7, level: 'Na-I.3', revision: 2, ...row(1.334, 'a') }, { id: 8, level: 'Na-I.3', revision: 1, ...row(1.335, 'b') }]
  const difference = (wanted: MeasuredGRow[]) => measuredDifference([{ level: 'Na-I.3', amendment: 'x', wanted }], new Map([['Na-I.3', present]]))

  it('keep their revision where nothing differs, in whatever order', () => {
    expect(difference([row(1.335, 'b'), row(1.334, 'a')])).toEqual({ ended: [], begun: [] })
  })

  it('go on under their identity from the same source, end, or begin', () => {
    expect(difference([row(1.3341, 'a'), row(1.3, 'c')])).toEqual({
      ended: [7, 8],
      begun: [{ id: 7, revision: 3, level: 'Na-I.3', amendment: 'x', row: row(1.3341, 'a') }, { id: null, revision: 1, level: 'Na-I.3', amendment: 'x', row: row(1.3, 'c') }],
    })
    expect(difference([])).toEqual({ ended: [7, 8], begun: [] })
  })
})

describe('conflicts between accepted amendments', () => {
  const table: PublishedTable = { edition: 1, species: new Map(), isotopes: new Map(), sources: new Map(), hyperfine: new Map(), levels: new Map([['Na-I.3', { revision: 2, row: LEVEL }]]) }
  const amendment = (id: string) => ({ id, title: `Amendment ${id}`, version: 1, author: { id: 'u', name: 'U' }, reviewer: 'R', changes: 1 })
  const change = (id: string, amendmentId: string, more: Partial<AcceptedChange> = {}): AcceptedChange => ({
    id, amendment: amendmentId, kind: 'level', action: 'replace', subject: 'Na-I.3', speciesId: 'Na-I', given: {}, reason: null, successor: null, baseRevision: 2, ...more,
  })
  const clean: Checked = { row: LEVEL, findings: [] }

  it('are none where all goes together', () => {
    expect(conflictsOf({ amendments: [amendment('a')], changes: [change('1', 'a')], table, inForce: () => null }, new Map([['1', clean]]))).toEqual([])
  })

  it('name both amendments and changes, the stale base, and what the union makes wrong, all at once', () => {
    const twins = (id: string, other: string): Checked => ({ row: LEVEL, findings: [{ severity: 'error', code: 'level_twin', field: null, detail: `Same name as ${other}.` }, { severity: 'warning', code: 'w', field: null, detail: 'x' }] })
    const changes = [
      change('1', 'a'), change('2', 'b'),
      change('3', 'a', { subject: 'Na-I.90', action: 'create', baseRevision: null }), change('4', 'b', { subject: 'Na-I.91', action: 'create', baseRevision: null }),
      change('5', 'b', { kind: 'source', subject: 'a-b', baseRevision: 1 }),
    ]
    const inForce = () => ({ revision: 2, edition: 3, amendment: { id: 'z', title: 'Amendment z' }, change: 'z9' })
    const found = conflictsOf({ amendments: [amendment('a'), amendment('b')], changes, table, inForce }, new Map([['1', clean], ['3', twins('3', 'Na-I.91')], ['4', twins('4', 'Na-I.90')], ['5', clean]]))
    expect(found.map(({ code, subject, changes: parts, base_revision, current_revision }) => [code, subject, parts.map((part) => `${part.amendment.id}${part.change}`), base_revision, current_revision])).toEqual([
      ['same_subject', 'Na-I.3', ['a1', 'b2'], null, null],
      ['base_stale', 'a-b', ['b5', 'zz9'], 1, null],
      ['level_twin', 'Na-I.90', ['a3', 'b4'], null, null],
    ])
    expect(found[1]?.detail).toContain('from revision 1, and now edition 3 made revision 2, which is in force, by the amendment \u201cAmendment z\u201d')
    expect(found[0]?.detail).toContain('\u201cAmendment a\u201d and \u201cAmendment b\u201d')
  })
})
