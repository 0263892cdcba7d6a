import { describe, expect, it } from 'vitest'
import { differences, rawText } from '@/app/(account)/_people/audit-text'

describe('before and after of an audit row', () => {
  it('is told value by value, without what stayed', () => {
    expect(differences({ role: 'reader', name: 'A' }, { role: 'curator', name: 'A', sessions_ended: 0 })).toEqual([{ name: 'role', before: 'reader', after: 'curator' }, { name: 'sessions ended', before: null, after: '0' }])
    expect(differences(null, { events: ['a', 'b'] })).toEqual([{ name: 'events', before: null, after: 'a, b' }])
    expect(differences(null, null)).toEqual([])
    expect(differences('x', 'y')).toEqual([{ name: 'value', before: 'x', after: 'y' }])
    expect(differences([1], [2])).toEqual([{ name: 'value', before: '1', after: '2' }])
    expect(differences({ active: true }, { active: false })).toEqual([{ name: 'active', before: 'yes', after: 'no' }])
    expect(differences(null, { text: 'x'.repeat(1000) })[0]?.after).toHaveLength(301)
  })

  it('goes into the values of a change', () => {
    const change = (note: string | null, value: number) => ({ amendment: 'a', subject: 'Na-I.3', action: 'replace', values: { note, energy_invcm: 1, measured_g: [{ value, source: 's' }] } })
    expect(differences(change(null, 1.33), change('seen', 1.34))).toEqual([{ name: 'note', before: null, after: 'seen' }, { name: 'measured g › 1 › value', before: '1.33', after: '1.34' }].sort((a) => (a.name === 'note' ? 1 : -1)))
  })

  it('sets what a batch changed beside what it wrote, by what each is about', () => {
    const before = { changed: [{ change: 'one', subject: 'Na-I.3', action: 'replace', values: { note: 'a' } }], removed: [{ change: 'two', subject: 'Na-I.4', action: 'replace' }] }
    const after = { written: [{ change: 'one', subject: 'Na-I.3', action: 'replace', values: { note: 'b' }, reason: null }], removed: ['two'] }
    expect(differences(before, after)).toEqual([
      { name: 'Na-I.3 › note', before: 'a', after: 'b' }, { name: 'removed › Na-I.4 › change', before: 'two', after: null },
      { name: 'removed › Na-I.4 › action', before: 'replace', after: null }, { name: 'removed', before: null, after: 'two' },
    ])
  })

  it('stands there whole as well', () => {
    expect(JSON.parse(rawText({ note: 'x'.repeat(1000) }, undefined))).toEqual({ before: { note: 'x'.repeat(1000) }, after: null })
  })
})
