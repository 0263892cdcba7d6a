import { describe, expect, it } from 'vitest'
import { judge, type JudgedLevel, type Kind, type RuleVerdict } from '@/lib/atomic/rules'
import { lsDipoleAmplitude } from '@/lib/atomic/term-coupling'
import { sixJ } from '@/lib/atomic/wigner'
import { readCases } from './read'

interface Level {
  label: string
  twoS: number
  L: number
  twoJ: number
  parity: 1 | -1
}
interface Case {
  lower: Level
  upper: Level
  E1: Record<string, boolean>
  M1: Record<string, boolean>
  E2: Record<string, boolean>
  lsLineFactor: string
}

const cases = readCases<Case>('02-selection-rules.json')
const judged = (level: Level): JudgedLevel => ({ twoJ: level.twoJ, twoS: level.twoS, l: level.L, parity: level.parity === 1 ? 'even' : 'odd', coupling: 'LS' })
const verdictOf = (passed: boolean | undefined): RuleVerdict => (passed ? 'pass' : 'fail')

const rulesOf = (row: Case, kind: Kind): Record<string, RuleVerdict> =>
  Object.fromEntries(judge(judged(row.lower), judged(row.upper), kind).rules.map((rule) => [rule.rule, rule.verdict]))

describe('selection rules, one by one, for 337 pairs of LS levels', () => {
  it('E1, rigorous and LS', () => {
    expect(cases).toHaveLength(337)
    for (const row of cases) {
      const { E1 } = row
      expect(rulesOf(row, 'E1'), `${row.lower.label} ${row.upper.label}`).toEqual({
        parity: verdictOf(E1.parityChanges),
        delta_j: verdictOf(E1.deltaJ_0_pm1),
        zero_zero: verdictOf(E1.notJ0toJ0),
        delta_s: verdictOf(E1.deltaS_0),
        delta_l: verdictOf(E1.deltaL_0_pm1),
        l_zero_zero: verdictOf(E1.notL0toL0),
      })
      const verdict = judge(judged(row.lower), judged(row.upper), 'E1')
      expect(verdict).toMatchObject({ allowed: E1.rigorous, rigorous: E1.rigorous, ls: E1.ls, intercombination: E1.rigorous === true && E1.deltaS_0 === false })
    }
  })

  it('M1 and E2: rigorous rules only', () => {
    for (const row of cases) {
      const apart = { delta_s: 'not_applicable', delta_l: 'not_applicable', l_zero_zero: 'not_applicable' }
      expect(rulesOf(row, 'M1')).toEqual({ parity: verdictOf(row.M1.paritySame), delta_j: verdictOf(row.M1.deltaJ_0_pm1), zero_zero: verdictOf(row.M1.notJ0toJ0), ...apart })
      expect(rulesOf(row, 'E2')).toEqual({ parity: verdictOf(row.E2.paritySame), delta_j: verdictOf(row.E2.deltaJ_le_2), zero_zero: verdictOf(row.E2.sumJ_ge_2), ...apart })
      for (const kind of ['M1', 'E2'] as const) {
        expect(judge(judged(row.lower), judged(row.upper), kind)).toMatchObject({ allowed: row[kind].rigorous, ls: null, intercombination: false })
      }
    }
  })

  it('LS line factors: the amplitudes in the uncoupled basis and the 6j form (header: 1e-12)', () => {
    for (const { lower, upper, lsLineFactor } of cases) {
      const [n = 0, d = 1] = lsLineFactor.split('/').map(Number)
      let factor = 0
      if (lower.twoS === upper.twoS) {
        for (let twoMl = -lower.twoJ; twoMl <= lower.twoJ; twoMl += 2) {
          for (let twoMu = twoMl - 2; twoMu <= twoMl + 2; twoMu += 2) {
            if (Math.abs(twoMu) > upper.twoJ) continue
            factor += lsDipoleAmplitude(lower.twoS, { l: lower.L, twoJ: lower.twoJ, twoM: twoMl }, { l: upper.L, twoJ: upper.twoJ, twoM: twoMu }) ** 2
          }
        }
      }
      expect(Math.abs(factor - n / d)).toBeLessThanOrEqual(1e-12)
      const six = lower.twoS === upper.twoS ? (lower.twoJ + 1) * (upper.twoJ + 1) * sixJ(2 * lower.L, lower.twoJ, lower.twoS, upper.twoJ, 2 * upper.L, 2) ** 2 : 0
      expect(Math.abs(six - n / d)).toBeLessThanOrEqual(1e-12)
    }
  })
})
