import { describe, expect, it } from 'vitest'
import { differences } from '@/app/(account)/_people/audit-text'

describe('before and after of an audit row', () => {
  it('is told member by member, without what stayed', () => {
    expect(differences({ role: 'reader', name: 'A' }, { role: 'curator', name: 'A', sessions_ended: 0 })).toEqual([{ name: 'role', before: 'reader', after: 'curator' }, { name: 'sessions_ended', before: null, after: '0' }])
    expect(differences(null, { events: ['a', 'b'] })).toEqual([{ name: 'events', before: null, after: '["a","b"]' }])
    expect(differences(null, null)).toEqual([])
    expect(differences('x', 'y')).toEqual([{ name: 'value', before: 'x', after: 'y' }])
    expect(differences([1], [2])).toEqual([{ name: 'value', before: '[1]', after: '[2]' }])
    expect(differences(null, { text: 'x'.repeat(1000) })[0]?.after).toHaveLength(301)
  })
})
