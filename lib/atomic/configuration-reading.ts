import { type Parsed, parsed, refused } from '@/lib/atomic/errors'
import { lOfShellLetter, SHELL_LETTERS, shellLetter } from '@/lib/atomic/letters'
import { capacity, type ConfigurationPart, type Shell } from '@/lib/atomic/shells'
import { quoted } from '@/lib/units/number'

const LARGEST_N = 999
const MOST_READINGS = 400

interface Draft {
  shells: Shell[]
  /** Counts of 1 that this reading takes as written out, which nobody does. */
  writtenOnes: number
  sumOfN: number
}

/** Why a shell cannot be, or null. */
function wrongShell(n: number, l: number, count: number): string | null {
  const name = `${n}${shellLetter(l)}`
  if (n < 1 || n > LARGEST_N) return `n runs from 1 to ${LARGEST_N}, so ${name} is no shell`
  if (n <= l) return `${name} is no shell, since n must be more than l (${shellLetter(l)} begins at n = ${l + 1})`
  if (count < 1) return `${name} with no electron should be left out`
  if (count > capacity(l)) return `${name} holds at most ${capacity(l)} electrons, not ${count}`
  return null
}

const isNumber = (digits: string): boolean => /^[1-9]\d*$/.test(digits)

/** The ways to cut the digits between two letters into a count (or none) and the next n. */
function cuts(digits: string, marked: boolean): { count: number; written: boolean; n: string }[] {
  const list: { count: number; written: boolean; n: string }[] = []
  for (let size = marked ? 1 : 0; size < digits.length && size <= 2; size += 1) {
    const [count, n] = [digits.slice(0, size), digits.slice(size)]
    if (isNumber(n) && (size === 0 || isNumber(count))) list.push({ count: size === 0 ? 1 : Number(count), written: size > 0, n })
  }
  return list
}

interface Letters {
  letter: string
  /** What stands after the letter up to the next one: count and next n, run together. */
  after: string
}

const simplest = (a: Draft, b: Draft): number => a.writtenOnes - b.writtenOnes || a.sumOfN - b.sumOfN

/**
 * Every reading of a run of shells without separators, simplest first: `2s22p2` is 2s2.2p2 before 2s.22p2, `4s14s` is 4s.14s.
 * A raised count (`^6`) is a count and nothing else. Errors name the part that could not be read, and the letters that can.
 */
export function readShells(run: string, whole: string): Parsed<ConfigurationPart[][]> {
  const place = run === whole.trim() ? quoted(run) : `${quoted(run)} in ${quoted(whole)}`
  const fail = (why: string) => refused('configuration_malformed', `${place} could not be read: ${why}. A shell is n, a letter (${SHELL_LETTERS.slice(0, 7).split('').join(' ')} ...) and the number of electrons, such as 3d6.`)
  const first = /^(\d*)/.exec(run)?.[1] ?? ''
  const tail = run.slice(first.length)
  if (first === '') return fail(`a number n must stand before "${tail.slice(0, 1)}"`)
  if (tail === '') return fail(`a letter must follow "${first}"`)
  const letters: Letters[] = []
  for (const match of tail.matchAll(/([a-zA-Z])(\^?\d*)|(.)/gs)) {
    const letter = match[1] ?? ''
    if (match[3] !== undefined) return fail(`"${match[3]}" has no meaning there`)
    if (lOfShellLetter(letter) === null) {
      const lower = lOfShellLetter(letter.toLowerCase()) !== null
      return fail(lower ? `letters of shells are lower case ("${letter}" would be a term)` : `"${letter}" is no shell's letter`)
    }
    letters.push({ letter, after: match[2] ?? '' })
  }
  let problem: string | null = null
  let drafts: { draft: Draft; n: string }[] = [{ draft: { shells: [], writtenOnes: 0, sumOfN: 0 }, n: first }]
  letters.forEach(({ letter, after }, index) => {
    const l = lOfShellLetter(letter) ?? 0
    const marked = after.startsWith('^')
    const digits = after.replace('^', '')
    const isLast = index === letters.length - 1
    const ends = isLast ? [{ count: digits === '' ? 1 : Number(digits), written: digits !== '', n: '' }] : cuts(digits, marked)
    if (ends.length === 0) problem ??= `a number n must stand before the letter after "${letter}${digits}"`
    const next: { draft: Draft; n: string }[] = []
    for (const { draft, n } of drafts) {
      for (const end of ends) {
        const wrong = wrongShell(Number(n), l, end.count)
        if (wrong !== null) {
          problem ??= wrong
          continue
        }
        const shell: Shell = { kind: 'shell', n: Number(n), l, count: end.count }
        next.push({ draft: { shells: [...draft.shells, shell], writtenOnes: draft.writtenOnes + (end.written && end.count === 1 && !isLast ? 1 : 0), sumOfN: draft.sumOfN + shell.n }, n: end.n })
      }
    }
    drafts = next.sort((a, b) => simplest(a.draft, b.draft)).slice(0, MOST_READINGS)
  })
  if (drafts.length === 0) {
    const impossible = problem !== null && !String(problem).startsWith('a number')
    return impossible ? refused('configuration_impossible', `${place} cannot be: ${problem}.`) : fail(problem ?? 'no reading is possible')
  }
  return parsed(drafts.sort((a, b) => simplest(a.draft, b.draft)).map(({ draft }) => draft.shells))
}
