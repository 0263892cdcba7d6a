import { describe, expect, it } from 'vitest'
import { editionMail } from '@/lib/mail/edition-mail'
import { News } from '@/lib/notices/news'
import type { Snapshot } from '@/lib/catalogue/snapshot'
import { fieldsBetween, levelValues } from '@/lib/prediction/changes'
import type { Difference } from '@/lib/prediction/comparison'
import type { Change } from '@/openapi/schemas/edition'
import { edition, level, SODIUM_LEVELS } from '../prediction/edition'

const [ground = level({}), lower = level({}), upper = level({})] = SODIUM_LEVELS
const S4 = level({ ordinal: 4, configuration: '4s', energyInvcm: 25740 })
const earlier = edition([ground, lower, upper, S4])

const change = (kind: Change['kind'], subject: string, action: Change['action'], fields: [string, unknown, unknown][]): Change =>
  ({ kind, subject, level: subject.includes('.') ? subject.replace(/\/\d+$/, '') : null, species: 'Na-I', action, fields: fields.map(([field, before, after]) => ({ field, before, after })) })
/** What the database says of two editions, said of two in memory. */
function between(before: Snapshot, after: Snapshot, others: readonly Change[] = []): News {
  const ids = new Set([before, after].flatMap((side) => Array.from({ length: side.total }, (_, i) => side.levelId(i))))
  const valuesIn = (side: Snapshot, id: string): ReadonlyMap<string, unknown> => {
    const index = side.indexOf(id)
    return index === undefined ? new Map() : levelValues(side.level(index))
  }
  const changes = [...ids].flatMap((id): Change[] => {
    const [was, is] = [before.indexOf(id), after.indexOf(id)]
    const fields = fieldsBetween(valuesIn(before, id), valuesIn(after, id))
    if (fields.length === 0) return []
    return [{ kind: 'level', subject: id, level: id, species: id.slice(0, id.indexOf('.')), action: was === undefined ? 'created' : is === undefined ? 'retired' : 'replaced', fields }]
  }).concat(others)
  return new News(before, after, { differences: changes, describe: (some: readonly Difference[]) => Promise.resolve(changes.filter((one) => some.some(({ kind, subject }) => one.kind === kind && one.subject === subject))) })
}
const news = (levels: readonly ReturnType<typeof level>[], more = {}, others: readonly Change[] = []) => between(earlier, edition(levels, { edition: 2, ...more }), others)

describe('news of an edition', () => {
  it('are none where nothing followed changed', async () => {
    const same = news([ground, lower, upper, S4])
    for (const [kind, subject] of [['species', 'Na-I'], ['level', 'Na-I.3'], ['line', 'Na-I.1~Na-I.3'], ['level', 'Na-I.99'], ['species', 'Mg-I'], ['line', 'Na-I.1~Na-I.99']] as const) expect(await same.of(kind, subject)).toBeNull()
  })

  it('tell a moved level with its lines before and after', async () => {
    const moved = news([ground, lower, { ...upper, energyInvcm: 16973.37619, energyUncInvcm: 0.001, revision: 2 }, S4])
    const told = (await moved.of('level', 'Na-I.3'))?.levels[0]
    expect(told?.fields).toEqual([{ name: 'energy', before: '16973.36619 cm^-1', after: '16973.37619 cm^-1' }, { name: 'uncertainty of the energy', before: 'not known', after: '0.001 cm^-1' }])
    expect(told?.lines.map(({ id }) => id).sort()).toEqual(['Na-I.1~Na-I.3', 'Na-I.3~Na-I.4'])
    const line = (await moved.of('line', 'Na-I.1~Na-I.3'))
    expect((line?.line?.after?.wavenumber ?? 0) - (line?.line?.before?.wavenumber ?? 0)).toBeCloseTo(0.01, 9)
    expect(line?.levels.map(({ id }) => id)).toEqual(['Na-I.3'])
    // a line none of whose levels changed is no news, though its species is
    expect((await moved.of('line', 'Na-I.1~Na-I.2'))).toBeNull()
    expect((await moved.of('species', 'Na-I'))?.levels.map(({ id }) => id)).toEqual(['Na-I.3'])
  })

  it('tell a note alone as what it is: the line stays', async () => {
    const noted = news([ground, lower, { ...upper, note: 'checked anew', revision: 2 }, S4])
    expect((await noted.of('line', 'Na-I.1~Na-I.3'))).toMatchObject({ line: null, levels: [{ id: 'Na-I.3', lines: [] }] })
    expect(editionMail({ edition: 2, label: 'x', since: 1 }, 'Jun', [(await noted.of('line', 'Na-I.1~Na-I.3')) ?? { kind: 'line', subject: '', fields: [], levels: [], moreLevels: {}, line: null }]).text).toContain('The line itself stays where it was.')
  })

  it('tell a g_J that changed by the g_eff of the lines', async () => {
    const measured = news([ground, lower, upper, S4], { measuredG: [{ levelId: 'Na-I.3', value: 1.3342, unc: 0.0001, source: 'made', evidence: 'computed', note: null }] })
    const told = (await measured.of('level', 'Na-I.3'))?.levels[0]
    expect(told?.fields.map(({ name }) => name)).toEqual(['g_J adopted', 'uncertainty of g_J adopted', 'basis of g_J adopted', 'g_J measured'])
    expect(told?.fields.at(-1)).toMatchObject({ before: 'none', after: '1.3342 +- 0.0001 [made, computed]' })
    expect(told?.lines.length).toBe(2)
    expect(told?.lines.every(({ before, after }) => before?.wavenumber === after?.wavenumber && before?.gEff !== after?.gEff)).toBe(true)
  })

  it('name a retired level with reason and successor, and the line that is gone', async () => {
    const retired = news([ground, lower, { ...upper, status: 'retired', retiredReason: 'a mistake', successor: 'Na-I.4', revision: 2, publishedFrom: 2 }, S4])
    expect((await retired.of('level', 'Na-I.3'))?.levels).toMatchObject([{ id: 'Na-I.3', state: 'retired', reason: 'a mistake', successor: 'Na-I.4' }])
    const line = (await retired.of('line', 'Na-I.1~Na-I.3'))
    expect(line).toMatchObject({ line: { id: 'Na-I.1~Na-I.3', after: null }, levels: [{ state: 'retired' }] })
  })

  it('tell a species of new levels, and of its own values', async () => {
    const grown = news([ground, lower, upper, S4, level({ ordinal: 5, configuration: '3d', l: 2, twoJ: 3, energyInvcm: 29172.9 })])
    expect((await grown.of('species', 'Na-I'))?.levels).toMatchObject([{ id: 'Na-I.5', state: 'new' }])
    expect((await grown.of('level', 'Na-I.3'))).toBeNull()
    const ionised = news([ground, lower, upper, S4], {}, [change('species', 'Na-I', 'replaced', [['ionisation_energy_invcm', null, 41449.451]])])
    expect((await ionised.of('species', 'Na-I'))?.fields).toEqual([{ name: 'ionisation energy', before: 'not known', after: '41449.451 cm^-1' }])
  })

  it('stay short for a species of which everything changed', async () => {
    const many = Array.from({ length: 200 }, (_, i) => level({ ordinal: i + 1, configuration: `${i + 3}s`, energyInvcm: i * 100 }))
    const told = await between(edition(many), edition(many.map((one) => ({ ...one, energyInvcm: one.energyInvcm + 1 })))).of('species', 'Na-I')
    expect([told?.levels.length, told?.moreLevels]).toEqual([50, { changed: 150 }])
  })

  it('tell every value that a level page shows', async () => {
    const measuredG = [{ levelId: 'Na-I.3', value: 1.3342, unc: null, source: 'made', evidence: 'computed' as const, note: null }]
    const before = edition([ground, lower, upper, S4], { measuredG })
    const more = { repeatIndex: 2, alternativeName: '1s5', lineChecked: true, energyEvidence: 'recalled' as const, gChosen: 1.3, gChosenReason: 'as in the text' }
    const after = edition([ground, lower, { ...upper, ...more }, S4], { measuredG: measuredG.map((one) => ({ ...one, evidence: 'recalled' as const, note: 'from the table' })) })
    const told = (await between(before, after).of('level', 'Na-I.3'))?.levels[0]?.fields
    const after1 = (name: string) => told?.find((field) => field.name === name)?.after
    expect(['repeat index', 'alternative name', 'line checked', 'evidence of the energy', 'basis of g_J adopted', 'g_J measured'].map(after1)).toEqual(['2', '1s5', 'yes', 'recalled', 'chosen', '1.3342 [made, recalled] (from the table)'])
    const reason = news([ground, lower, upper, S4], {}, [change('level', 'Na-I.3', 'replaced', [['g_j.chosen_reason', null, 'as in the text']])])
    expect((await reason.of('level', 'Na-I.3'))?.levels[0]?.fields).toEqual([{ name: 'reason of the chosen g_J', before: 'none', after: 'as in the text' }])
    // a name that nobody has put into words yet is told all the same
    const unknown = news([ground, lower, upper, S4], {}, [change('level', 'Na-I.3', 'replaced', [['life_time', 1, 2]])])
    expect((await unknown.of('level', 'Na-I.3'))?.levels[0]?.fields).toEqual([{ name: 'life time', before: '1', after: '2' }])
  })

  it('tell hyperfine constants to whoever follows the level, a line of it, or its species', async () => {
    const told = news([ground, lower, upper, S4], {}, [change('hyperfine', 'Na-I.3/23', 'replaced', [['a_mhz', 18.53, 18.534], ['b_unc_mhz', null, 0.02]])])
    const fields = [{ name: 'hyperfine constants of isotope 23, A', before: '18.53 MHz', after: '18.534 MHz' }, { name: 'hyperfine constants of isotope 23, uncertainty of B', before: 'not known', after: '0.02 MHz' }]
    for (const [kind, subject] of [['level', 'Na-I.3'], ['line', 'Na-I.1~Na-I.3'], ['species', 'Na-I']] as const) expect((await told.of(kind, subject))?.levels).toMatchObject([{ id: 'Na-I.3', state: 'changed', fields, lines: [] }])
    expect(await told.of('level', 'Na-I.2')).toBeNull()
  })

  it('tell isotopes of a species with their old and new values', async () => {
    const told = news([ground, lower, upper, S4], {}, [change('isotope', 'Na-I/23', 'replaced', [['mass_u', 22.98, 22.98977]]), change('isotope', 'Na-I/22', 'created', [['nuclear_spin', null, 3]])])
    expect((await told.of('species', 'Na-I'))?.fields).toEqual([{ name: 'isotope 23, mass', before: '22.98 u', after: '22.98977 u' }, { name: 'isotope 22 (new), nuclear spin', before: null, after: '3' }])
  })
})
