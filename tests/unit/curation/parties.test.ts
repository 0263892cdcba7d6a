import { describe, expect, it } from 'vitest'
import { findParties } from '@/lib/curation/conflict-parties'
import { type AcceptedChange, checkUnion, conflictsOf } from '@/lib/curation/publish-accepted'
import type { ChangeInput } from '@/lib/curation/rows'
import { change, smallTable, values } from './table'

const SODIUM = { name: 'sodium', core_configuration: '1s2.2s2', ionisation_energy_invcm: 41449.451, ionisation_source: 'paper', ionisation_evidence: 'read' }
const isotope = (subject: string, given: object, action: ChangeInput['action'] = 'create'): ChangeInput => ({ id: `i ${subject} ${action}`, kind: 'isotope', action, subject, speciesId: subject.slice(0, subject.indexOf('/')), given: { source: 'paper', evidence: 'read', ...given }, reason: null, successor: null })
const hyperfine = (subject: string, given: object): ChangeInput => ({ id: `h ${subject}`, kind: 'hyperfine', action: 'create', subject, speciesId: 'Na-I', given: { source: 'paper', evidence: 'read', ...given }, reason: null, successor: null })

/** What stands in the way of publishing these amendments together: code, subject, and all amendments named. */
async function conflicts(...lists: ChangeInput[][]) {
  const table = smallTable()
  const names = lists.map((_, at) => 'ABCDEF'[at] ?? '')
  const changes = lists.flatMap((list, at) => list.map((one): AcceptedChange => ({ ...one, amendment: names[at] ?? '', baseRevision: one.action === 'create' ? null : 1 })))
  const accepted = { amendments: names.map((id) => ({ id, title: `Title ${id}`, version: 1, author: { id: 'u', name: 'U' }, reviewer: 'R', changes: 1 })), changes, table, inForce: () => null }
  const checked = await checkUnion(accepted)
  return conflictsOf(accepted, checked, await findParties(accepted, checked)).map((one) => ({
    code: one.code, subject: one.subject, amendments: [...new Set(one.changes.map(({ amendment }) => amendment.id))].sort().join(''), subjects: one.changes.map(({ subject }) => subject), detail: one.detail,
  }))
}

describe('the parties of a conflict that no finding names', () => {
  const core = [change.species('Na-I', SODIUM), ...([['1', '3s', '2S1/2', 0], ['2', '3p', '2P*1/2', 16956.17], ['3', '3p', '2P*3/2', 16973.37], ['4', '4s', '2S1/2', 25739.99]] as const)
    .map(([ordinal, shell, term, energy]) => change.level(`Na-I.${ordinal}`, values(`2p6.${shell}`, term, energy)))]

  it('are none where an amendment is wrong by itself', async () => {
    const found = await conflicts([change.create('Na-I.90', values('5p', '2P*5/2', 35040))], [change.species('Na-I', { ...SODIUM, core_configuration: '1s2.2s2.2p6', note: 'a word' })])
    expect(found.length).toBeGreaterThan(0)
    expect(found.map(({ amendments }) => amendments)).toEqual(found.map(() => 'A'))
  })
  it('are who replaces a core and who makes a level with the old one', async () => {
    expect(await conflicts(core)).toEqual([])
    const [first, ...more] = await conflicts(core, [change.create('Na-I.90', values('5p', '2P*3/2', 35042.85))], [change.create('Ne-I.90', values('2p5.3p', '3S1', 148257.8))])
    expect(more).toEqual([])
    expect(first).toMatchObject({ code: 'electron_count', subject: 'Na-I.90', amendments: 'AB', subjects: ['Na-I.90', 'Na-I'] })
    expect(first?.detail).toContain('\u201cTitle B\u201d and \u201cTitle A\u201d')
  })
  it('are who takes a nucleus its spin and who adds its hyperfine constants', async () => {
    const found = await conflicts([isotope('Na-I/22', { nuclear_spin: '0' })], [change.create('Na-I.90', values('5p', '2P*3/2', 35042.85))], [hyperfine('Na-I.4/22', { a_mhz: 10 })])
    const spin = found.filter(({ code }) => code === 'hyperfine_impossible')
    expect(spin.length).toBeGreaterThan(0)
    // without the isotope the constants are wrong alone, too, but not for that
    expect(spin[0]).toMatchObject({ subject: 'Na-I.4/22', amendments: 'AC' })
  })
  it('are all whose abundances come to more than 100 together', async () => {
    const each = (percent: number) => [21, 22, 19].map((mass) => [isotope(`Ne-I/${mass}`, { abundance_percent: percent })])
    const three = await conflicts(...each(4))
    expect(new Set(three.map(({ code, amendments }) => `${code} ${amendments}`))).toEqual(new Set(['abundances_above_100 ABC']))
    const two = await conflicts(...each(8).slice(0, 2), [change.level('Na-I.3', values('3p', '2P*3/2', 16973.37, { note: 'a word' }))])
    expect(two.map(({ amendments }) => amendments)).toEqual(['AB'])
  })
})
