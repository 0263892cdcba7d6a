import type { Level } from '@/openapi/schemas/level'
import { halves } from '@/app/_components/number'

export interface TermPart {
  symbol: string
  value: number | string
  meaning: string
}

const MULTIPLICITIES = ['singlet', 'doublet', 'triplet', 'quartet', 'quintet', 'sextet', 'septet', 'octet', 'nonet', 'decet']
const RAISED = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const LETTERS = 'SPDFGHIKLMNOQRTUV'

/** `doublet` for 2; from eleven on by number. */
export const multiplicityWord = (multiplicity: number): string => MULTIPLICITIES[multiplicity - 1] ?? `${multiplicity}-fold term`

const letter = (l: number): string => LETTERS[l] ?? `L = ${l}`
const small = (l: number): string => letter(l).toLowerCase()

const states = (degeneracy: number): string => (degeneracy === 1 ? 'a single state' : `${degeneracy} states that a magnetic field parts`)

/** Why `multiplicity` can be larger than the number of J's a term really has. */
function spinMeaning(multiplicity: number, s: number, l: number): string {
  const js = Math.min(2 * s + 1, 2 * l + 1)
  const has = js === multiplicity ? '' : `; with this L it has only ${js} value${js === 1 ? '' : 's'} of J`
  return `total spin; multiplicity 2S + 1 = ${multiplicity}, a ${multiplicityWord(multiplicity)}${has}`
}

/** What a level's name says: a sentence, and each quantum number with its meaning. */
export function decodedTerm({ term, coupling }: Level): { sentence: string; parts: TermPart[] } {
  const j: TermPart = { symbol: 'J', value: term.j, meaning: `total angular momentum; 2J + 1 = ${term.degeneracy}: ${states(term.degeneracy)}` }
  const parity: TermPart = { symbol: 'P', value: term.parity, meaning: `parity: the l of the electrons add up to an ${term.parity} number` }
  const label: TermPart[] = term.label ? [{ symbol: 'label', value: term.label, meaning: 'tells apart terms of the same symbol; part of the name, not of the term' }] : []
  if (coupling === 'LS' && term.s !== null && term.l !== null && term.multiplicity !== null) {
    return {
      sentence: `A ${multiplicityWord(term.multiplicity)} ${letter(term.l)} level of ${term.parity} parity with J = ${halves(term.j)}, in LS (Russell–Saunders) coupling: ${states(term.degeneracy)}.`,
      parts: [
        { symbol: 'S', value: term.s, meaning: spinMeaning(term.multiplicity, term.s, term.l) },
        { symbol: 'L', value: term.l, meaning: `total orbital angular momentum, letter ${letter(term.l)}` },
        j,
        parity,
        ...label,
      ],
    }
  }
  const { core } = term
  if (coupling === 'J1K' && core && term.k !== undefined && term.l_outer !== undefined) {
    return {
      sentence: `A pair-coupled level of ${term.parity} parity with J = ${halves(term.j)}: the core’s J and the orbit of the outer electron make K, and K with its spin makes J. It has no S and L of its own.`,
      parts: [
        { symbol: 'core', value: `${RAISED[2 * core.s + 1] ?? ''}${letter(core.l)} ${halves(core.j)}`, meaning: `a ${multiplicityWord(2 * core.s + 1)} ${letter(core.l)} core with J = ${halves(core.j)}` },
        { symbol: 'l', value: term.l_outer, meaning: `orbit of the outer electron, a ${small(term.l_outer)} electron` },
        { symbol: 'K', value: term.k, meaning: 'the core’s J and the outer l together; written in brackets' },
        j,
        parity,
        ...label,
      ],
    }
  }
  return {
    sentence: `A level of ${term.parity} parity with J = ${halves(term.j)}${coupling === 'unassigned' ? ', not assigned to a coupling scheme' : ` in ${coupling} coupling`}: ${states(term.degeneracy)}.`,
    parts: [j, parity, ...label],
  }
}
