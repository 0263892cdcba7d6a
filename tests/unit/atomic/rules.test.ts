import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { defaultKind, judge, judgeComponent, type JudgedLevel, KIND_CODE, KINDS, LS_BITS, quickVerdict, RIGOROUS_BITS, RULE_BIT, ruleMask } from '@/lib/atomic/rules'
import { squared3j } from '@/lib/atomic/wigner'

const level = (twoJ: number, parity: 'even' | 'odd', twoS: number | null = null, l: number | null = null, coupling = twoS === null ? 'J1K' : 'LS'): JudgedLevel => ({ twoJ, parity, twoS, l, coupling })

const judgedLevels = fc
  .record({ twoJ: fc.integer({ min: 0, max: 8 }), parity: fc.constantFrom('even' as const, 'odd' as const), twoS: fc.option(fc.integer({ min: 0, max: 4 })), l: fc.option(fc.integer({ min: 0, max: 4 })), coupling: fc.constantFrom('LS', 'LS', 'J1K', 'unassigned') })
  .map((one): JudgedLevel => one)

describe('judging a pair', () => {
  it('the mask, the quick verdict and the full verdict are one', () => {
    fc.assert(
      fc.property(judgedLevels, judgedLevels, fc.constantFrom(...KINDS), (a, b, kind) => {
        const mask = quickVerdict(a, b, kind)
        const verdict = judge(a, b, kind)
        for (const rule of verdict.rules) {
          const failed = (mask & RULE_BIT[rule.rule]) !== 0
          if (rule.verdict !== 'not_applicable') expect(failed).toBe(rule.verdict === 'fail')
          else expect(failed).toBe(false)
          expect(rule.detail.length).toBeGreaterThan(5)
        }
        expect(verdict.allowed).toBe((mask & RIGOROUS_BITS) === 0)
        expect(verdict.ls).toBe((mask & RULE_BIT.lsUnknown) !== 0 ? null : (mask & (RIGOROUS_BITS | LS_BITS)) === 0)
        const ls = (one: JudgedLevel) => one.coupling === 'LS' && one.twoS !== null && one.l !== null
        const both = ls(a) && ls(b)
        expect(mask).toBe(ruleMask(KIND_CODE[kind], a.twoJ, a.parity === 'odd' ? 1 : 0, both ? (a.twoS ?? -1) : -1, a.l ?? -1, b.twoJ, b.parity === 'odd' ? 1 : 0, both ? (b.twoS ?? -1) : -1, b.l ?? -1))
      }),
      { numRuns: 500 },
    )
  })

  it('the order of the ends does not matter to the verdict', () => {
    fc.assert(fc.property(judgedLevels, judgedLevels, fc.constantFrom(...KINDS), (a, b, kind) => {
      expect(quickVerdict(a, b, kind)).toBe(quickVerdict(b, a, kind))
    }))
  })

  it('the rigorous rules say yes exactly when some component has an amplitude', () => {
    for (const kind of KINDS) {
      const rank = kind === 'E2' ? 4 : 2
      for (let twoJ = 0; twoJ <= 9; twoJ += 1) {
        for (let other = 0; other <= 9; other += 1) {
          if ((twoJ + other) % 2 === 1) continue
          let any = false
          for (let m = -twoJ; m <= twoJ; m += 2) for (let n = -other; n <= other; n += 2) any ||= !squared3j(other, rank, twoJ, -n, n - m, m).equals(0)
          expect(judge(level(twoJ, 'even'), level(other, kind === 'E1' ? 'odd' : 'even'), kind).allowed).toBe(any)
        }
      }
    }
  })

  it('an intercombination line is allowed, and marked', () => {
    // Hg 253.65 nm
    expect(judge(level(0, 'even', 0, 0), level(2, 'odd', 2, 1), 'E1')).toMatchObject({ allowed: true, ls: false, intercombination: true })
    // Na D2
    expect(judge(level(1, 'even', 1, 0), level(3, 'odd', 1, 1), 'E1')).toMatchObject({ allowed: true, ls: true, intercombination: false })
    // pair coupling at one end: the LS rules do not apply
    expect(judge(level(0, 'even', 0, 0), level(2, 'odd'), 'E1')).toMatchObject({ allowed: true, ls: null, intercombination: false })
    // a forbidden pair that changes S is no intercombination line
    expect(judge(level(0, 'even', 0, 0), level(4, 'odd', 2, 1), 'E1')).toMatchObject({ allowed: false, intercombination: false })
  })

  it('default kind: E1 across parities, else M1, else E2', () => {
    expect([defaultKind('even', 'odd'), defaultKind('even', 'even')]).toEqual(['E1', 'M1'])
    expect([defaultKind('even', 'even', 4, 4), defaultKind('even', 'even', 0, 4), defaultKind('odd', 'odd', 0, 0), defaultKind('odd', 'odd', 1, 7)]).toEqual(['M1', 'E2', 'M1', 'M1'])
  })
})

describe('judging a component', () => {
  const failing = (kind: 'E1' | 'M1' | 'E2', a: [number, number], b: [number, number]) =>
    judgeComponent(kind, { twoJ: a[0], twoM: a[1] }, { twoJ: b[0], twoM: b[1] }).rules.filter((rule) => rule.verdict === 'fail').map((rule) => rule.rule)

  it('names the rule that fails', () => {
    expect(failing('E1', [2, 0], [2, 0])).toEqual(['m_zero_zero'])
    expect(failing('E1', [2, 0], [4, 0])).toEqual([])
    expect(failing('E1', [4, -4], [4, 0])).toEqual(['delta_m'])
    expect(failing('E2', [4, -4], [4, 0])).toEqual([])
    // E2, J = 1 -> 2, m = 0 -> 0: the 3j symbol (2 2 1; 0 0 0) vanishes, its sum of j's being odd
    expect(failing('E2', [2, 0], [4, 0])).toEqual(['zero_amplitude'])
    // E2, J = 1/2 -> 3/2: a triangle with 2
    expect(failing('E2', [1, 1], [3, 1])).toEqual([])
    expect(judgeComponent('M1', { twoJ: 2, twoM: 2 }, { twoJ: 2, twoM: 0 }).allowed).toBe(true)
  })
})
