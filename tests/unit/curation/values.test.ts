import { describe, expect, it } from 'vitest'
import { atomOf, readLevelValues, readPrinted, writeLevelValues, writeValues } from '@/lib/curation/values'
import { differences } from '@/lib/curation/values'
import type { LevelValues } from '@/openapi/schemas/change'
import { smallTable, SPECIES, values } from './table'

const read = (given: LevelValues, species = 'Na-I') => readLevelValues(given, { atom: atomOf(species, SPECIES[species]!) })
const row = (given: LevelValues, species?: string) => {
  const { row: made, findings } = read(given, species)
  if (made === null) throw new Error(JSON.stringify(findings))
  return made
}

describe('printed digits', () => {
  it.each([
    ['16973.36619', 16973.36619, null, 5],
    ['16973.36619(2)', 16973.36619, 0.00002, 5],
    ['16 973.366 19(12)', 16973.36619, 0.00012, 5],
    ['16973.4(1.5)', 16973.4, 1.5, 1],
    ['123(4)', 123, 4, 0],
    ['\u22121.5', -1.5, null, 1],
    ['1.2345e4', 12345, null, 0],
    ['0', 0, null, 0],
  ])('%s', (text, value, unc, decimals) => {
    expect(readPrinted(text)).toEqual({ value, unc, decimals })
  })

  it.each(['', 'x', '1,5', '1.5.2', '(2)', '1.5(', '1.5(2', '[12345]', '1e999', '1.5 (2) (3)', '12 34x'])('not %j', (text) => {
    expect(readPrinted(text)).toBeNull()
  })
})

describe('whatever is written', () => {
  const WRONG = [null, '', ' ', 'x', '\u2603', '\u202e3p', '(', '[', '3p\u0000', '1e999', '-0', '0', '1/2', 'NaN', '2P*3/2', '3p'.repeat(60), '\ufffd', '=1+1', 'J=', 'J=1/3', 'z', '2[', '(1/2', '1.5(2)']

  it('is read, or said to be wrong; never anything else', () => {
    const full: LevelValues = { ...values('2p5.(2P*3/2).3s', '2[3/2]*2', 134041.84, { coupling: 'J1K', core: '2P*3/2', l_outer: 0, repeat_index: 1, g_j_chosen: 1.5, g_j_chosen_reason: 'x', energy_unc_invcm: 1 }), energy_literal: '134041.84' }
    expect(read(full, 'Ne-I').findings).toEqual([])
    for (const field of [...Object.keys(full), 'g_j_measured', 'g_j_measured_unc', 'g_source', 'g_evidence', 'alternative_name'] as (keyof LevelValues)[]) {
      for (const wrong of WRONG) {
        const { row: made, findings } = read({ ...full, [field]: wrong } as LevelValues, 'Ne-I')
        expect(made === null, `${field} ${JSON.stringify(wrong)}`).toBe(findings.some((one) => one.severity === 'error'))
        if (made === null) continue
        expect(row(writeLevelValues(made), 'Ne-I'), `${field} ${JSON.stringify(wrong)}`).toEqual(made)
      }
    }
  })
})

describe('the values of a level', () => {
  it('are read with the energy from the printed digits, and its uncertainty from their bracket', () => {
    expect(row(values('3p', '2P*3/2', 0, { energy_invcm: null, energy_literal: '16973.36619(2)' }))).toMatchObject({ energyInvcm: 16973.36619, energyUncInvcm: 0.00002, energyLiteral: '16973.36619(2)' })
    expect(row(values('3p', '2P*3/2', 16973.36619, { energy_literal: '16973.36619' }))).toMatchObject({ energyInvcm: 16973.36619, energyUncInvcm: null })
    expect(row(values('3p', '2P*3/2', 0, { energy_invcm: '16973.4', energy_unc_invcm: '0.1' }))).toMatchObject({ energyInvcm: 16973.4, energyUncInvcm: 0.1, energyLiteral: null })
    expect(read(values('3p', '2P*3/2', 0, { energy_invcm: null, energy_literal: '16973.36619(2)', energy_unc_invcm: 0.1 })).findings[0]?.code).toBe('uncertainty_differs')
    expect(read(values('3p', '2P*3/2', 16973.4, { energy_literal: '16973.36619' })).findings[0]?.code).toBe('literal_differs')
  })

  it('are read in any notation and written in one', () => {
    const fe = (configuration: string, term: string) => writeLevelValues(row(values(configuration, term, 19350.891), 'Fe-I'))
    for (const [configuration, term] of [['3d6(5D)4s4p(3P)', 'z7D*5'], ['3d6.(5D).4s.4p.(3P*)', 'z 7D*5'], ['3d\u2076(\u2075D)4s4p(\u00b3P\u00b0)', 'z\u2077D\u00b0\u2085'], [' 3d6 (5D) 4s 4p (3P) ', 'z7Do5']] as const) {
      expect(fe(configuration, term)).toMatchObject({ configuration: '3d6.(5D).4s.4p.(3P*)', term: 'z 7D*5', coupling: 'LS', core: null, l_outer: null })
    }
    expect(fe('3d6.4s2', 'sp5D4').term).toBe('sp 5D4')
  })

  it('take the short form for one measured g_J', () => {
    const short = row(values('3p', '2P*3/2', 16973, { g_j_measured: '1.3342(2)', g_source: 'paper', g_evidence: 'quoted' }))
    expect(short.measured).toEqual([{ value: 1.3342, unc: 0.0002, literal: '1.3342(2)', source: 'paper', evidence: 'quoted', note: null }])
    expect(row(values('3p', '2P*3/2', 16973, { g_j_measured: 1.3342, g_j_measured_unc: 0.0001, g_source: 'paper', g_evidence: 'read' })).measured).toMatchObject([{ value: 1.3342, unc: 0.0001, literal: null }])
    expect(row(values('3p', '2P*3/2', 16973, { measured_g: [{ literal: '1.3342(2)', source: 'paper', evidence: 'read' }] })).measured).toMatchObject([{ value: 1.3342, unc: 0.0002 }])
    expect(read(values('3p', '2P*3/2', 16973, { g_source: 'paper' })).findings.map((one) => [one.code, one.field])).toEqual([['measured_g_missing', 'g_source']])
    expect(read(values('3p', '2P*3/2', 16973, { g_j_measured: 1.33 })).findings.map((one) => one.code)).toEqual(['missing_source', 'missing_evidence'])
  })

  it('come back the same after writing and reading, in every coupling', () => {
    const rows = [
      ...[...smallTable().levels].filter(([, { row: one }]) => one.status === 'active').map(([id, { row: one }]) => [id.split('.')[0] ?? '', one] as const),
      ['Ne-I', row(values('2p5.(2P*1/2).3s', '(1/2,1/2)*1', 135888.7, { coupling: 'jj', core: '2P*1/2', l_outer: 0, alternative_name: '1s2', repeat_index: '2', line_checked: true }), 'Ne-I')] as const,
      ['Ne-I', row(values('2p5.(2P*1/2).3s', 'q (1/2,1/2)*0', 135888.7, { coupling: 'jj' }), 'Ne-I')] as const,
      ['Ne-I', row(values('2p5.3s', 'abc J=1*', 135888.7, { coupling: 'unassigned', g_j_chosen: 1.2, g_j_chosen_reason: 'seen' }), 'Ne-I')] as const,
    ]
    for (const [species, one] of rows) {
      const again = row(writeLevelValues(one), species)
      expect(again).toEqual(one)
      expect(differences('level', one, again)).toEqual([])
    }
  })

  it('differ field by field', () => {
    const { row: before } = smallTable().levels.get('Na-I.3')!
    const after = row({ ...writeLevelValues(before), energy_invcm: 16974, note: null })
    expect(differences('level', before, after)).toEqual([{ field: 'energy_invcm', before: 16973.37, after: 16974 }, { field: 'note', before: 'a note', after: null }])
    expect(differences('level', before, { ...before, status: 'retired', retiredReason: 'x', successor: null })).toEqual([{ field: 'status', before: 'active', after: 'retired' }, { field: 'reason', before: null, after: 'x' }])
    expect(differences('level', null, before).map((one) => one.field)).not.toContain('core')
    expect(writeValues('isotope', smallTable().isotopes.get('Na-I/23')!.row)).toMatchObject({ nuclear_spin: '3/2' })
  })
})
