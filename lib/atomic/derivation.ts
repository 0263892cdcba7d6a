import { G_S } from '@/lib/atomic/constants'
import { Fraction } from '@/lib/atomic/exact'
import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import {
  jjG,
  jjGExact,
  type JjQuantumNumbers,
  landeG,
  landeGExact,
  type LsQuantumNumbers,
  pairG,
  pairGExact,
  type PairQuantumNumbers,
} from '@/lib/atomic/lande'
import { shellLetter } from '@/lib/atomic/letters'
import { lsTerm, printTerm } from '@/lib/atomic/term'

/** One line of a derivation for display. `text` is plain ASCII mathematics; `exact` a fraction where the step has one. */
export interface DerivationStep {
  label: string
  text: string
  exact: string | null
  value: number | null
}

const jj = (two: TwoJ): string => new Fraction(two * (two + 2), 4).toFraction()

/** The projection of A on R = A + B: [R(R+1) + A(A+1) - B(B+1)] / 2R(R+1). */
const projection = (twoA: TwoJ, twoB: TwoJ, twoR: TwoJ): Fraction =>
  new Fraction(twoR * (twoR + 2) + twoA * (twoA + 2) - twoB * (twoB + 2), 2 * twoR * (twoR + 2))

const projectionText = (twoA: TwoJ, twoB: TwoJ, twoR: TwoJ): string => `[${jj(twoR)} + ${jj(twoA)} - ${jj(twoB)}] / (2 x ${jj(twoR)})`

const step = (label: string, text: string, exact: Fraction | string | null, value?: number | null): DerivationStep => {
  const asText = exact === null || typeof exact === 'string' ? exact : exact.toFraction()
  return { label, text, exact: asText, value: value === undefined ? (asText === null ? null : new Fraction(asText).valueOf()) : value }
}

const noG: DerivationStep = { label: 'J = 0', text: 'A level with J = 0 has one sublevel, m = 0, and no g_J.', exact: null, value: null }

/** The last two lines of every derivation: the fraction at g_s = 2 and the number with the electron's own g_s. */
const results = (exact: string | null, real: number | null, gS: number): DerivationStep[] => [
  step('g_J with g_s = 2', exact === null ? 'none' : `g_J = ${exact}`, exact),
  step(`g_J with g_s = ${gS}`, `g_J = ${real ?? 'none'}`, null, real),
]

/** How the Landé g of an LS level comes about, step by step: quantum numbers, the orbital and the spin share, the exact and the real g. */
export function landeDerivation(level: LsQuantumNumbers, gS: number = G_S): DerivationStep[] {
  const { twoS, l, twoJ } = level
  const numbers = step('Quantum numbers', `S = ${formatHalf(twoS)}, L = ${l}, J = ${formatHalf(twoJ)}`, null, null)
  if (twoJ === 0) return [numbers, noG]
  return [
    numbers,
    step('Formula', 'g_J = g_L [J(J+1) + L(L+1) - S(S+1)] / 2J(J+1) + g_s [J(J+1) + S(S+1) - L(L+1)] / 2J(J+1)', null, null),
    step('Orbital share', projectionText(2 * l, twoS, twoJ), projection(2 * l, twoS, twoJ)),
    step('Spin share', projectionText(twoS, 2 * l, twoJ), projection(twoS, 2 * l, twoJ)),
    ...results(landeGExact(level), landeG(level, { gS }), gS),
  ]
}

const coreSteps = (core: LsQuantumNumbers, gS: number): DerivationStep[] => {
  const name = printTerm(lsTerm(core.twoS, core.l, core.twoJ, null), 'ascii')
  if (core.twoJ === 0) return [step('Core', `${name} has J1 = 0 and adds nothing`, null, null)]
  return [step(`Core g, ${name}`, `g_1 = ${landeGExact(core) ?? 'none'} with g_s = 2`, landeGExact(core), landeG(core, { gS }))]
}

/** How g in pair coupling comes about: the core's g, then K = J1 + l, then J = K + s. */
export function pairDerivation(level: PairQuantumNumbers, gS: number = G_S): DerivationStep[] {
  const { core, lOuter, twoK, twoJ } = level
  const numbers = step('Quantum numbers', `J1 = ${formatHalf(core.twoJ)}, l = ${lOuter} (${shellLetter(lOuter)} electron), K = ${formatHalf(twoK)}, J = ${formatHalf(twoJ)}`, null, null)
  if (twoJ === 0) return [numbers, noG]
  const toK =
    twoK === 0
      ? [step('K = 0', 'adds nothing to J', null, null)]
      : [
          step('Core in K', projectionText(core.twoJ, 2 * lOuter, twoK), projection(core.twoJ, 2 * lOuter, twoK)),
          step('Orbit in K', projectionText(2 * lOuter, core.twoJ, twoK), projection(2 * lOuter, core.twoJ, twoK)),
        ]
  return [
    numbers,
    step('Formula', 'J1 + l = K, K + s = J; each g is the projection of its two parts', null, null),
    ...coreSteps(core, gS),
    ...toK,
    step('K in J', projectionText(twoK, 1, twoJ), projection(twoK, 1, twoJ)),
    step('Spin in J', projectionText(1, twoK, twoJ), projection(1, twoK, twoJ)),
    ...results(pairGExact(level), pairG(level, gS), gS),
  ]
}

/** How g in jj coupling comes about: the core's g and the outer electron's, then J = J1 + j2. */
export function jjDerivation(level: JjQuantumNumbers, gS: number = G_S): DerivationStep[] {
  const { core, lOuter, twoJOuter, twoJ } = level
  const outer = { twoS: 1, l: lOuter, twoJ: twoJOuter }
  const numbers = step('Quantum numbers', `J1 = ${formatHalf(core.twoJ)}, l = ${lOuter}, j2 = ${formatHalf(twoJOuter)}, J = ${formatHalf(twoJ)}`, null, null)
  if (twoJ === 0) return [numbers, noG]
  return [
    numbers,
    ...coreSteps(core, gS),
    step('Outer electron g', `g_2 = ${landeGExact(outer) ?? 'none'} with g_s = 2`, landeGExact(outer), landeG(outer, { gS })),
    step('Core in J', projectionText(core.twoJ, twoJOuter, twoJ), projection(core.twoJ, twoJOuter, twoJ)),
    step('Outer electron in J', projectionText(twoJOuter, core.twoJ, twoJ), projection(twoJOuter, core.twoJ, twoJ)),
    ...results(jjGExact(level), jjG(level, gS), gS),
  ]
}
