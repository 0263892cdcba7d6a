import { describe, expect, it } from 'vitest'
import { editionMail } from '@/lib/mail/edition-mail'
import { News } from '@/lib/notices/news'
import { edition, level, SODIUM_LEVELS } from '../prediction/edition'

const [ground = level({}), lower = level({}), upper = level({})] = SODIUM_LEVELS
const S4 = level({ ordinal: 4, configuration: '4s', energyInvcm: 25740 })
const earlier = edition([ground, lower, upper, S4])
const news = (levels: readonly ReturnType<typeof level>[], more = {}) => new News(earlier, edition(levels, { edition: 2, ...more }))

describe('news of an edition', () => {
  it('are none where nothing followed changed', () => {
    const same = news([ground, lower, upper, S4])
    for (const [kind, subject] of [['species', 'Na-I'], ['level', 'Na-I.3'], ['line', 'Na-I.1~Na-I.3'], ['level', 'Na-I.99'], ['species', 'Mg-I'], ['line', 'Na-I.1~Na-I.99']] as const) expect(same.of(kind, subject)).toBeNull()
  })

  it('tell a moved level with its lines before and after', () => {
    const moved = news([ground, lower, { ...upper, energyInvcm: 16973.37619, energyUncInvcm: 0.001, revision: 2 }, S4])
    const told = moved.of('level', 'Na-I.3')?.levels[0]
    expect(told?.fields).toEqual([{ name: 'energy', before: '16973.36619 cm^-1', after: '16973.37619 cm^-1' }, { name: 'uncertainty of the energy', before: 'not known', after: '0.001 cm^-1' }])
    expect(told?.lines.map(({ id }) => id).sort()).toEqual(['Na-I.1~Na-I.3', 'Na-I.3~Na-I.4'])
    const line = moved.of('line', 'Na-I.1~Na-I.3')
    expect((line?.line?.after?.wavenumber ?? 0) - (line?.line?.before?.wavenumber ?? 0)).toBeCloseTo(0.01, 9)
    expect(line?.levels.map(({ id }) => id)).toEqual(['Na-I.3'])
    // a line none of whose levels changed is no news, though its species is
    expect(moved.of('line', 'Na-I.1~Na-I.2')).toBeNull()
    expect(moved.of('species', 'Na-I')?.levels.map(({ id }) => id)).toEqual(['Na-I.3'])
  })

  it('tell a note alone as what it is: the line stays', () => {
    const noted = news([ground, lower, { ...upper, note: 'checked anew', revision: 2 }, S4])
    expect(noted.of('line', 'Na-I.1~Na-I.3')).toMatchObject({ line: null, levels: [{ id: 'Na-I.3', lines: [] }] })
    expect(editionMail({ edition: 2, label: 'x', since: 1 }, 'Jun', [noted.of('line', 'Na-I.1~Na-I.3') ?? { kind: 'line', subject: '', fields: [], levels: [], moreLevels: 0, line: null }]).text).toContain('The line itself stays where it was.')
  })

  it('tell a g_J that changed by the g_eff of the lines', () => {
    const measured = news([ground, lower, upper, S4], { measuredG: [{ levelId: 'Na-I.3', value: 1.3342, unc: 0.0001, source: 'made', evidence: 'computed', note: null }] })
    const told = measured.of('level', 'Na-I.3')?.levels[0]
    expect(told?.fields.map(({ name }) => name)).toEqual(['g_J adopted', 'g_J measured'])
    expect(told?.lines.length).toBe(2)
    expect(told?.lines.every(({ before, after }) => before?.wavenumber === after?.wavenumber && before?.gEff !== after?.gEff)).toBe(true)
  })

  it('name a retired level with reason and successor, and the line that is gone', () => {
    const retired = news([ground, lower, { ...upper, status: 'retired', retiredReason: 'a mistake', successor: 'Na-I.4', revision: 2, publishedFrom: 2 }, S4])
    expect(retired.of('level', 'Na-I.3')?.levels).toMatchObject([{ id: 'Na-I.3', state: 'retired', reason: 'a mistake', successor: 'Na-I.4' }])
    const line = retired.of('line', 'Na-I.1~Na-I.3')
    expect(line).toMatchObject({ line: { id: 'Na-I.1~Na-I.3', after: null }, levels: [{ state: 'retired' }] })
  })

  it('tell a species of new levels, and of its own values', () => {
    const grown = news([ground, lower, upper, S4, level({ ordinal: 5, configuration: '3d', l: 2, twoJ: 3, energyInvcm: 29172.9 })])
    expect(grown.of('species', 'Na-I')?.levels).toMatchObject([{ id: 'Na-I.5', state: 'new' }])
    expect(grown.of('level', 'Na-I.3')).toBeNull()
    const species = earlier.species[0]
    const ionised = new News(earlier, edition([ground, lower, upper, S4], { species: [{ ...species, isotopes: [], ionisation_energy_invcm: 41449.451 } as never] }))
    expect(ionised.of('species', 'Na-I')?.fields).toEqual([{ name: 'ionisation energy', before: 'not known', after: '41449.451 cm^-1' }])
  })

  it('stay short for a species of which everything changed', () => {
    const many = Array.from({ length: 200 }, (_, i) => level({ ordinal: i + 1, configuration: `${i + 3}s`, energyInvcm: i * 100 }))
    const told = new News(edition(many), edition(many.map((one) => ({ ...one, energyInvcm: one.energyInvcm + 1 })))).of('species', 'Na-I')
    expect([told?.levels.length, told?.moreLevels]).toEqual([30, 170])
  })
})
