import { describe, expect, it } from 'vitest'
import { checkChanges, checkChangesInSteps } from '@/lib/curation/checks'
import type { ChangeInput } from '@/lib/curation/rows'
import { writeLevelValues, writeValues } from '@/lib/curation/values'
import type { LevelValues } from '@/openapi/schemas/change'
import { change, smallTable, values } from './table'

const table = smallTable()
const publishedValues = (id: string): LevelValues => writeLevelValues(table.levels.get(id)!.row)
const replaced = (id: string, changed: Partial<LevelValues>) => change.level(id, { ...publishedValues(id), ...changed })

/** `severity code field` of everything found about the last change, the others being beside it. */
function found(...changes: ChangeInput[]): string[] {
  const checked = checkChanges(table, changes).at(-1)
  for (const one of checkChanges(table, changes)) if (one.row === null) expect(one.findings.some((finding) => finding.severity === 'error')).toBe(true)
  return (checked?.findings ?? []).map((one) => `${one.severity} ${one.code} ${one.field ?? '-'}`).sort()
}
const MADE = values('6s', '2S1/2', 36372.62)

describe('what is right', () => {
  it('has no findings', () => {
    for (const id of table.levels.keys()) if (table.levels.get(id)?.row.status === 'active') expect(found(replaced(id, { note: 'looked at again' })), id).toEqual([])
    expect(found(change.create('Na-I.6', MADE))).toEqual([])
    expect(found(change.create('Fe-I.9', values('3d6(5D)4s4p(3P)', 'z7D*5', 19350.89)))).toEqual([])
    expect(found(change.create('Ne-I.9', values('2p5.(2P*1/2).3s', '(1/2,1/2)*1', 135888.7, { coupling: 'jj', core: '2P*1/2', l_outer: 0 })))).toEqual([])
    expect(found(change.create('Na-I.6', values('2p5.3s.3p', 'J=3/2', 300000, { coupling: 'unassigned', energy_invcm: 30000 })))).toEqual([])
    expect(found(change.retire('Na-I.4', 'seen to be noise', 'Na-I.1'))).toEqual([])
    expect(found(change.source('other', { citation: 'B. (1999)', kind: 'book', year: '1999', doi: 'https://doi.org/10.1000/xyz' }))).toEqual([])
    expect(found(change.isotope('Na-I/23', { mass_u: 22.98976928, nuclear_spin: 1.5, abundance_percent: 100, source: 'paper', evidence: 'read' }))).toEqual([])
    expect(found(change.hyperfine('Na-I.2/23', { a_mhz: 94.44, source: 'paper', evidence: 'read' }, 'create'))).toEqual([])
    expect(found(change.species('Na-I', { name: 'sodium', core_configuration: '1s22s22p6', ionisation_energy_invcm: '41449.451', ionisation_source: 'paper', ionisation_evidence: 'read', note: 'looked at again' }))).toEqual([])
  })
})

describe('a change that changes nothing', () => {
  it('is an error: an edition would hold a revision without a difference', () => {
    for (const id of table.levels.keys()) if (table.levels.get(id)?.row.status === 'active') expect(found(replaced(id, {})), id).toEqual(['error no_difference -'])
    expect(found(change.source('paper', { ...writeValues('source', table.sources.get('paper')!.row) }, 'replace'))).toEqual(['error no_difference -'])
  })
})

describe('errors of a level', () => {
  const cases: [string, ChangeInput, string][] = [
    ['J outside |L-S| .. L+S', replaced('Na-I.3', { term: '2P*5/2' }), 'error term_impossible term'],
    ['odd configuration, even symbol', replaced('Na-I.3', { term: '2P3/2' }), 'error parity_mismatch term'],
    ['even configuration, odd symbol', change.create('Na-I.6', { ...MADE, term: '2S*1/2' }), 'error parity_mismatch term'],
    ['too many electrons', change.create('Na-I.6', { ...MADE, configuration: '6s2', term: '1S0' }), 'error electron_count configuration'],
    ['a term that Pauli forbids', change.create('Fe-I.9', values('3d6.4s2', '7D4', 30000)), 'error term_not_allowed term'],
    ['whole J with an odd number of electrons', change.create('Na-I.6', { ...MADE, term: '1S0' }), 'error j_not_half_integer term'],
    ['half J with an even number of electrons', change.create('Fe-I.9', values('3d6.4s2', '2D3/2', 30000)), 'error j_not_half_integer term'],
    ['a level that is there', change.create('Na-I.6', values('3p', '2P*3/2', 16980)), 'error duplicate_level term'],
    ['negative energy', replaced('Na-I.2', { energy_invcm: -1 }), 'error energy_negative energy_invcm'],
    ['a second ground level', change.create('Na-I.6', { ...MADE, energy_invcm: 0 }), 'error second_zero energy_invcm'],
    ['negative uncertainty', replaced('Na-I.3', { energy_unc_invcm: -0.1 }), 'error uncertainty_negative energy_unc_invcm'],
    ['negative uncertainty of g', change.create('Na-I.6', { ...MADE, g_j_measured: 2.002, g_j_measured_unc: -1, g_source: 'paper', g_evidence: 'read' }), 'error uncertainty_negative g_j_measured_unc'],
    ['no source', replaced('Na-I.3', { energy_source: null }), 'error missing_source energy_source'],
    ['a source that is not there', replaced('Na-I.3', { energy_source: 'nobody' }), 'error source_unknown energy_source'],
    ['a source of g that is not there', change.create('Na-I.6', { ...MADE, g_j_measured: 2.002, g_source: 'nobody', g_evidence: 'read' }), 'error source_unknown g_source'],
    ['no evidence', replaced('Na-I.3', { energy_evidence: '' }), 'error missing_evidence energy_evidence'],
    ['evidence of no such word', replaced('Na-I.3', { energy_evidence: 'guessed' }), 'error value_not_listed energy_evidence'],
    ['g_J above the bounds', change.create('Na-I.6', { ...MADE, g_j_measured: 2.1, g_source: 'paper', g_evidence: 'read' }), 'error g_impossible g_j_measured'],
    ['g_J below the bounds', replaced('Na-I.3', { measured_g: [{ value: 0.5, source: 'paper', evidence: 'read' }] }), 'error g_impossible measured_g.0.value'],
    ['a chosen g_J out of bounds', replaced('Na-I.3', { g_j_chosen: 3, g_j_chosen_reason: 'why not' }), 'error g_impossible g_j_chosen'],
    ['a chosen g_J without reason', replaced('Na-I.3', { g_j_chosen: 1.334 }), 'error g_reason_missing g_j_chosen_reason'],
    ['g_J of J = 0', replaced('Ne-I.1', { measured_g: [{ value: 1, source: 'paper', evidence: 'read' }] }), 'error g_not_applicable measured_g.0.value'],
    ['both forms of measured g', replaced('Na-I.3', { g_j_measured: 1.334, g_source: 'paper', g_evidence: 'read' }), 'error measured_g_twice g_j_measured'],
    ['a number that is none', replaced('Na-I.3', { energy_invcm: '1e', energy_literal: null }), 'error number_malformed energy_invcm'],
    ['printed digits that say something else', replaced('Na-I.3', { energy_literal: '16973.38' }), 'error literal_differs energy_literal'],
    ['no energy', replaced('Na-I.3', { energy_invcm: null }), 'error missing_field energy_invcm'],
    ['no term', replaced('Na-I.3', { term: ' ' }), 'error missing_field term'],
    ['a symbol of another coupling', replaced('Ne-I.2', { coupling: 'LS', core: null, l_outer: null }), 'error coupling_mismatch term'],
    ['pair coupling without core', replaced('Ne-I.2', { core: null }), 'error core_missing core'],
    ['a core other than the parent', replaced('Ne-I.2', { core: '2P*1/2', term: '2[1/2]*1' }), 'error core_mismatch core'],
    ['an outer electron other than the configuration\'s', replaced('Ne-I.2', { l_outer: 2, core: '2P3/2' }), 'error l_outer_mismatch l_outer'],
    ['K that core and outer electron cannot make', replaced('Ne-I.2', { term: '2[5/2]*2' }), 'error term_impossible term'],
    ['a configuration with a shell too full', replaced('Na-I.3', { configuration: '3p7' }), 'error configuration_impossible configuration'],
    ['a species that is not there', change.create('K-I.1', values('4s', '2S1/2', 0)), 'error species_unknown -'],
    ['a level that is not there', change.level('Na-I.77', MADE), 'error level_unknown -'],
    ['a level that is retired', change.level('Na-I.5', values('5s', '2S1/2', 33200.67)), 'error level_retired -'],
    ['J that stored hyperfine constants do not allow', replaced('Na-I.3', { configuration: '8p', term: '2P*1/2', measured_g: [] }), 'error hyperfine_impossible term'],
  ]
  it.each(cases)('%s', (_, given, wanted) => {
    expect(found(given)).toContain(wanted)
  })

  it('tells those of changes beside each other, of both', () => {
    const [a, b] = [change.create('Na-I.6', MADE), change.create('Na-I.7', { ...MADE, configuration: '[Ne]6s' })]
    expect(found(a, change.create('Na-I.7', MADE))).toEqual(['error duplicate_level term'])
    expect(found(a, b), 'a core in brackets is another text').not.toContain('error changed_twice -')
    expect(checkChanges(table, [a, change.create('Na-I.7', MADE)]).map((one) => one.findings.length)).toEqual([1, 1])
    expect(found(a, change.create('Na-I.7', { ...MADE, repeat_index: 2 }))).toEqual([])
    expect(found(replaced('Na-I.2', {}), replaced('Na-I.2', { note: 'x' }))).toContain('error changed_twice -')
    // the one that was there makes room
    expect(found(replaced('Na-I.4', { configuration: '7s' }), change.create('Na-I.6', values('4s', '2S1/2', 25739.99)))).toEqual([])
    expect(found(replaced('Na-I.1', { energy_invcm: 5 }), change.create('Na-I.6', { ...MADE, energy_invcm: 0 }))).toEqual([])
    expect(found(change.source('new-one', { citation: 'C', kind: 'article' }), replaced('Na-I.3', { energy_source: 'new-one' }))).toEqual([])
  })
})

describe('a half-typed change', () => {
  it('leaves its level where it was for the others', () => {
    expect(found(replaced('Na-I.1', { term: 'x' }))).toEqual(['error term_malformed term'])
    expect(found(replaced('Na-I.3', { energy_source: null }), change.create('Na-I.6', values('3p', '2P*3/2', 17000)))).toEqual(['error duplicate_level term'])
  })

  it('is checked as far as it can be read', () => {
    expect(found(replaced('Na-I.3', { energy_source: null, energy_invcm: -4, term: '2P3/2' }))).toEqual(expect.arrayContaining(['error energy_negative energy_invcm', 'error missing_source energy_source', 'error parity_mismatch term']))
  })
})

describe('errors of retiring', () => {
  it.each([
    ['without reason', change.retire('Na-I.4', ' '), 'error reason_missing reason'],
    ['of what is not there', change.retire('Na-I.77', 'x'), 'error level_unknown -'],
    ['of what is retired', change.retire('Na-I.5', 'x'), 'error level_retired -'],
    ['in favour of itself', change.retire('Na-I.4', 'x', 'Na-I.4'), 'error successor_impossible successor'],
    ['in favour of one retired', change.retire('Na-I.4', 'x', 'Na-I.5'), 'error successor_impossible successor'],
    ['in favour of none', change.retire('Na-I.4', 'x', 'Na-I.88'), 'error successor_impossible successor'],
    ['in favour of another species', change.retire('Na-I.4', 'x', 'Fe-I.1'), 'error successor_impossible successor'],
  ])('%s', (_, given, wanted) => {
    expect(found(given)).toContain(wanted)
  })

  it('knows successors that come and go in the same amendment', () => {
    expect(found(change.create('Na-I.6', MADE), change.retire('Na-I.4', 'x', 'Na-I.6'))).toEqual([])
    expect(found(change.retire('Na-I.2', 'x'), change.retire('Na-I.4', 'x', 'Na-I.2'))).toEqual(['error successor_impossible successor'])
  })
})

describe('errors of everything else', () => {
  const iso = { mass_u: 23, nuclear_spin: '3/2', abundance_percent: 50, source: 'paper', evidence: 'read' }
  it.each([
    ['a source without citation', change.source('x', { kind: 'article' }), 'error missing_field citation'],
    ['a source of no such kind', change.source('x', { citation: 'x', kind: 'song' }), 'error value_not_listed kind'],
    ['a bad DOI', change.source('x', { citation: 'x', kind: 'book', doi: '11.1/x' }), 'error doi_malformed doi'],
    ['a bad year', change.source('x', { citation: 'x', kind: 'book', year: 1066 }), 'error number_out_of_range year'],
    ['a source that is there', change.source('paper', { citation: 'x', kind: 'book' }), 'error source_exists -'],
    ['a source that is not there', change.source('x', { citation: 'x', kind: 'book' }, 'replace'), 'error source_unknown -'],
    ['a species that cannot be', change.species('He-IV', { name: 'x' }, 'create'), 'error species_impossible -'],
    ['a core with too many electrons', change.species('Na-I', { name: 'sodium', core_configuration: '[Ar]' }), 'error electron_count core_configuration'],
    ['a core that is open', change.species('Na-I', { name: 'sodium', core_configuration: '1s2.2s2.2p5' }), 'error core_not_closed core_configuration'],
    ['a core that breaks the levels', change.species('Na-I', { name: 'sodium', core_configuration: '1s2' }), 'error core_breaks_levels core_configuration'],
    ['an ionisation energy without source', change.species('Na-I', { name: 'sodium', core_configuration: '1s2.2s2.2p6', ionisation_energy_invcm: 41449 }), 'error missing_source ionisation_source'],
    ['an ionisation energy of zero', change.species('Na-I', { name: 'sodium', ionisation_energy_invcm: 0 }), 'error number_out_of_range ionisation_energy_invcm'],
    ['abundance above 100', change.isotope('Na-I/23', { ...iso, abundance_percent: 101 }), 'error number_out_of_range abundance_percent'],
    ['abundances above 100 together', change.isotope('Na-I/22', { ...iso, mass_u: 21.994, nuclear_spin: 3, abundance_percent: 1 }, 'create'), 'error abundances_above_100 abundance_percent'],
    ['a spin of the wrong half', change.isotope('Na-I/23', { ...iso, nuclear_spin: 1 }), 'error isotope_impossible nuclear_spin'],
    ['a spin of thirds', change.isotope('Na-I/23', { ...iso, nuclear_spin: '1/3' }), 'error half_integer_malformed nuclear_spin'],
    ['a mass of another nucleus', change.isotope('Na-I/23', { ...iso, mass_u: 24 }), 'error isotope_impossible mass_u'],
    ['fewer nucleons than protons', change.isotope('Na-I/10', { ...iso, mass_u: 10, nuclear_spin: 1, abundance_percent: 0 }, 'create'), 'error isotope_impossible -'],
    ['a spin that stored constants do not allow', change.isotope('Na-I/23', { ...iso, nuclear_spin: '1/2' }), 'error hyperfine_impossible nuclear_spin'],
    ['no source', change.isotope('Na-I/23', { ...iso, source: null }), 'error missing_source source'],
    ['hyperfine constants of nothing', change.hyperfine('Na-I.3/23', { source: 'paper', evidence: 'read' }), 'error missing_field a_mhz'],
    ['B at J = 1/2', change.hyperfine('Na-I.2/23', { a_mhz: 94, b_mhz: 1, source: 'paper', evidence: 'read' }, 'create'), 'error hyperfine_impossible b_mhz'],
    ['A of a nucleus without spin', change.hyperfine('Ne-I.2/20', { a_mhz: 94, source: 'paper', evidence: 'read' }, 'create'), 'error hyperfine_impossible -'],
    ['an isotope that is not there', change.hyperfine('Na-I.2/22', { a_mhz: 94, source: 'paper', evidence: 'read' }, 'create'), 'error isotope_unknown -'],
    ['a level that is retired', change.hyperfine('Na-I.5/23', { a_mhz: 94, source: 'paper', evidence: 'read' }, 'create'), 'error level_unknown -'],
  ])('%s', (_, given, wanted) => {
    expect(found(given)).toContain(wanted)
  })
})

describe('warnings', () => {
  it('of a measured g far from the coupled one, once it is new', () => {
    expect(found(change.create('Na-I.6', { ...MADE, configuration: '6p', term: '2P*3/2', measured_g: [{ value: 1.3, source: 'paper', evidence: 'read' }] }))).toEqual(['warning g_far_from_coupled measured_g.0.value'])
    expect(found(change.create('Na-I.6', { ...MADE, configuration: '6p', term: '2P*3/2', measured_g: [{ value: 1.3334, source: 'paper', evidence: 'read' }] }))).toEqual([])
  })

  it('of an interval that breaks the rule of the term', () => {
    expect(found(replaced('Fe-I.3', { energy_invcm: 750 }))).toContain('warning interval_ratio energy_invcm')
    expect(found(replaced('Fe-I.3', { energy_invcm: 704.0001 }))).toEqual([])
    expect(found(change.create('Fe-I.9', values('3d6.4s2', 'a 5D0', 978.07)))).toEqual([])
  })

  it('of an energy above the ionisation energy', () => {
    expect(found(change.create('Na-I.6', { ...MADE, energy_invcm: 50000 }))).toEqual(['warning energy_above_ionisation energy_invcm'])
    expect(found(change.species('Na-I', { name: 'sodium', core_configuration: '1s2.2s2.2p6', ionisation_energy_invcm: 20000, ionisation_source: 'paper', ionisation_evidence: 'read', note: 'looked at again' }))).toEqual(['warning energy_above_ionisation ionisation_energy_invcm'])
  })

  it('of an energy that moves by more than three standard deviations, or 0.001 cm^-1 where none is known', () => {
    expect(found(replaced('Na-I.3', { energy_invcm: 16973.41, energy_unc_invcm: 0.01 }))).toEqual([])
    expect(found(replaced('Na-I.3', { energy_invcm: 16973.43, energy_unc_invcm: 0.01 }))).toEqual(['warning energy_moved energy_invcm', 'warning lines_moved energy_invcm'])
    expect(found(replaced('Na-I.2', { energy_invcm: 16956.1705 }))).toEqual([])
    expect(found(replaced('Na-I.2', { energy_invcm: 16956.172 }))).toEqual(['warning energy_moved energy_invcm', 'warning lines_moved energy_invcm'])
  })

  it('counts the allowed lines that move, and not those that keep their place', () => {
    const [one] = checkChanges(table, [replaced('Na-I.2', { energy_invcm: 16956.2 })])
    expect(one?.findings.find((finding) => finding.code === 'lines_moved')?.detail).toMatch(/^2 allowed lines/)
    // every level of the species by the same amount: no line moves
    const all = [...table.levels].filter(([id, { row }]) => id.startsWith('Na-I.') && row.status === 'active').map(([id, { row }]) => replaced(id, { energy_invcm: row.energyInvcm + 1 }))
    expect(checkChanges(table, all).flatMap((checked) => checked.findings.map((finding) => finding.code))).not.toContain('lines_moved')
  })

  it('of digits beyond the uncertainty', () => {
    expect(found(replaced('Na-I.3', { energy_literal: '16973.37000', energy_unc_invcm: 0.01 }))).toEqual(['warning digits_beyond_uncertainty energy_literal'])
    expect(found(replaced('Na-I.3', { energy_literal: '16973.370', energy_unc_invcm: 0.012 }))).toEqual([])
    expect(found(change.create('Na-I.6', { ...MADE, energy_invcm: 36372.61839, energy_unc_invcm: 0.1 }))).toEqual(['warning digits_beyond_uncertainty energy_invcm'])
  })

  it('of an uncertainty of zero, which nothing measured has', () => {
    expect(found(replaced('Na-I.3', { energy_unc_invcm: 0 }))).toEqual(['warning uncertainty_zero energy_unc_invcm'])
    expect(found(replaced('Na-I.1', { energy_unc_invcm: 0 }))).toEqual([])
  })

  it('of a species without a level at zero', () => {
    expect(found(replaced('Na-I.1', { energy_invcm: 5 }))).toContain('warning no_zero energy_invcm')
    expect(found(change.retire('Na-I.1', 'x'))).toContain('warning no_zero energy_invcm')
  })

  it('of values that a replacement drops', () => {
    expect(found(replaced('Na-I.3', { note: null, measured_g: [] }))).toEqual(['warning values_dropped -'])
    expect(found(replaced('Na-I.3', { note: 'other' }))).toEqual([])
  })
})

describe('many changes', () => {
  const many = Array.from({ length: 3000 }, (_, at) => change.create(`Na-I.${100 + at}`, { ...MADE, configuration: `${20 + at % 400}s`, repeat_index: 1 + Math.floor(at / 400), energy_invcm: 30000 + at / 10 }))

  it('give the event loop back, tell how far they are, and end when told to', async () => {
    let turns = 0
    const timer = setInterval(() => (turns += 1), 1)
    const told: number[] = []
    const checked = await checkChangesInSteps(table, many, { pauseEvery: 50, onProgress: (done) => told.push(done) })
    clearInterval(timer)
    expect(checked).toEqual(checkChanges(table, many))
    expect(turns).toBeGreaterThan(2)
    expect(told.at(-1)).toBe(3000)
    expect([...told].sort((a, b) => a - b)).toEqual(told)
    await expect(checkChangesInSteps(table, many, { signal: AbortSignal.abort(new Error('stopped')) })).rejects.toThrow('stopped')
  })
})
