import { NOBLE_GAS_CORES } from '@/lib/atomic/elements'
import { type Parsed, parsed, refused } from '@/lib/atomic/errors'
import { readShells } from '@/lib/atomic/configuration-reading'
import { formatHalf, type TwoJ } from '@/lib/atomic/half'
import { shellLetter, termLetter } from '@/lib/atomic/letters'
import { termAllowed, tooManyOpenShells, walkConfiguration } from '@/lib/atomic/microstates'
import { capacity, type Configuration, type ConfigurationPart, isShell, type Shell } from '@/lib/atomic/shells'
import { type LsTerm, parseTerm, type Parity, printTerm } from '@/lib/atomic/term'
import { quoted } from '@/lib/units/number'

export type { Configuration, ConfigurationPart, ParentPart, Shell } from '@/lib/atomic/shells'

const FORMS = 'write shells such as 2s2.2p2 or 3d6(5D)4s4p(3P), a noble-gas core such as [Ar] first if wanted'
const SUPERSCRIPTS = '⁰¹²³⁴⁵⁶⁷⁸⁹'
const LONGEST = 160
/** More readings than any real configuration has; a text that has more is no configuration. */
const MOST_READINGS = 4000
/** Parents are checked against the terms of their shells, which costs more. */
const MOST_WITH_PARENTS = 60

const shellText = (shell: Shell): string => `${shell.n}${shellLetter(shell.l)}${shell.count === 1 ? '' : shell.count}`

interface Segment {
  kind: 'shells' | 'parent'
  text: string
}

/** A raised count is a count and nothing else, so it ends its shell: `2s²2p` becomes `2s^2 2p`. */
const lowerCounts = (text: string): string => text.replace(/[⁰¹²³⁴-⁹]+/g, (run) => `^${[...run].map((d) => SUPERSCRIPTS.indexOf(d)).join('')} `)

/** Cuts the text into runs of shells and parents in brackets; null with what stood in the way when that fails. */
function segmentsOf(text: string): Segment[] | null {
  const segments: Segment[] = []
  for (const match of text.matchAll(/\(([^()]*)\)|([^()]+)/g)) {
    if (match[1] !== undefined) segments.push({ kind: 'parent', text: match[1].trim() })
    else if (match[2] !== undefined) for (const run of lowerCounts(match[2]).split(/[.\s]+/)) if (run !== '') segments.push({ kind: 'shells', text: run })
  }
  // brackets left over after the balanced ones are cut out match nothing
  return /[()]/.test(text.replace(/\([^()]*\)/g, '')) ? null : segments
}

function readParent(text: string, whole: string): Parsed<LsTerm> {
  const term = parseTerm(text)
  if (!term.ok) return refused(term.code === 'term_impossible' ? 'configuration_impossible' : 'configuration_malformed', `The parent (${text}) in ${quoted(whole)} cannot be used. ${term.detail}`)
  if (term.value.kind !== 'LS') return refused('configuration_malformed', `The parent (${text}) in ${quoted(whole)} must be an LS term such as (5D) or (2P*3/2).`)
  return parsed(term.value)
}

const repeated = (parts: readonly ConfigurationPart[]): Shell | null => {
  const seen = new Set<number>()
  for (const part of parts) {
    if (!isShell(part)) continue
    const key = part.n * 64 + part.l
    if (seen.has(key)) return part
    seen.add(key)
  }
  return null
}

/** Joins the readings of each run into whole configurations, simplest first, and gives each parent the parity of its shells. */
function combine(choices: readonly (readonly ConfigurationPart[][])[]): ConfigurationPart[][] {
  let whole: ConfigurationPart[][] = [[]]
  for (const options of choices) {
    const next: ConfigurationPart[][] = []
    for (const before of whole) for (const option of options) if (next.length < MOST_READINGS) next.push([...before, ...option])
    whole = next
  }
  return whole
}

function settle(core: string | null, parts: readonly ConfigurationPart[], text: string): Parsed<Configuration> {
  const twice = repeated(parts)
  if (twice) return refused('configuration_impossible', `${quoted(text)} names the shell ${twice.n}${shellLetter(twice.l)} twice; write its electrons together, such as ${twice.n}${shellLetter(twice.l)}2.`)
  const many = tooManyOpenShells(parts)
  if (many !== null) return refused('configuration_malformed', `${quoted(text)} cannot be used: ${many}.`)
  if (parts.every(isShell)) return parsed({ core, parts: [...parts] })
  const walk = walkConfiguration(parts)
  const parents = parts.filter((part) => part.kind === 'parent')
  const bad = walk.impossibleParent >= 0 ? parents[walk.impossibleParent] : undefined
  if (bad) return refused('configuration_impossible', `The parent (${printTerm(bad.term, 'ascii')}) in ${quoted(text)} is none of the terms that the shells before it can make; check the parent or the number of electrons.`)
  const wrong = parents.findIndex((parent, index) => parent.term.parity === 'odd' && walk.parentParities[index] !== 'odd')
  if (wrong >= 0) return refused('configuration_impossible', `The parent (${printTerm(parents[wrong]?.term ?? { kind: 'LS', multiplicity: 1, twoS: 0, l: 0, parity: null, label: null, twoJ: null }, 'ascii')}) in ${quoted(text)} is marked odd, but its shells are even; leave the mark out.`)
  let index = 0
  const marked = parts.map((part): ConfigurationPart => {
    if (part.kind === 'shell') return part
    const parity: Parity = walk.parentParities[index] ?? 'even'
    index += 1
    return { kind: 'parent', term: { ...part.term, parity } }
  })
  return parsed({ core, parts: marked })
}

/**
 * Reads a configuration with or without dots and spaces: `2s22p2`, `3d6.(5D).4s.4p.(3P*)`, `3d6(5D)4s4p(3P)`, `[Ar].3d10`, `2s²2p²`.
 * Text run together is read in every way that shells allow and the simplest one is taken (no count of 1 written out, small n);
 * `fits` may choose another, say by the number of electrons (1s22p is 1s2.2p, but 1s.22p in helium). Parents get their parity.
 * Errors: `configuration_malformed` (not a configuration), `configuration_impossible` (3p7, 2d, a shell twice, a parent the shells cannot make).
 */
export function parseConfiguration(text: string, options: { fits?: (configuration: Configuration) => boolean } = {}): Parsed<Configuration> {
  const plain = text.trim()
  if (plain === '') return refused('configuration_malformed', `A configuration is missing: ${FORMS}.`)
  if (plain.length > LONGEST) return refused('configuration_malformed', `${quoted(text)} is too long for a configuration; ${FORMS}.`)
  const coreMatch = /^\[\s*([A-Za-z]{1,2})\s*\]/.exec(plain)
  const core = coreMatch?.[1] ?? null
  if (core !== null && NOBLE_GAS_CORES[core] === undefined) return refused('configuration_malformed', `[${core}] is not a core: the noble gases ${Object.keys(NOBLE_GAS_CORES).join(', ')} can stand in brackets.`)
  const rest = plain.slice(coreMatch?.[0].length ?? 0)
  const segments = /[[\]]/.test(rest) ? null : segmentsOf(rest)
  if (!segments) return refused('configuration_malformed', `The brackets in ${quoted(text)} do not match; ${FORMS}.`)
  const choices: ConfigurationPart[][][] = []
  for (const segment of segments) {
    if (segment.kind === 'parent') {
      const parent = readParent(segment.text, text)
      if (!parent.ok) return parent
      choices.push([[{ kind: 'parent', term: parent.value }]])
      continue
    }
    const readings = readShells(segment.text, text)
    if (!readings.ok) return readings
    choices.push(readings.value)
  }
  if (choices[0]?.[0]?.[0]?.kind === 'parent') return refused('configuration_malformed', `${quoted(text)} begins with a parent; the shells that make it stand before it, such as 3d6(5D)4s.`)
  return firstThatFits(core, combine(choices), text, options.fits)
}

/** The first reading that is possible and fits, else the first that is possible, else why the simplest is not. */
function firstThatFits(core: string | null, readings: readonly ConfigurationPart[][], text: string, fits: ((configuration: Configuration) => boolean) | undefined): Parsed<Configuration> {
  let simplest: Configuration | null = null
  let refusal: Parsed<Configuration> | null = null
  const withParents = readings[0]?.some((part) => part.kind === 'parent') ?? false
  for (const parts of withParents ? readings.slice(0, MOST_WITH_PARENTS) : readings) {
    const reading = settle(core, parts, text)
    if (!reading.ok) refusal ??= reading
    else if (fits === undefined || fits(reading.value)) return reading
    else simplest ??= reading.value
  }
  if (simplest !== null) return parsed(simplest)
  return refusal ?? refused('configuration_malformed', `${quoted(text)} holds no shell; ${FORMS}.`)
}

/** `canonical`: dots between all parts, `3d6.(5D).4s.4p.(3P*)`; `unicode`: for reading, `3d⁶(⁵D)4s4p(³P°)`. */
export function printConfiguration(configuration: Configuration, style: 'canonical' | 'unicode' = 'canonical'): string {
  const unicode = style === 'unicode'
  const raise = (text: string) => text.replace(/\d/g, (d) => SUPERSCRIPTS[Number(d)] ?? d)
  const words = configuration.parts.map((part) => {
    if (part.kind === 'parent') return `(${part.term.label ?? ''}${printTerm(part.term, unicode ? 'unicode' : 'ascii')})`
    const count = part.count === 1 ? '' : String(part.count)
    return `${part.n}${shellLetter(part.l)}${unicode ? raise(count) : count}`
  })
  return [...(configuration.core === null ? [] : [`[${configuration.core}]`]), ...words].join(unicode ? '' : '.')
}

const coreShells = new Map<string, Shell[]>()

/** The shells that a bracketed core stands for. */
function shellsOfCore(core: string | null): Shell[] {
  if (core === null) return []
  const known = coreShells.get(core)
  if (known) return known
  const read = parseConfiguration(NOBLE_GAS_CORES[core] ?? '')
  const shells = read.ok ? read.value.parts.filter(isShell) : []
  coreShells.set(core, shells)
  return shells
}

const ownShells = (configuration: Configuration): Shell[] => configuration.parts.filter(isShell)

/** Number of electrons, the bracketed core's included. */
export const electronCount = (configuration: Configuration): number =>
  [...shellsOfCore(configuration.core), ...ownShells(configuration)].reduce((sum, shell) => sum + shell.count, 0)

/** Odd when the sum of l over the electrons is odd (closed shells add an even number). */
export const parityOf = (configuration: Configuration): Parity => (ownShells(configuration).reduce((sum, shell) => sum + shell.l * shell.count, 0) % 2 === 0 ? 'even' : 'odd')

/** Shells that are neither empty nor full. */
export const openShells = (configuration: Configuration): Shell[] => ownShells(configuration).filter((shell) => shell.count > 0 && shell.count < capacity(shell.l))

/** Twice the largest spin any coupling of the open shells can give: every shell as parallel as Pauli allows. */
export const highestSpin = (configuration: Configuration): TwoJ => openShells(configuration).reduce((sum, shell) => sum + Math.min(shell.count, capacity(shell.l) - shell.count), 0)

/** The whole atom: the core's shells, then the level's; a shell stated in the level replaces the same shell of the core. */
export function fillCore(core: Configuration | null, configuration: Configuration): Configuration {
  if (core === null) return configuration
  const stated = new Set(ownShells(configuration).map((shell) => shell.n * 64 + shell.l))
  const isStated = (shell: Shell) => stated.has(shell.n * 64 + shell.l)
  const bracket = shellsOfCore(core.core)
  const opened = configuration.core !== null || bracket.some(isStated)
  const gas = configuration.core ?? (opened ? null : core.core)
  const given = configuration.core === null ? [...(opened ? bracket : []), ...ownShells(core)] : []
  return { core: gas, parts: [...given.filter((shell) => !isStated(shell)), ...configuration.parts] }
}

export interface ConfigurationProblem {
  code: 'electron_count' | 'core_unknown' | 'term_not_allowed' | 'j_not_half_integer' | 'parity_mismatch'
  detail: string
}

/** Checks the count of electrons of core and level together against Z - charge. */
export function checkConfiguration(configuration: Configuration, atom: { core: Configuration | null; z: number; charge: number }): ConfigurationProblem[] {
  const filled = fillCore(atom.core, configuration)
  const [has, wants] = [electronCount(filled), atom.z - atom.charge]
  if (has === wants) return []
  return [{ code: 'electron_count', detail: `${printConfiguration(filled)} has ${has} electrons, but Z - charge is ${wants}; mend the configuration or the species' core.` }]
}

/** Checks what a level claims against its configuration: whole or half J by the number of electrons, parity, and an LS term its shells can make. */
export function checkLevelOfConfiguration(
  configuration: Configuration,
  level: { electrons: number; twoJ: TwoJ; parity: Parity; twoS: TwoJ | null; l: number | null },
): ConfigurationProblem[] {
  const problems: ConfigurationProblem[] = []
  if (Math.abs(level.electrons - level.twoJ) % 2 === 1) {
    problems.push({ code: 'j_not_half_integer', detail: `With ${level.electrons} electrons J is ${level.electrons % 2 === 1 ? 'half an odd number' : 'a whole number'}; J = ${formatHalf(level.twoJ)} cannot be.` })
  }
  if (parityOf(configuration) !== level.parity) {
    problems.push({ code: 'parity_mismatch', detail: `${printConfiguration(configuration)} is ${parityOf(configuration)}, but the level is given as ${level.parity}.` })
  }
  if (level.twoS !== null && level.l !== null && !termAllowed(configuration, level.twoS, level.l)) {
    problems.push({ code: 'term_not_allowed', detail: `The open shells of ${printConfiguration(configuration)} cannot make a ${level.twoS + 1}${termLetter(level.l)} term (Pauli principle, or its parent).` })
  }
  return problems
}

/** A configuration read for a species: text run together is read so that the electrons come to Z - charge where it can be. */
export const parseConfigurationOf = (text: string, atom: { core: Configuration | null; z: number; charge: number }): Parsed<Configuration> =>
  parseConfiguration(text, { fits: (configuration) => checkConfiguration(configuration, atom).length === 0 })

/** One shell as text, `3d6`. */
export const printShell = shellText
