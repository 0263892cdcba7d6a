import { describe, expect, it } from 'vitest'
import { checkChanges } from '@/lib/curation/checks'
import { readLevelValues } from '@/lib/curation/values'
import { change, smallTable, values } from './table'

const tooLong = (findings: readonly { code: string; field: string | null; detail: string }[]) => findings.filter(({ code }) => code === 'too_long').map(({ field, detail }) => [field, Number(/at most (\d+)/.exec(detail)?.[1])])
const g = (note: string) => ({ value: 1.3342, source: 'paper', evidence: 'read', note })

describe('texts longer than the contract allows', () => {
  it('are errors that name field and limit, whoever reads the values', () => {
    const { row, findings } = readLevelValues(values('3p', '2P*3/2', 16973.37, { note: 'n'.repeat(2001), alternative_name: 'a'.repeat(201), measured_g: [g('x'), g('x'.repeat(2001))] }), { atom: null })
    expect(row).toBeNull()
    expect(tooLong(findings)).toEqual(expect.arrayContaining([['alternative_name', 200], ['note', 2000], ['measured_g.1.note', 2000]]))
    expect(tooLong(findings)).toHaveLength(3)
  })
  it('are let through up to the limit', () => {
    const { row, findings } = readLevelValues(values('3p', '2P*3/2', 16973.37, { note: 'n'.repeat(2000), alternative_name: 'a'.repeat(200) }), { atom: null })
    expect([findings, row?.note?.length]).toEqual([[], 2000])
  })
  it('are refused of every other kind too', () => {
    const [source, species, isotope] = checkChanges(smallTable(), [
      change.source('new', { citation: 'c'.repeat(2001), kind: 'other' }), change.species('Na-I', { name: 's'.repeat(201) }), change.isotope('Na-I/23', { note: 'n'.repeat(2001), source: 'paper', evidence: 'read' }),
    ])
    expect([source, species, isotope].map((one) => tooLong(one?.findings ?? []))).toEqual([[['citation', 2000]], [['name', 200]], [['note', 2000]]])
  })
})
